// Fills a study: what each count of a sweep costs, and what that speaks for.
#pragma once

#include "choose/study.h"
#include "cluster/sweep.h"
#include "colour/colour_space.h"
#include "histogram/colour_table.h"

namespace tincture {

// Writes the palette of every count of the sweep in `written_space` and measures it on the table.
// Fills `curve` and `palettes`; takes nothing else from the study.
void measure_curve(Study& study, const ColourTable& table, const Sweep& sweep,
                   const ColourSpace& written_space);

// The mean squared dE76, over every pixel of the table, of the palette of `count` colours that
// other points lead to, with the same options of the sweep.
[[nodiscard]] double mse_with(const WeightedPoints& points, const SweepOptions& options, int count,
                              const ColourTable& table, const ColourSpace& written_space);

// Halves the evidence some times and fills `prediction_strength` of the first counts of the curve.
// Needs the curve of the same sweep, and the evidence's noise.
void measure_stability(Study& study, const Sweep& sweep, std::uint64_t seed = 1);

}  // namespace tincture
