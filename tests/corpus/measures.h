// How far labels and palettes are from the truth of a sample.
#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "tests/corpus/pictures.h"

namespace tincture::corpus {

// For each palette colour the ink that it stands for: the nearest in CIEDE2000.
[[nodiscard]] std::vector<std::uint8_t> nearest_inks(std::span<const Rgb8> palette,
                                                     std::span<const Rgb8> inks);

// The part of the pixels that got an ink which no pixel within one of them (3 x 3) has in truth.
[[nodiscard]] double halo_share(const Sample& sample, std::span<const std::uint8_t> got_inks);

// For each ink of more than 1 % the CIEDE2000 to its palette colour, in the one-to-one assignment
// with the smallest sum. The palette has as many colours as there are inks.
[[nodiscard]] std::vector<double> palette_errors(const Sample& sample,
                                                 std::span<const Rgb8> palette);

// What could be had at best from colour alone: for each pixel, of the true inks within one pixel of
// it (3 x 3), the one nearest in CIELAB. A reference for the other figures, no goal.
[[nodiscard]] std::vector<std::uint8_t> labels_of_those_near(const Sample& sample,
                                                             const Picture& worn);

struct StrokeTally {
    std::uint64_t pixels = 0;  // of strokes in truth
    std::uint64_t kept = 0;    // of these with the ink of their stroke
    int strokes = 0;           // that hang together in truth
    int connected = 0;         // of these that still do: see below
    void add(const StrokeTally& other);
};

// A stroke is connected if, of the pixels with its ink within one pixel of it, one 8-connected
// component comes within one pixel of all its pixels.
[[nodiscard]] StrokeTally tally_strokes(const Sample& sample,
                                        std::span<const std::uint8_t> got_inks);

}  // namespace tincture::corpus
