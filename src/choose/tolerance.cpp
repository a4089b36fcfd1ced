#include <cmath>

#include "choose/criteria.h"
#include "support/format.h"

namespace tincture {
namespace {

// Counts above a hundred are rounded to tens: an extrapolation is no measurement.
int roughly(double count) {
    const double step = count > 100 ? 10 : 1;
    return static_cast<int>(std::ceil(count / step) * step);
}

}  // namespace

Vote tolerance_vote(const Study& study) {
    const std::span<const CurvePoint> curve = swept(study);
    for (const CurvePoint& point : curve) {
        if (point.p95_de00 <= study.tolerance) {
            return {"tolerance", point.count,
                    "with " + colours(point.count) + ", 95 % of the pixels are within " +
                        fixed(point.p95_de00, 1) + " CIEDE2000 of the original (tolerance " +
                        fixed(study.tolerance, 1) + ")"};
        }
    }
    if (curve.empty()) return {"tolerance", std::nullopt, "nothing was measured"};
    // In three dimensions the error of the best n colours falls with the cube root of n (Zador
    // 1982, IEEE Trans. Information Theory 28:139-149).
    const CurvePoint& last = curve.back();
    const double ratio = last.p95_de00 / study.tolerance;
    std::string reason = "not met up to " + colours(last.count) +
                         ", where 95 % of the pixels are within " + fixed(last.p95_de00, 1) +
                         " CIEDE2000: it would take a tolerance of that";
    if (ratio < 6) {
        reason += ", or roughly " + colours(roughly(last.count * ratio * ratio * ratio));
    }
    return {"tolerance", std::nullopt, reason};
}

}  // namespace tincture
