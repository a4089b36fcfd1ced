// Weighted k-means from given centres (Lloyd 1982, IEEE Trans. Information Theory 28:129-137).
#pragma once

#include "cluster/partition.h"
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

// The same from a partition that is nearly that of the centres, which spares most of the first
// pass; it is left as that of the centres that are returned.
double lloyd(const WeightedPoints& points, Centres& centres, int fixed, const LloydLimits& limits,
             Partition& partition);

// The objective of some centres as they are.
[[nodiscard]] double objective(const WeightedPoints& points, const Centres& centres);

}  // namespace tincture
