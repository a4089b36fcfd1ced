// Weighted k-means from given centres (Lloyd 1982, IEEE Trans. Information Theory 28:129-137).
#pragma once

#include <vector>

#include "histogram/weighted_points.h"

namespace tincture {

struct LloydLimits {
    int passes = 100;
    double relative_gain = 1e-6;  // stop when a pass lowers the objective by less than this part
};

// Moves the centres to a local minimum of the objective and returns it: the sum of weight * squared
// distance to the nearest centre, inner scatter included, of the centres as they are returned. The
// first `fixed` centres stay where they are. A centre that no point is nearest to is put on the
// point that adds most to the objective, as long as one lies off its centre. The same result for
// any number of threads.
double lloyd(const WeightedPoints& points, Centres& centres, int fixed, const LloydLimits& limits);

// The objective of some centres as they are.
[[nodiscard]] double objective(const WeightedPoints& points, const Centres& centres);

// What one pass over the points finds for each cluster.
struct ClusterSums {
    std::vector<double> weight;   // count
    std::vector<double> moment;   // count * dims: sum of weight * coordinate
    std::vector<double> scatter;  // count: sum of weight * squared distance to the centre
    double objective = 0;         // of the points: inner scatter not included
};
[[nodiscard]] ClusterSums sum_clusters(const WeightedPoints& points, const Centres& centres);

}  // namespace tincture
