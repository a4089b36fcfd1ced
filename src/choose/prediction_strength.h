// Whether halves of the evidence find the same clusters.
#pragma once

#include <cstdint>
#include <functional>
#include <span>
#include <vector>

#include "histogram/weighted_points.h"

namespace tincture {

// How evidence is halved: it is seen as units, drawn in proportion to the weights, and a coin says
// for each which half it goes to.
struct Halving {
    // Of weights that sum to more, so many units are drawn; else they are units as they are.
    double units = 40'000;
    // No cell of this edge sends more than so many of them: a large colour would outnumber a small
    // one by thousands, and with thousands any cluster can be cut in the same way twice. In three
    // dimensions; 0: no limit.
    double units_a_cell = 0;
    double cell_edge = 12;
    double most_units = 2000;  // altogether: where cells send more, each sends less
    // A unit lies off its point by a normal deviate of this deviation in each dimension.
    double blur = 0;
    int splits = 3;
    std::uint64_t seed = 1;
};

// Clusters a half: the centres for each count.
using HalfClustering = std::function<std::vector<Centres>(const WeightedPoints& half)>;

// The prediction strength of each of `counts` counts, as `cluster` gives them: each cluster of a
// half is looked at with the other half's centres, and the share of its pairs of units that these
// leave together is what it keeps. The least share of all clusters counts, as the mean over both
// halves and all splits. A single cluster keeps 1; of several, one of less than two units keeps 0,
// and so does a half without centres of a count. Tibshirani, Walther, "Cluster validation by
// prediction strength", Journal of Computational and Graphical Statistics 14 (2005) 511-528. The
// same for any number of threads.
[[nodiscard]] std::vector<double> prediction_strengths(const WeightedPoints& points,
                                                       std::size_t counts, const Halving& halving,
                                                       const HalfClustering& cluster);

// A clustering of halves that takes a hundredth of the time of a search: for each count, a half
// starts from the centres that the whole has for one count fewer, and finds for itself where one
// more pays most; then k-means. `centres` are those of the whole, counts rising by one; the first
// `kept` of each stay where they are.
[[nodiscard]] HalfClustering grown_from(std::span<const Centres> centres, int kept);

}  // namespace tincture
