// The only thing that clustering takes.
#pragma once

#include <cstddef>
#include <vector>

#include "histogram/colour_table.h"

namespace tincture {

constexpr int max_dims = 16;

// n points in `dims` dimensions (1 to max_dims), each standing for a weight of original points
// around it. Sums of weight * coordinate are exact, and so independent of any order, as long as
// weights are whole and coordinates come in steps of 2^-14 (colours of up to 2^32 pixels).
struct WeightedPoints {
    int dims = 3;
    std::size_t n = 0;
    std::vector<float> x;        // planar: x[d * n + i]
    std::vector<double> weight;  // positive
    double total_weight = 0;
    // Sum over all originals of weight * squared distance to the point that stands for them. It
    // adds to every objective, so that an error of merged points is the error of the originals.
    double inner_scatter = 0;

    [[nodiscard]] const float* plane(int d) const {
        return x.data() + static_cast<std::size_t>(d) * n;
    }
};

// The colours of a table as points, each weighing its number of pixels.
[[nodiscard]] WeightedPoints points_of(const ColourTable& table);

// `count` centres, row by row: x[k * dims + d].
struct Centres {
    int dims = 3;
    int count = 0;
    std::vector<float> x;

    [[nodiscard]] const float* row(int k) const {
        return x.data() + static_cast<std::size_t>(k) * static_cast<std::size_t>(dims);
    }
    [[nodiscard]] float* row(int k) {
        return x.data() + static_cast<std::size_t>(k) * static_cast<std::size_t>(dims);
    }
};

}  // namespace tincture
