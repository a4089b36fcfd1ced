// Labels along edges: one of the two colours that meet there, not a third.
#pragma once

#include <cstdint>

#include "histogram/pixel_lab.h"
#include "palette/palette.h"
#include "picture/picture.h"

namespace tincture {

// The labels of a picture from those of the nearest palette colour of each pixel (`nearest`: see
// label_pixels(); `pixels` looks at every pixel). Pixels along edges get new ones: blends the
// nearer of the two colours that they lie between, thin strokes one label along them. Where the
// edges are softer than those of a drawing, the labels are then fitted to the picture under its own
// blur. Pixels whose eight neighbours have their label stay, but for some beside a soft edge;
// labels of palette.count (transparent) stay and lend no colour.
//
// `noise_de` is the deviation of the picture's noise in dE76, 0 for clean art. The same for any
// number of threads. Meant for flat art; on a palette of more than 32 colours strokes are not told
// from blends.
[[nodiscard]] Samples<std::uint8_t> settled_edges(const Samples<std::uint8_t>& nearest,
                                                  const PixelLab& pixels, const Palette& palette,
                                                  double noise_de);

}  // namespace tincture
