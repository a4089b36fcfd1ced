// From votes to one proposal.
#pragma once

#include "choose/study.h"

namespace tincture {

// The rule:
//   1. Where the picture has no more colours than the range allows, and edge blends or noise can
//      therefore not be among them, it is all of them.
//   2. Else, where knee and tolerance are at most one apart, it is the tolerance's count.
//   3. Else it is the knee; the range holds the counts that are nearly as far below the chord as
//   the
//      knee, and the tolerance's count.
//   4. Without a knee it is the tolerance's count; without either, the end of the range.
// Counts are brought into the range asked for. The confidence is a first guess, not yet calibrated:
// 0.9, 0.6, 0.4, 0.3 in the order of the rule. Needs curve, tolerance and range of the study.
[[nodiscard]] Proposal propose(const Study& study);

}  // namespace tincture
