#pragma once

#include <vector>

#include "evidence/peak_places.h"
#include "evidence/peaks.h"

namespace tincture {

// Which peaks are inks, and how far that is in doubt.
struct InkWeights {
    std::vector<double> weight;  // of each peak: 0 (a blend, a piece of a fade) to 1
    int perhaps_more = 0;        // that stand out, but were taken for blends
};

// Which peaks are inks: for each a number from 0 (a blend, detail lost in a blur, a piece of a
// fade) to 1. `places` are those of the peaks; `softness` of the edges in pixels
// (measure_softness()); `pixels` is what the peaks' weights are parts of; `radius` as they were
// found with.
//   1. A peak that stands out from what is around it, in colour or as a body with edges, is an ink;
//      but no light one that two heavier inks could be mixed to, if it lies along edges of both,
//      in soft pictures nowhere wider than a stroke, or away from all inks in too fine detail.
//   2. A peak that does not, but that no two inks explain even if their mix is drawn out beyond one
//      of them, is the ink of thin strokes, which wear has left nowhere pure.
[[nodiscard]] InkWeights ink_weights(const std::vector<Peak>& peaks, const PeakPlaces& places,
                                     double softness, double pixels, double radius);

}  // namespace tincture
