#include <algorithm>

#include "choose/criteria.h"
#include "choose/curve_shape.h"
#include "support/format.h"
#include "support/maths.h"

namespace tincture {
namespace {

constexpr double error_floor = 0.5;  // as for the knee

}  // namespace

// The automatic reading of a scree plot (Cattell 1966, Multivariate Behavioral Research 1:245-276,
// for the plot): where the curve of the log error bends most. Shown for what it is: it looks at two
// neighbours only, and the proposal does not heed it.
Vote second_difference_vote(const Study& study) {
    const std::span<const CurvePoint> curve = swept(study);
    std::vector<double> errors;
    for (const CurvePoint& point : curve) {
        errors.push_back(natural_log(point.evidence_mse + error_floor));
    }
    const std::vector<double> bends = second_differences(errors);
    const auto most = std::max_element(bends.begin(), bends.end());
    if (most == bends.end() || *most <= 0) {
        return {"second difference", std::nullopt, "the curve does not bend"};
    }
    const int count = curve[static_cast<std::size_t>(most - bends.begin()) + 1].count;
    return {"second difference", count,
            "the logarithm of the error bends most at " + std::to_string(count) + ", by " +
                fixed(*most, 2) + " (a textbook's reading, often off)"};
}

}  // namespace tincture
