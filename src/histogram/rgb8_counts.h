#pragma once

#include <cstddef>
#include <vector>

#include "histogram/colour_counts.h"
#include "picture/picture.h"

namespace tincture {

// The colours of the opaque pixels of an 8-bit RGB picture, ascending by key. At most
// max_rgb8_pixels. Takes two bytes a pixel while it counts.
constexpr std::size_t max_rgb8_pixels = 0xFFFF'FFFF;
[[nodiscard]] std::vector<ColourCount> count_rgb8(const Picture& picture);

}  // namespace tincture
