#include "evidence/accents.h"

#include <algorithm>
#include <cmath>
#include <cstddef>
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

}  // namespace

std::vector<Peak> find_accents(const WeightedPoints& points, double noise_de, bool certain) {
    const Limits& limits = certain ? for_certain : wanted;
    const WeightedPoints cells = merge_into_cells(points, cell_de);
    const double radius = std::max(gather_de, per_noise * noise_de);
    std::vector<std::pair<double, Peak>> found;
    for (const Peak& peak :
         find_peaks(cells, radius, limits.least_share * cells.total_weight, peaks_to_try)) {
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
