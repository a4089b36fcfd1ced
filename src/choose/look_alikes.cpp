#include "choose/criteria.h"
#include "support/format.h"

namespace tincture {
namespace {

// Palette colours nearer than this (CIEDE2000) are pieces of one ink rather than two inks, and a
// colour that stands for a smaller part of the evidence than this is no ink. Found by trial on
// drawn posters.
constexpr double too_close = 5;
constexpr double too_little = 0.0003;

}  // namespace

// The last count before two palette colours come too close: one colour more only splits an ink.
Vote look_alikes_vote(const Study& study) {
    const std::span<const CurvePoint> curve = swept(study);
    for (std::size_t i = 1; i < curve.size(); ++i) {
        const CurvePoint& more = curve[i];
        if (more.closest_pair_de00 && *more.closest_pair_de00 < too_close) {
            return {"look-alikes", curve[i - 1].count,
                    "with " + colours(more.count) + ", two would be only " +
                        fixed(*more.closest_pair_de00, 1) + " CIEDE2000 apart"};
        }
        if (more.least_evidence_share < too_little) {
            return {"look-alikes", curve[i - 1].count,
                    "with " + colours(more.count) + ", one would stand for next to nothing"};
        }
    }
    return {"look-alikes", std::nullopt,
            "up to the end of the curve no two colours are closer than " + fixed(too_close, 0) +
                " CIEDE2000"};
}

}  // namespace tincture
