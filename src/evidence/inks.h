#pragma once

#include <vector>

#include "evidence/peaks.h"

namespace tincture {

// Which peaks are inks: for each a number from 0 (a blend, or a piece of a fade) to 1. `pixels` is
// what the peaks' weights are parts of; `radius` as they were found with.
//   1. A peak that stands out from what is around it is an ink, if it is not tiny or no mix of two
//      heavier inks explains it.
//   2. A peak that does not, but that no two inks explain even if their mix is drawn out beyond one
//      of them, is the ink of thin strokes, which wear has left nowhere pure.
[[nodiscard]] std::vector<double> ink_weights(const std::vector<Peak>& peaks, double pixels,
                                              double radius);

}  // namespace tincture
