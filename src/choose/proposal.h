// From votes to one proposal.
#pragma once

#include "choose/study.h"

namespace tincture {

// The rule:
//   1. In flat art it is the middle one of three counts: the inks that stand out, the knee, and the
//      last before look-alikes. The range holds all three, and reaches as much further
//      as there are colours that stand out but were taken for blends. Confidence: where all agree
//      0.9, or 0.7 if there are such; where two agree 0.5, else 0.2.
//   2. Else, where the picture has no more colours than the range allows, it is all of them (0.9).
//   3. Else no count is natural. Where knee and tolerance are at most one apart it is the
//      tolerance's (0.5), else the knee (0.3), and the range holds the counts that are nearly as
//      far below the chord, and the tolerance's.
//   4. Without a knee it is the tolerance's count (0.3); without either, the end of the range.
// Counts are brought into the range asked for. Needs curve, evidence, tolerance and range.
[[nodiscard]] Proposal propose(const Study& study);

}  // namespace tincture
