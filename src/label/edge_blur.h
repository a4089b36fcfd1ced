// How soft the edges of a picture are.
#pragma once

#include <array>
#include <cstdint>
#include <vector>

#include "histogram/pixel_lab.h"
#include "label/mixing.h"

namespace tincture {

// Deviation in pixels of the blur of lightness and of colour, 0 and above. Colour is blurrier where
// JPEG kept it at half the resolution. An edge drawn with coverage alone has about 0.3.
struct EdgeBlur {
    float lightness = 0;
    float colour = 0;
};

// From the transitions between two flat labels along some rows of the picture: where t runs from 0
// to 1 across an edge blurred by a Gauss function, the sum of t (1 - t) is deviation / sqrt(pi).
// `labels` is the nearest palette colour of each pixel.
[[nodiscard]] EdgeBlur measure_edge_blur(const std::uint8_t* labels, const PixelLab& pixels,
                                         const std::vector<Mixed>& palette);

// Half of a symmetric kernel of seven taps that sums to 1, with that deviation as far as it can.
using BlurKernel = std::array<float, 4>;
[[nodiscard]] BlurKernel blur_kernel(float deviation);

}  // namespace tincture
