// Pixels that the flat colours around them explain, and strokes that they do not.
#pragma once

#include <vector>

#include "label/edge_band.h"

namespace tincture {

// Gives the edges of a band new labels. A pixel whose colour lies near the line between two labels
// that are flat within three pixels of it gets the nearer of the two; near a single one, that. What
// none of them explains is a thin thing with a colour of its own: the label under which the
// unexplained pixels in the 5 x 5 around it are the best mixtures. `noise` is a deviation on the
// scale of Mixed.
void settle_blends(const std::vector<Mixed>& palette, float noise, EdgeBand& band);

// Above this many colours, unexplained pixels keep the label they have: what fits best out of so
// many says little.
inline constexpr std::size_t most_colours_for_strokes = 32;

}  // namespace tincture
