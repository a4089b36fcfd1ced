#pragma once

#include "histogram/weighted_points.h"

namespace tincture {

// Points merged into cells of `edge` on a side: each cell stands at the mean of its points, and the
// scatter around it is kept in inner_scatter, so that the error of the cells is the error of the
// points. Three dimensions only; more are returned as they are. The order of the points has no say
// where sums are exact (see WeightedPoints).
[[nodiscard]] WeightedPoints merge_into_cells(const WeightedPoints& points, double edge);

}  // namespace tincture
