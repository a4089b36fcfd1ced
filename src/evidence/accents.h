// Small but telling colours: those that cover little and are far from all others.
#pragma once

#include <vector>

#include "evidence/evidence.h"
#include "evidence/peaks.h"
#include "histogram/weighted_points.h"

namespace tincture {

// What clustering is to look after: areas alone; small colours that stand apart as well; or these
// where they stand apart for certain and nothing else names the colours.
enum class Emphasis { area, accent, automatic };

// Colours that gather on 0.05 to 2 percent of the weight of `points` (three dimensions, CIELAB) and
// have little else within 25 dE76 of them: at most three, the furthest from others first. `certain`
// asks for more of both. `noise_de` is that of the picture.
[[nodiscard]] std::vector<Peak> find_accents(const WeightedPoints& points, double noise_de,
                                             bool certain);

// Those that `emphasis` asks for: none for area; for `automatic` the certain ones, and none in flat
// art, where flat areas name the colours.
[[nodiscard]] std::vector<Peak> accents_of(const Evidence& evidence, Emphasis emphasis);

// Each accent's points with so much more weight that they are accent_share of all. The others keep
// theirs, so that the price is a larger error over areas.
[[nodiscard]] WeightedPoints emphasised(const WeightedPoints& points,
                                        const std::vector<Peak>& accents);
inline constexpr double accent_share = 0.05;

}  // namespace tincture
