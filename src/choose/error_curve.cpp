#include "choose/error_curve.h"

#include <algorithm>
#include <array>
#include <bit>
#include <cmath>

#include "cluster/nearest.h"
#include "colour/delta_e.h"

namespace tincture {
namespace {

constexpr std::size_t block_size = 2048;

// Colours side by side in single precision, as the vector code takes them.
struct References {
    Centres centres;
    std::vector<float> L, a, b;

    explicit References(std::span<const Lab> colours)
        : centres{3, static_cast<int>(colours.size()), {}} {
        for (const Lab& lab : colours) {
            L.push_back(static_cast<float>(lab.L));
            a.push_back(static_cast<float>(lab.a));
            b.push_back(static_cast<float>(lab.b));
            centres.x.insert(centres.x.end(), {L.back(), a.back(), b.back()});
        }
    }
};

std::array<const float*, 3> planes_from(const ColourTable& table, std::size_t start) {
    return {table.L.data() + start, table.a.data() + start, table.b.data() + start};
}

// Adds the colours [start, start + size) to the cost and writes their differences; `labels` are
// theirs, and change from those of the palette before to those of this one.
void measure_block(const ColourTable& table, const References& references, std::size_t start,
                   std::size_t size, PaletteCost& cost, std::uint16_t* labels, float* de00) {
    std::array<std::uint16_t, block_size> label;
    std::array<float, block_size> squared;
    const std::array<const float*, 3> plane = planes_from(table, start);
    nearest_centres({plane.data(), 3, size}, references.centres, label.data(), squared.data());
    delta_e_2000_batch({plane[0], plane[1], plane[2], label.data(), size},
                       {references.L.data(), references.a.data(), references.b.data()}, de00);
    for (std::size_t i = 0; i < size; ++i) {
        const std::uint64_t count = table.count[start + i];
        const auto weight = static_cast<double>(count);
        cost.mse += weight * static_cast<double>(squared[i]);
        const auto off = static_cast<double>(de00[i]);
        cost.crossing.costs[labels[i] * cost.crossing.into + label[i]].add(
            {count, weight * off, off});
    }
    std::copy_n(label.begin(), size, labels);
}

}  // namespace

void PixelCost::add(const PixelCost& other) {
    pixels += other.pixels;
    de00 += other.de00;
    worst = std::max(worst, other.worst);
}

std::vector<PixelCost> Crossing::sums() const {
    std::vector<PixelCost> sums(into);
    for (std::size_t i = 0; i < costs.size(); ++i) sums[i % into].add(costs[i]);
    return sums;
}

TableLabels nearest_of_table(const ColourTable& table, std::span<const Lab> colours) {
    const References references(colours);
    TableLabels labels(table.size());
    std::array<float, block_size> squared;
    for (std::size_t start = 0; start < table.size(); start += block_size) {
        const std::array<const float*, 3> plane = planes_from(table, start);
        nearest_centres({plane.data(), 3, std::min(block_size, table.size() - start)},
                        references.centres, labels.data() + start, squared.data());
    }
    return labels;
}

PaletteCost measure_cost(const ColourTable& table, std::span<const Lab> colours,
                         TableLabels& labels, std::size_t labelled) {
    if (labels.empty()) {
        labels.assign(table.size(), 0);
        labelled = 1;
    }
    PaletteCost cost;
    cost.crossing = {colours.size(), std::vector<PixelCost>(labelled * colours.size())};
    const References references(colours);
    std::vector<float> de00(table.size());
    for (std::size_t start = 0; start < table.size(); start += block_size) {
        measure_block(table, references, start, std::min(block_size, table.size() - start), cost,
                      labels.data() + start, de00.data() + start);
    }
    for (const PixelCost& sum : cost.crossing.sums()) {
        cost.pixels.push_back(sum.pixels);
        cost.mean_de00 += sum.de00;
        cost.max_de00 = std::max(cost.max_de00, sum.worst);
    }
    const auto pixels = static_cast<double>(table.opaque_pixels);
    cost.mse = (cost.mse + table.inner_scatter) / pixels;
    cost.mean_de00 /= pixels;
    cost.p95_de00 = static_cast<double>(weighted_quantile(de00, table.count, 0.95));
    return cost;
}

PaletteCost measure_cost(const ColourTable& table, std::span<const Lab> colours) {
    TableLabels labels;
    return measure_cost(table, colours, labels, 1);
}

float weighted_quantile(std::span<const float> values, std::span<const std::uint64_t> weights,
                        double share) {
    // The bits of floats that are not negative are ordered as the floats are: count by their high
    // bits, then sort only what shares those of the quantile.
    constexpr int low_bits = 18;  // few enough bins to stay near
    std::vector<std::uint64_t> bins(std::size_t{1} << (32 - 1 - low_bits), 0);
    std::uint64_t total = 0;
    for (std::size_t i = 0; i < values.size(); ++i) {
        bins[std::bit_cast<std::uint32_t>(values[i]) >> low_bits] += weights[i];
        total += weights[i];
    }
    const double wanted = share * static_cast<double>(total);
    std::uint64_t below = 0;
    std::size_t bin = 0;
    while (static_cast<double>(below + bins[bin]) < wanted) below += bins[bin++];
    std::vector<std::pair<float, std::uint64_t>> candidates;
    for (std::size_t i = 0; i < values.size(); ++i) {
        if (std::bit_cast<std::uint32_t>(values[i]) >> low_bits == bin) {
            candidates.emplace_back(values[i], weights[i]);
        }
    }
    std::sort(candidates.begin(), candidates.end());
    float quantile = 0;
    for (const auto& [value, weight] : candidates) {
        if (weight == 0) continue;
        quantile = value;
        below += weight;
        if (static_cast<double>(below) >= wanted) break;
    }
    return quantile;
}

std::optional<double> closest_pair(std::span<const Lab> colours) {
    std::optional<double> closest;
    for (std::size_t i = 0; i < colours.size(); ++i) {
        for (std::size_t j = i + 1; j < colours.size(); ++j) {
            const double difference = delta_e_2000(colours[i], colours[j]);
            if (!closest || difference < *closest) closest = difference;
        }
    }
    return closest;
}

}  // namespace tincture
