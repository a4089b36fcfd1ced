#include "choose/proposal.h"

#include <algorithm>
#include <cstdlib>

#include "choose/criteria.h"
#include "support/format.h"

namespace tincture {
namespace {

std::optional<int> count_of(const std::vector<Vote>& votes, std::string_view criterion) {
    for (const Vote& vote : votes) {
        if (vote.criterion == criterion) return vote.count;
    }
    return std::nullopt;
}

// Applies the rule; fills all of the proposal but the sentence and returns why in words.
std::string decide(Proposal& proposal, const Study& study, int sweep_end) {
    const std::optional<int> knee = count_of(proposal.votes, "knee");
    const std::optional<int> tolerance = count_of(proposal.votes, "tolerance");
    const std::optional<int> distinct = count_of(proposal.votes, "distinct colours");
    const auto set = [&](int count, int other, double confidence) {
        proposal.count = count;
        proposal.low = std::min(count, other);
        proposal.high = std::max(count, other);
        proposal.confidence = confidence;
    };
    if (distinct) {
        set(*distinct, tolerance.value_or(*distinct), 0.9);
        return "the picture has no more than that";
    }
    if (knee && tolerance && std::abs(*knee - *tolerance) <= 1) {
        set(*tolerance, *knee, 0.6);
        return "there the error curve stops falling steeply and the tolerance is met";
    }
    if (knee) {
        const CountRange bend = knee_range(study).value_or(CountRange{*knee, *knee});
        proposal.low = std::min(bend.low, tolerance.value_or(bend.low));
        proposal.high = std::max(bend.high, tolerance.value_or(bend.high));
        proposal.count = *knee;
        proposal.confidence = tolerance ? 0.4 : 0.3;
    }
    if (knee && tolerance) {
        return "there the error curve stops falling steeply; the evidence disagrees, as the "
               "tolerance "
               "is met " +
               std::string(*tolerance < *knee ? "already at " : "only at ") +
               std::to_string(*tolerance);
    }
    if (knee) {
        return "there the error curve stops falling steeply, but no count up to " +
               std::to_string(sweep_end) + " meets the tolerance";
    }
    if (tolerance) {
        set(*tolerance, *tolerance, 0.3);
        return "there the tolerance is met; the error curve has no knee";
    }
    set(sweep_end, sweep_end, 0.3);
    return "neither a knee nor the tolerance speaks for fewer";
}

}  // namespace

Proposal propose(const Study& study) {
    Proposal proposal;
    proposal.votes = collect_votes(study);
    const std::span<const CurvePoint> curve = swept(study);
    const std::string why = decide(proposal, study, curve.back().count);

    const int low = std::max(study.at_least, curve.front().count);
    const int high = std::max(low, std::min(study.at_most, curve.back().count));
    const int wanted = proposal.count;
    proposal.count = std::min(std::clamp(wanted, low, high), curve.back().count);
    proposal.low = std::min(std::clamp(proposal.low, low, high), proposal.count);
    proposal.high = std::clamp(std::min(proposal.high, high), proposal.count, curve.back().count);

    const CurvePoint& at = curve_at(study, proposal.count);
    proposal.sentence = colours(proposal.count);
    if (proposal.count == wanted) {
        proposal.sentence += ": " + why + ".";
    } else {
        proposal.sentence += ", the end of the range asked for; the evidence speaks for " +
                             std::to_string(wanted) + ": " + why + ".";
    }
    proposal.sentence += " With " + colours(proposal.count) + ", 95 % of the pixels are within " +
                         fixed(at.p95_de00, 1) + " CIEDE2000 of the original.";
    return proposal;
}

}  // namespace tincture
