#pragma once

#include <array>
#include <cstddef>
#include <cstdint>
#include <vector>

#include "evidence/flat_areas.h"
#include "evidence/peaks.h"

namespace tincture {

// What the pixels of a peak look like in the picture.
struct PeakBody {
    // Of its pixels, those whose eight neighbours are its own too: none in a stroke of one or two
    // pixels, however many of that pass for flat.
    std::size_t solid = 0;
    std::size_t pixels = 0;
    // Of its borders to other pixels, the part, 0 to 1, beyond which it is flat as well: small for
    // an ink, which ends in an edge, large for a piece of a fade.
    double open = 0;
};

// Where in the picture the colours of peaks lie. A blend lies between the two inks that it is a
// blend of; an ink whose colour happens to lie between two others does not.
class PeakPlaces {
  public:
    // At most so many peaks are looked for; those after them are nowhere.
    static constexpr std::size_t most_peaks = 64;

    // A flat pixel is of the nearest peak within 1.5 times `radius` (dE76) of its colour.
    PeakPlaces(const FlatMap& map, const std::vector<Peak>& peaks, double radius);

    // The peak of a pixel, most_peaks or more where it has none.
    [[nodiscard]] std::size_t peak_at(std::size_t x, std::size_t y) const {
        return peak_[y * static_cast<std::size_t>(width_) + x];
    }

    // Of all pixels of peak `i` or, where they are many, of some thousands, scaled to all.
    [[nodiscard]] PeakBody body(std::size_t i) const;

    // Which peaks lie within `reach` pixels, across and down, of a pixel of peak `i`: one bit each,
    // for all its pixels or, where they are many, for some hundreds; or for its rim alone, the
    // pixels that are not solid.
    [[nodiscard]] std::vector<std::uint64_t> peaks_near(std::size_t i, int reach) const;
    [[nodiscard]] std::vector<std::uint64_t> peaks_near_rim(std::size_t i, int reach) const;

  private:
    static constexpr std::uint8_t not_flat = 0xFF;
    static constexpr std::uint8_t no_peak = 0xFE;  // but flat

    [[nodiscard]] bool is_solid(std::uint32_t pixel) const;
    [[nodiscard]] std::uint64_t peaks_around(std::uint32_t pixel, int reach) const;
    // Calls body(peak) for the pixels up to `reach` away that are in the picture.
    template <typename Body>
    void for_square(std::uint32_t pixel, int reach, const Body& body) const;

    std::ptrdiff_t width_;
    std::ptrdiff_t height_;
    std::vector<std::uint8_t> peak_;  // of each pixel
    std::array<std::vector<std::uint32_t>, most_peaks> pixels_;
};

}  // namespace tincture
