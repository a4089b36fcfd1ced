// Clustering for every count of a range.
#pragma once

#include <functional>
#include <vector>

#include "histogram/weighted_points.h"

namespace tincture {

struct SweepOptions {
    int max_count =
        25;  // every count from max(1, fixed) to this is measured, if there are as many points
    int extra_count = 0;  // one more count beyond max_count, or 0
    Centres kept;         // centres that must be in every result, unmoved (may be empty)
    // Called now and then with the part that is done, 0 to 1; from any thread, one at a time.
    std::function<void(double)> progress;
};

// Centres for each count, rising, the kept ones first, and their objectives: the sum over the
// points of weight * squared distance to the nearest centre, inner scatter included.
struct Sweep {
    std::vector<Centres> centres;
    std::vector<double> objective;
    std::vector<std::vector<double>> weights;  // for each count, of the points of each centre
    double weight = 0;                         // of all points
    WeightedPoints coarse;                     // the few cells that centres were searched on
    int kept = 0;
};

// Good centres of every count are searched for on coarse cells of the points (search_counts()), and
// polished on the points themselves. The objective never rises with the count. Deterministic, for
// any number of threads. The counts end at the number of points, where the objective is the inner
// scatter.
[[nodiscard]] Sweep sweep_counts(const WeightedPoints& points, const SweepOptions& options);

}  // namespace tincture
