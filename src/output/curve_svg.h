// curve.svg: the error curve as a drawing for a report.
#pragma once

#include <string>

#include "choose/study.h"

namespace tincture {

// Two panels over the counts: above, the error as the root of the mean squared dE76, of all pixels
// and of the evidence; below, CIEDE2000 on average and for 95 % of the pixels, with the tolerance.
// Knee, first count within the tolerance, defensible range and the count in use are marked and
// named. Text covers neither text nor curves, by the widths of the built-in typeface and 12 % more.
// Throws std::out_of_range where the study holds nothing for its count.
[[nodiscard]] std::string curve_svg(const Study& study);

}  // namespace tincture
