// Fisher's iris as points to cluster: 150 points in 4 dimensions, each of weight 1.
#pragma once

#include <vector>

#include "histogram/weighted_points.h"
#include "tests/support/random.h"

namespace tincture::test_support {

[[nodiscard]] WeightedPoints iris_points();

// The best known sums of squares for 1 to 10 clusters; see SOURCES.md.
[[nodiscard]] std::vector<double> iris_best_known();

// A partition: its centres, sum of squares and cluster sizes.
struct Clustered {
    Centres centres;
    double W = 0;
    std::vector<double> sizes;
};

// The best of `starts` runs of k-means from points drawn at random, or the first that reaches
// `enough`.
[[nodiscard]] Clustered best_of_starts(const WeightedPoints& points, int count, double enough,
                                       int starts);

}  // namespace tincture::test_support
