// The criteria: each a pure function of what was measured, in a file of its own. To add one, write
// it beside these and name it in collect_votes().
#pragma once

#include <optional>
#include <span>
#include <vector>

#include "choose/study.h"

namespace tincture {

// The part of the curve that has no gaps: a count asked for beyond the sweep is left out.
[[nodiscard]] std::span<const CurvePoint> swept(const Study& study);

// How many colours stand out in flat areas.
[[nodiscard]] Vote inks_vote(const Study& study);

// The count at which the logarithm of the error stops falling steeply.
[[nodiscard]] Vote knee_vote(const Study& study);

// The counts around the knee that are nearly as far below the chord: wide where the bend is soft.
struct CountRange {
    int low;
    int high;
};
[[nodiscard]] std::optional<CountRange> knee_range(const Study& study);

// The count at which the logarithm of the error bends most.
[[nodiscard]] Vote second_difference_vote(const Study& study);

// The smallest count at which 95 % of the pixels are within the tolerance.
[[nodiscard]] Vote tolerance_vote(const Study& study);

// The last count before two palette colours come too close.
[[nodiscard]] Vote look_alikes_vote(const Study& study);

// All colours of the picture, where these are no more than the range allows.
[[nodiscard]] Vote distinct_colours_vote(const Study& study);

// The count that takes the fewest bits to describe the evidence.
[[nodiscard]] Vote description_length_vote(const Study& study);

// The largest palette that halves of the evidence find alike.
[[nodiscard]] Vote stability_vote(const Study& study);

[[nodiscard]] std::vector<Vote> collect_votes(const Study& study);

}  // namespace tincture
