// Weighted points for tests of clustering, and the plain, slow versions of what is done to them.
#pragma once

#include <cstdint>
#include <vector>

#include "histogram/weighted_points.h"
#include "tests/support/random.h"

namespace tincture::test_support {

using Rows = std::vector<std::vector<double>>;

// One row of coordinates a point.
[[nodiscard]] WeightedPoints points_from(const Rows& rows, const std::vector<double>& weights);

// Points in `groups` clouds within -100..100 whose deviation is `spread`; coordinates in steps of
// 2^-14, whole weights from 1 to `heaviest`: sums over them are exact.
struct Clouds {
    std::size_t n = 1000;
    int dims = 3;
    int groups = 5;
    double spread = 10;
    std::size_t heaviest = 20;
};
[[nodiscard]] WeightedPoints cloud_points(Random& random, const Clouds& clouds);

// The same points in another order.
[[nodiscard]] WeightedPoints shuffled(const WeightedPoints& points, Random& random);

// The first `n` points, or those from `n` on.
[[nodiscard]] WeightedPoints first_points(const WeightedPoints& points, std::size_t n);
[[nodiscard]] WeightedPoints last_points(const WeightedPoints& points, std::size_t n);

// Some of the points as centres, each taken once.
[[nodiscard]] Centres points_as_centres(const WeightedPoints& points, int count, Random& random);

// The nearest centre as nearest_centres() defines it: single precision, dimension by dimension.
struct Nearest {
    std::uint16_t label;
    float squared;
};
[[nodiscard]] Nearest plain_nearest(const WeightedPoints& points, std::size_t i,
                                    const Centres& centres);

// Weighted k-means as the textbook has it (Lloyd 1982), in double precision throughout: points to
// their nearest centre, centres to their mean, until nothing moves or the passes are over. Empty
// clusters stay where they are. Returns the objective of the centres that it leaves; inner scatter
// included.
double plain_lloyd(const WeightedPoints& points, Rows& centres, int passes);
[[nodiscard]] double plain_objective(const WeightedPoints& points, const Rows& centres);
[[nodiscard]] Rows rows_of(const Centres& centres);

}  // namespace tincture::test_support
