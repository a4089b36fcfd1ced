#pragma once

#include <vector>

#include "evidence/peak_places.h"
#include "evidence/peaks.h"
#include "histogram/pixel_lab.h"

namespace tincture {

// How soft the edges between the colours of `peaks` are: the deviation, in pixels, of the Gauss
// function that would blur a sharp edge as much; about 0.3 where shapes were drawn, 1 and more
// after a scan or an enlargement. Where t runs from 0 to 1 across such an edge, the sum of
// t (1 - t) is the deviation over the square root of pi. By lightness, along some rows, between
// peaks of at least a hundredth of `all` that differ enough; 0 where there are too few of these.
[[nodiscard]] double measure_softness(const PixelLab& pixels, const PeakPlaces& places,
                                      const std::vector<Peak>& peaks, double all);

}  // namespace tincture
