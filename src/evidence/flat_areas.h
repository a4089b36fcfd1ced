#pragma once

#include <vector>

#include "histogram/colour_counts.h"
#include "histogram/pixel_lab.h"

namespace tincture {

// A Lab colour in the steps of a LabBand as one number, and back.
[[nodiscard]] std::uint64_t lab_key(std::int16_t L, std::int16_t a, std::int16_t b);
[[nodiscard]] LabSteps lab_of_key(std::uint64_t key);

// Where flat pixels lie, and their colours to half a Lab unit.
struct FlatMap {
    std::uint32_t width = 0;
    std::uint32_t height = 0;
    std::vector<std::uint32_t> colour;  // row by row, packed

    static constexpr std::uint32_t not_flat = 0;
    [[nodiscard]] static std::uint32_t pack(const LabSteps& lab);
    [[nodiscard]] static LabSteps lab_of(std::uint32_t colour);
};

// The colours of flat areas: how many pixels have each, by lab_key(), ascending. A pixel is flat if
// at least six of its eight neighbours are near it in colour: inside an area, or inside a stroke
// of three pixels, but not on the blend along an edge, where only the neighbours along the edge
// are. What is noisy is smoothed first, and its flat pixels have the smoothed colours. Colours are
// exact where they are `few` and nothing is smoothed, else rounded to half a Lab unit.
struct FlatColours {
    std::vector<ColourCount> colours;
    bool exact = false;
    FlatMap map;
};
[[nodiscard]] FlatColours count_flat_colours(const PixelLab& pixels, double noise_de, bool few);

}  // namespace tincture
