// The space in which blends are looked at: a mixture of two colours lies on the straight line
// between them, and lightness stands apart from colour, because JPEG keeps the two differently.
#pragma once

#include <cstdint>
#include <vector>

#include "palette/palette.h"

namespace tincture {

// Luma and two colour differences of the colour as sRGB would encode it (IEC 61966-2-1; weights of
// ITU-R BT.601), full scale 255; the differences count for colour_weight of theirs there.
struct Mixed {
    float y = 0;
    float u = 0;
    float v = 0;
};

inline constexpr float colour_weight = 0.7F;

[[nodiscard]] Mixed mixed_of(float L, float a, float b);
[[nodiscard]] std::vector<Mixed> mixed_of(const Palette& palette);

[[nodiscard]] constexpr Mixed operator-(const Mixed& one, const Mixed& two) {
    return {one.y - two.y, one.u - two.u, one.v - two.v};
}
[[nodiscard]] constexpr float dot(const Mixed& one, const Mixed& two) {
    return one.y * two.y + one.u * two.u + one.v * two.v;
}

}  // namespace tincture
