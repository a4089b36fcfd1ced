// Labels whose picture, blurred as the picture at hand is, comes closest to it.
#pragma once

#include <vector>

#include "label/blur_fit.h"

namespace tincture {

// Changes the labels of a band where that lowers the sum of the squared differences between the
// picture and the blurred labels, over their expected variance, plus a price for each border
// between two neighbours of different labels: iterated conditional modes (Besag, "On the
// statistical analysis of dirty pictures", J. R. Statist. Soc. B 48 (1986) 259-302), row by row,
// the price rising to its full height, with moves of whole pieces of thin strokes in between.
// `noise` is a deviation on the scale of Mixed. The band has colours BlurFit::zone_radius around
// its edges.
void refit_labels(const std::vector<Mixed>& palette, const EdgeBlur& blur, float noise,
                  EdgeBand& band, BlurFitMemory& memory);

}  // namespace tincture
