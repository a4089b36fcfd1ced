#include "choose/proposal.h"

#include <algorithm>
#include <array>
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

// A count, another that the range reaches to, and how sure that is.
void set(Proposal& proposal, int count, int other, double confidence) {
    proposal.count = count;
    proposal.low = std::min(count, other);
    proposal.high = std::max(count, other);
    proposal.confidence = confidence;
}

std::string in_doubt(int more) {
    return more == 1 ? "one more stands out, but looks like a blend"
                     : std::to_string(more) + " more stand out, but look like blends";
}

// Flat art: what stands out, the bend of the curve and look-alikes read the same evidence in
// different ways; the one in the middle holds. Returns why in words.
std::string decide_flat_art(Proposal& proposal, const Study& study, int inks) {
    const int knee = count_of(proposal.votes, "knee").value_or(inks);
    const int look_alikes = count_of(proposal.votes, "look-alikes").value_or(inks);
    std::array<int, 3> counts = {inks, knee, look_alikes};
    std::sort(counts.begin(), counts.end());
    const bool all_agree = counts[0] == counts[2];
    const bool two_agree = counts[0] == counts[1] || counts[1] == counts[2];
    proposal.count = counts[1];
    const int more = study.evidence.perhaps_more_inks;
    proposal.low = counts[0];
    proposal.high = counts[2] + more;
    // About the shares that were right among drawn pictures (tests/corpus).
    proposal.confidence = all_agree ? (more == 0 ? 0.9 : 0.7) : two_agree ? 0.5 : 0.2;
    if (all_agree) {
        return "so many stand out in flat areas, and the error curve and look-alikes say the same" +
               (more == 0 ? "" : "; " + in_doubt(more));
    }
    return "the evidence disagrees: " + std::to_string(inks) + (inks == 1 ? " stands" : " stand") +
           " out in flat areas, the error curve bends at " + std::to_string(knee) +
           ", and beyond " + std::to_string(look_alikes) + " colours come too close";
}

// No flat areas to speak of: no count is natural, and none is claimed to be.
std::string decide_continuous_tone(Proposal& proposal, const Study& study, int sweep_end) {
    const std::optional<int> knee = count_of(proposal.votes, "knee");
    const std::optional<int> tolerance = count_of(proposal.votes, "tolerance");
    if (knee && tolerance && std::abs(*knee - *tolerance) <= 1) {
        set(proposal, *tolerance, *knee, 0.5);
        return "there the error curve stops falling steeply and the tolerance is met";
    }
    if (knee) {
        const CountRange bend = knee_range(study).value_or(CountRange{*knee, *knee});
        proposal.count = *knee;
        proposal.low = std::min(bend.low, tolerance.value_or(bend.low));
        proposal.high = std::max(bend.high, tolerance.value_or(bend.high));
        proposal.confidence = 0.3;
        const std::string bends =
            "there the error curve stops falling steeply, but no count is "
            "natural here: ";
        if (!tolerance) {
            return bends + "none up to " + std::to_string(sweep_end) + " meets the tolerance";
        }
        return bends + "the tolerance is met " + (*tolerance < *knee ? "already at " : "only at ") +
               std::to_string(*tolerance);
    }
    if (tolerance) {
        set(proposal, *tolerance, *tolerance, 0.3);
        return "there the tolerance is met; the error curve has no knee";
    }
    set(proposal, sweep_end, sweep_end, 0.3);
    return "neither a knee nor the tolerance speaks for fewer";
}

// Applies the rule; fills all of the proposal but the sentence and returns why in words.
std::string decide(Proposal& proposal, const Study& study, int sweep_end) {
    if (const std::optional<int> inks = count_of(proposal.votes, "inks")) {
        return decide_flat_art(proposal, study, *inks);
    }
    if (const std::optional<int> distinct = count_of(proposal.votes, "distinct colours")) {
        set(proposal, *distinct, count_of(proposal.votes, "tolerance").value_or(*distinct), 0.9);
        return "the picture has no more than that";
    }
    return decide_continuous_tone(proposal, study, sweep_end);
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
