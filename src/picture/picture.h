// A picture in memory: what every reader makes and what the rest of the pipeline takes.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "colour/colour_model.h"
#include "support/large_block.h"

namespace tincture {

// Pixels per inch, both positive.
struct Resolution {
    double x_dpi;
    double y_dpi;
};

// Pictures are large: their samples lie in huge pages.
template <typename T>
using Samples = LargeArray<T>;

// Rows from the top, pixels from the left, samples of a pixel side by side, no padding. Orientation
// is applied; colours are not premultiplied. Exactly one of samples8 and samples16 is filled, with
// width * height * channel_count(model) values. Grey and RGB: 0 is dark. CMYK: 0 is no ink.
struct Picture {
    std::string file_name;  // base name, raw bytes
    std::uint32_t width = 0;
    std::uint32_t height = 0;
    ColourModel model = ColourModel::rgb;
    int bits = 8;  // 8 or 16: which of the two below is filled
    Samples<std::uint8_t> samples8;
    Samples<std::uint16_t> samples16;
    Samples<std::uint8_t> opaque;   // empty: no alpha; else one byte a pixel, 1 = opaque, 0 = not
    std::vector<std::uint8_t> icc;  // embedded profile as found, unchecked; empty: none
    std::optional<Resolution> resolution;

    [[nodiscard]] std::size_t pixel_count() const noexcept { return std::size_t{width} * height; }
};

}  // namespace tincture
