#include "choose/criteria.h"
#include "support/format.h"

namespace tincture {
namespace {

// The strict end of the 0.8 to 0.9 that the authors recommend.
constexpr double stable = 0.9;

std::string percent(double part) {
    return fixed(100 * part, 0) + " %";
}

}  // namespace

// The largest count that predicts well (Tibshirani, Walther 2005, Journal of Computational and
// Graphical Statistics 14:511-528).
Vote stability_vote(const Study& study) {
    constexpr const char* criterion = "stability";
    const std::span<const CurvePoint> curve = swept(study);
    std::size_t measured = 0;
    std::optional<std::size_t> last;
    for (; measured < curve.size() && curve[measured].prediction_strength; ++measured) {
        if (*curve[measured].prediction_strength >= stable) last = measured;
    }
    if (!last) {
        return {criterion, std::nullopt,
                measured == 0 ? "halves of the evidence were not compared"
                              : "halves of the evidence find no palette alike"};
    }
    const CurvePoint& at = curve[*last];
    const bool at_the_end = *last + 1 == measured;
    if (at_the_end && at.evidence_mse > 0) {
        return {criterion, std::nullopt,
                "halves of the evidence still find the same palette at " + colours(at.count)};
    }
    if (at.count == 1) {
        return {criterion, 1, "halves of the evidence find no palette of several colours alike"};
    }
    std::string reason = "halves of the evidence find the same " + colours(at.count) +
                         ": of the pairs of pixels in the least sure colour " +
                         percent(*at.prediction_strength) + " stay together";
    if (!at_the_end) {
        const CurvePoint& more = curve[*last + 1];
        reason += ", with " + colours(more.count) + " only " + percent(*more.prediction_strength);
    }
    return {criterion, at.count, reason};
}

}  // namespace tincture
