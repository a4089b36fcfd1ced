// From a palette to a label for every pixel.
#pragma once

#include <cstdint>

#include "colour/colour_space.h"
#include "histogram/colour_table.h"
#include "palette/palette.h"
#include "picture/picture.h"

namespace tincture {

// width * height labels: for an opaque pixel the index of the swatch nearest to it in CIELAB (the
// first of equally near ones), for any other the number of swatches. The palette holds at most 256
// swatches, or 255 where the picture has pixels that are not opaque.
[[nodiscard]] Samples<std::uint8_t> label_pixels(const Picture& picture, const ColourTable& table,
                                                 const ColourSpace& space, const Palette& palette);

// How many opaque pixels have each label below `count`.
[[nodiscard]] std::vector<std::uint64_t> count_labels(const Samples<std::uint8_t>& labels,
                                                      int count);

// How many pixels have another label in the second of two maps of the same size.
[[nodiscard]] std::uint64_t count_differences(const Samples<std::uint8_t>& one,
                                              const Samples<std::uint8_t>& two);

}  // namespace tincture
