#include <algorithm>

#include "choose/criteria.h"
#include "choose/curve_shape.h"
#include "support/format.h"
#include "support/maths.h"

namespace tincture {
namespace {

// Mean squared dE76 that nobody sees: keeps the logarithm from running away where the error reaches
// zero. Found by trial on generated posters.
constexpr double error_floor = 0.5;

// Counts whose distance below the chord is nearly the largest are as good a knee.
constexpr double nearly_the_knee = 0.95;

// How far each point of the swept curve lies below the chord; empty where it cannot bend.
std::vector<double> knee_distances(std::span<const CurvePoint> curve) {
    if (curve.size() < 3) return {};
    std::vector<double> counts;
    std::vector<double> errors;
    for (const CurvePoint& point : curve) {
        counts.push_back(point.count);
        errors.push_back(natural_log(point.evidence_mse + error_floor));
    }
    return below_chord(counts, errors);
}

}  // namespace

// Kneedle on the logarithm of the error: the first drop of the plain error drowns every other.
Vote knee_vote(const Study& study) {
    const std::span<const CurvePoint> curve = swept(study);
    const std::vector<double> below = knee_distances(curve);
    if (below.empty()) return {"knee", std::nullopt, "the curve has too few points to bend"};
    const auto knee = std::max_element(below.begin(), below.end());
    if (*knee <= 0) return {"knee", std::nullopt, "the curve does not bend"};
    const CurvePoint& at = curve[static_cast<std::size_t>(knee - below.begin())];
    return {"knee", at.count,
            "the logarithm of the error stops falling steeply at " + std::to_string(at.count) +
                " (it lies " + fixed(100 * *knee, 0) + " % of the curve's height below the chord)"};
}

std::optional<CountRange> knee_range(const Study& study) {
    const std::span<const CurvePoint> curve = swept(study);
    const std::vector<double> below = knee_distances(curve);
    if (below.empty()) return std::nullopt;
    const auto knee = std::max_element(below.begin(), below.end());
    if (*knee <= 0) return std::nullopt;
    auto low = knee;
    auto high = knee;
    while (low != below.begin() && *(low - 1) >= nearly_the_knee * *knee) --low;
    while (high + 1 != below.end() && *(high + 1) >= nearly_the_knee * *knee) ++high;
    return CountRange{curve[static_cast<std::size_t>(low - below.begin())].count,
                      curve[static_cast<std::size_t>(high - below.begin())].count};
}

}  // namespace tincture
