// What some written colours cost: the columns of the error curve.
#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "choose/study.h"
#include "colour/lab.h"
#include "histogram/colour_table.h"

namespace tincture {

// Some pixels and how far they are off the colours that stand for them.
struct PixelCost {
    std::uint64_t pixels = 0;
    double de00 = 0;   // summed over the pixels
    double worst = 0;  // CIEDE2000

    void add(const PixelCost& other);
};

// Which colour of one palette the pixels of each colour of another have, and what they cost there.
struct Crossing {
    std::size_t into = 0;          // colours of the palette that they have now
    std::vector<PixelCost> costs;  // of the pixels that had colour i and have j: [i * into + j]

    [[nodiscard]] const PixelCost& at(std::size_t i, std::size_t j) const {
        return costs[i * into + j];
    }
    // Of all pixels that have each colour now.
    [[nodiscard]] std::vector<PixelCost> sums() const;
};

struct PaletteCost {
    double mse = 0;
    double mean_de00 = 0;
    double p95_de00 = 0;
    double max_de00 = 0;
    std::vector<std::uint64_t> pixels;  // nearest to each colour
    Crossing crossing;  // from the palette that was measured before, if there was one
};

// For each colour of a table the one of a palette that is nearest to it.
using TableLabels = std::vector<std::uint16_t>;
[[nodiscard]] TableLabels nearest_of_table(const ColourTable& table, std::span<const Lab> colours);

// Every opaque pixel of the table against the colour nearest to it in CIELAB (the first of equally
// near ones). Exact for an exact table; where cells stand for colours, mse is that of the pixels
// and the CIEDE2000 columns are those of the cells' means. `labels` are those of another palette of
// `labelled` colours, which pixels are told apart by, and become those of this one; they may be
// empty, and all pixels are then of one kind.
[[nodiscard]] PaletteCost measure_cost(const ColourTable& table, std::span<const Lab> colours,
                                       TableLabels& labels, std::size_t labelled);
[[nodiscard]] PaletteCost measure_cost(const ColourTable& table, std::span<const Lab> colours);

// The smallest value that at least `share` of the weight does not exceed. Values are not negative.
[[nodiscard]] float weighted_quantile(std::span<const float> values,
                                      std::span<const std::uint64_t> weights, double share);

// The smallest CIEDE2000 between two of the colours; empty for fewer than two.
[[nodiscard]] std::optional<double> closest_pair(std::span<const Lab> colours);

}  // namespace tincture
