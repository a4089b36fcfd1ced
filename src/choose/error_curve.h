// What some written colours cost: the columns of the error curve.
#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "choose/study.h"
#include "colour/lab.h"
#include "histogram/colour_table.h"

namespace tincture {

struct PaletteCost {
    double mse = 0;
    double mean_de00 = 0;
    double p95_de00 = 0;
    double max_de00 = 0;
    std::vector<std::uint64_t> pixels;  // nearest to each colour
};

// Every opaque pixel of the table against the colour nearest to it in CIELAB (the first of equally
// near ones). Exact for an exact table; where cells stand for colours, mse is that of the pixels
// and the CIEDE2000 columns are those of the cells' means.
[[nodiscard]] PaletteCost measure_cost(const ColourTable& table, std::span<const Lab> colours);

// The smallest value that at least `share` of the weight does not exceed. Values are not negative.
[[nodiscard]] float weighted_quantile(std::span<const float> values,
                                      std::span<const std::uint64_t> weights, double share);

// The smallest CIEDE2000 between two of the colours; empty for fewer than two.
[[nodiscard]] std::optional<double> closest_pair(std::span<const Lab> colours);

}  // namespace tincture
