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

}  // namespace

// Kneedle on the logarithm of the error: the first drop of the plain error drowns every other.
Vote knee_vote(const Study& study) {
    const std::span<const CurvePoint> curve = swept(study);
    if (curve.size() < 3) {
        return {"knee", std::nullopt, "the curve has too few points to bend"};
    }
    std::vector<double> counts;
    std::vector<double> errors;
    for (const CurvePoint& point : curve) {
        counts.push_back(point.count);
        errors.push_back(natural_log(point.evidence_mse + error_floor));
    }
    const std::vector<double> below = below_chord(counts, errors);
    const auto knee = std::max_element(below.begin(), below.end());
    if (*knee <= 0) return {"knee", std::nullopt, "the curve does not bend"};
    const CurvePoint& at = curve[static_cast<std::size_t>(knee - below.begin())];
    return {"knee", at.count,
            "the logarithm of the error stops falling steeply at " + std::to_string(at.count) +
                " (it lies " + fixed(100 * *knee, 0) + " % of the curve's height below the chord)"};
}

}  // namespace tincture
