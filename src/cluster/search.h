// The search for good centres at every count, on few points.
#pragma once

#include <functional>
#include <vector>

#include "histogram/weighted_points.h"

namespace tincture {

// Centres for each count from max(1, kept) to max_count, or as far as there are distinct points;
// the kept ones first and unmoved. Once up through the counts, splitting; once down, each time
// taking out the centre that is missed least; and up again where that helped: each count keeps the
// better of what it has and what its neighbour leads to. At each count centres are exchanged, one
// that is missed little for half of a cluster whose split gains much, as long as that lowers the
// objective. Which are such is found by trying: every promising centre out, every promising split
// in, each alone with a few passes of k-means. Meant for some thousand points. `progress` is called
// with the part done, 0 to 1.
[[nodiscard]] std::vector<Centres> search_counts(const WeightedPoints& points,
                                                 const Centres& kept_centres, int max_count,
                                                 const std::function<void(double)>& progress);

}  // namespace tincture
