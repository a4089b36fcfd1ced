#pragma once

#include "colour/lab.h"

namespace tincture::test_support {

// CIEDE2000 as it is printed, with angles in degrees, in long double: the slow oracle. Sharma, Wu,
// Dalal, Color Research and Application 30 (2005) 21-30, equations 2 to 22.
[[nodiscard]] long double ciede2000_textbook(const Lab& one, const Lab& two);

// How far the two hues h' are from a half-turn apart, and the mean hue h_bar' from 0, in radians.
struct HueGaps {
    long double from_half_turn;
    long double mean_from_zero;
};
[[nodiscard]] HueGaps hue_gaps(const Lab& one, const Lab& two);

}  // namespace tincture::test_support
