// Colour differences.
#pragma once

#include <cstddef>
#include <cstdint>

#include "colour/lab.h"

namespace tincture {

// CIE 1976: the Euclidean distance.
[[nodiscard]] double delta_e_76(const Lab& one, const Lab& two);

// CIEDE2000 with kL = kC = kH = 1, symmetric. Sharma, Wu, Dalal, "The CIEDE2000 color-difference
// formula: implementation notes, supplementary test data, and mathematical observations", Color
// Research and Application 30 (2005) 21-30. Within delta_e_2000_error of the formula for |L|, |a|,
// |b| up to 200. Plain arithmetic and square roots only: the same bits on every processor. Hues
// within 1e-9 of a half-turn apart are taken as a half-turn apart, where the formula jumps.
[[nodiscard]] double delta_e_2000(const Lab& one, const Lab& two);
inline constexpr double delta_e_2000_error = 1e-9;

// CIEDE2000 of n colours, each against the reference that `label` gives it; written to `out`. In
// single precision with vectors: the same bits for every instruction set. Within
// delta_e_2000_batch_error of delta_e_2000() for L in 0..100, |a| and |b| up to 128, but for hues
// within 2e-6 of a half-turn apart and mean hues within 2e-6 of zero (in radians): the formula
// jumps there.
struct LabelledColours {
    const float* L;
    const float* a;
    const float* b;
    const std::uint16_t* label;
    std::size_t n;
};
struct ReferenceColours {
    const float* L;
    const float* a;
    const float* b;
};
void delta_e_2000_batch(const LabelledColours& colours, const ReferenceColours& references,
                        float* out);
inline constexpr double delta_e_2000_batch_error = 1e-4;

}  // namespace tincture
