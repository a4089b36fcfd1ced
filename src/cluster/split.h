// The two moves of the search for good centres: halving a cluster and missing a centre.
#pragma once

#include <array>
#include <vector>

#include "histogram/weighted_points.h"

namespace tincture {

// A cluster's best halves and what they would save.
struct Split {
    double gain = 0;               // how much the objective falls, other clusters left alone
    std::vector<float> low, high;  // the two centres, `dims` values each
};

// Which points belong to which centre: indices of points, cluster after cluster.
struct Members {
    std::vector<std::size_t> index;
    std::vector<std::size_t> start;  // count + 1 offsets into `index`
    // For each cluster, what the objective rises by when its points go to their second nearest
    // centre.
    std::vector<double> removal_cost;
    std::vector<double> scatter;  // sum of weight * squared distance to the centre
};
[[nodiscard]] Members members_of(const WeightedPoints& points, const Centres& centres);

// Halves a cluster: a cut through its mean across its longest axis, then a few rounds of 2-means
// within it. A cluster of fewer than two distinct points gains nothing.
[[nodiscard]] Split split_cluster(const WeightedPoints& points, const std::size_t* index,
                                  std::size_t n);

}  // namespace tincture
