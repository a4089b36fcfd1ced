// What is lost from one count to the next smaller one.
#pragma once

#include <cstddef>
#include <vector>

#include "choose/error_curve.h"
#include "colour/lab.h"
#include "colour/rgb.h"

namespace tincture {

// A palette as it is written, in any order.
struct WrittenColours {
    std::vector<Rgb8> rgb;
    std::vector<Lab> lab;
};

struct LostColour {
    std::size_t colour = 0;         // of the larger palette
    std::size_t into = 0;           // of the smaller one: the colour that most of its pixels get
    std::uint64_t into_pixels = 0;  // so many of them
    PixelCost cost;                 // of all its pixels, against the colours that they get
};

// Colours of a palette and of one that is smaller by one become partners in this order: colours
// that are in both; then the most shared pixels first, of equal ones the nearest in CIELAB; then
// the nearest. The one that stays without a partner is the one that was lost. `crossing` is from
// the larger palette to the smaller.
[[nodiscard]] LostColour lost_colour(const WrittenColours& more, const WrittenColours& fewer,
                                     const Crossing& crossing);

}  // namespace tincture
