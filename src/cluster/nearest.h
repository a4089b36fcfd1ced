// The innermost loop of everything: the nearest of some centres, for many points.
#pragma once

#include <cstddef>
#include <cstdint>

#include "histogram/weighted_points.h"

namespace tincture {

// Points as `dims` planes of n floats each.
struct PointPlanes {
    const float* const* plane;
    int dims;
    std::size_t n;
};

// For each point the index of its nearest centre (the lower index where two are equally near) and
// the squared Euclidean distance to it, in single precision, summed dimension by dimension with
// separate multiply and add: the same bits for every instruction set. At most 65,536 centres.
void nearest_centres(const PointPlanes& points, const Centres& centres, std::uint16_t* label,
                     float* squared_distance);

// The same, and the squared distance to the second nearest (3.0e38 where there is one centre).
void nearest_two_centres(const PointPlanes& points, const Centres& centres, std::uint16_t* label,
                         float* squared_distance, float* second_squared_distance);

// The same as the first for the points [start, start + size).
void nearest_centres(const WeightedPoints& points, std::size_t start, std::size_t size,
                     const Centres& centres, std::uint16_t* label, float* squared_distance);

}  // namespace tincture
