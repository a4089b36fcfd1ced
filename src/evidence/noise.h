#pragma once

#include "histogram/pixel_lab.h"

namespace tincture {

// The noise of a picture: how far (dE76, root mean square) pixels of one colour lie from it. From
// second differences along some rows, which neither flat areas nor even shading have (after
// Immerkaer 1996, Computer Vision and Image Understanding 64:300-302), by their median, which edges
// do not move: 0 for clean art. White noise is assumed: what a blur or JPEG has smeared over
// several pixels is counted for less than it is.
[[nodiscard]] double measure_noise(const PixelLab& pixels);

}  // namespace tincture
