#include "evidence/accents.h"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <numeric>
#include <unordered_map>
#include <utility>

#include "histogram/cells.h"

namespace tincture {
namespace {

// Found by trial on drawn photographs (tests/corpus).
constexpr double cell_de = 2;
constexpr double gather_de = 5;      // colours of an accent lie within this of its peak
constexpr double per_noise = 1.5;    // or within so many times the noise
constexpr double body_de = 10;       // what belongs to it in light and shade
constexpr double apart_de = 25;      // what is nearer than this is not apart
constexpr double most_share = 0.02;  // more is an area
constexpr double block_de = 12;      // what weighs more than that together is one
constexpr std::size_t peaks_to_try = 64;
constexpr std::size_t most_accents = 3;

struct Limits {
    double least_share;
    double prominence;
    double alone;  // of what is within apart_de, the part within body_de
};
constexpr Limits wanted = {0.0005, 0.3, 0.35};
constexpr Limits for_certain = {0.001, 0.5, 0.7};

double weight_within(const WeightedPoints& points, const Peak& peak, double reach) {
    double sum = 0;
    for (std::size_t i = 0; i < points.n; ++i) {
        if (squared_distance(points, i, peak) <= reach * reach) sum += points.weight[i];
    }
    return sum;
}

// The cells that are not in the midst of an area: peaks are looked for among few.
WeightedPoints outside_areas(const WeightedPoints& cells) {
    const auto block = [&](std::size_t i) {
        const auto step = [](float value) {
            return static_cast<std::uint64_t>(std::floor(static_cast<double>(value) / block_de) +
                                              512);
        };
        return step(cells.plane(0)[i]) << 40 | step(cells.plane(1)[i]) << 20 |
               step(cells.plane(2)[i]);
    };
    std::unordered_map<std::uint64_t, double> weight;
    for (std::size_t i = 0; i < cells.n; ++i) weight[block(i)] += cells.weight[i];
    std::vector<std::size_t> few;
    for (std::size_t i = 0; i < cells.n; ++i) {
        if (weight[block(i)] <= most_share * cells.total_weight) few.push_back(i);
    }
    WeightedPoints points;
    points.n = few.size();
    for (int d = 0; d < 3; ++d) {
        for (const std::size_t i : few) points.x.push_back(cells.plane(d)[i]);
    }
    for (const std::size_t i : few) points.weight.push_back(cells.weight[i]);
    points.total_weight = std::accumulate(points.weight.begin(), points.weight.end(), 0.0);
    return points;
}

}  // namespace

std::vector<Peak> find_accents(const WeightedPoints& points, double noise_de, bool certain) {
    const Limits& limits = certain ? for_certain : wanted;
    const WeightedPoints cells = merge_into_cells(points, cell_de);
    const double radius = std::max(gather_de, per_noise * noise_de);
    std::vector<std::pair<double, Peak>> found;
    for (const Peak& peak : find_peaks(outside_areas(cells), radius,
                                       limits.least_share * cells.total_weight, peaks_to_try)) {
        const double body = weight_within(cells, peak, std::max(body_de, 2 * radius));
        if (body > most_share * cells.total_weight || peak.prominence < limits.prominence) continue;
        const double alone = body / weight_within(cells, peak, apart_de + radius);
        if (alone >= limits.alone) found.emplace_back(alone, peak);
    }
    std::stable_sort(found.begin(), found.end(),
                     [](const auto& one, const auto& two) { return one.first > two.first; });
    std::vector<Peak> accents;
    for (const auto& [alone, peak] : found) {
        if (accents.size() < most_accents) accents.push_back(peak);
    }
    return accents;
}

std::vector<Peak> accents_of(const Evidence& evidence, Emphasis emphasis) {
    const bool certain = emphasis == Emphasis::automatic;
    if (emphasis == Emphasis::area || (certain && evidence.facts.kind == "flat art")) return {};
    return find_accents(evidence.points, evidence.facts.noise.value_or(0), certain);
}

WeightedPoints emphasised(const WeightedPoints& points, const std::vector<Peak>& accents) {
    WeightedPoints result = points;
    for (const Peak& accent : accents) {
        const double now = weight_within(points, accent, gather_de);
        if (now <= 0) continue;
        // Whole numbers, so that sums stay exact.
        const double times = std::max(1.0, std::round(accent_share * points.total_weight / now));
        for (std::size_t i = 0; i < points.n; ++i) {
            if (squared_distance(points, i, accent) > gather_de * gather_de) continue;
            result.total_weight += points.weight[i] * times - result.weight[i];
            result.weight[i] = points.weight[i] * times;
        }
    }
    return result;
}

}  // namespace tincture
