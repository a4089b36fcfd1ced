// Writing a picture as an indexed PNG (colour type 3), which few libraries do.
#pragma once

#include <cstdint>
#include <filesystem>
#include <optional>
#include <span>

#include "colour/rgb.h"
#include "picture/picture.h"

namespace tincture {

struct IndexedPicture {
    std::uint32_t width;
    std::uint32_t height;
    const std::uint8_t* labels;     // width * height indices into `palette`
    std::span<const Rgb8> palette;  // 1 to 256 colours, the transparent one included
    std::optional<std::uint8_t> transparent_index;  // this index is fully transparent
    std::span<const std::uint8_t> icc;              // written as iCCP; empty: an sRGB chunk instead
    std::optional<Resolution> resolution;           // written as pHYs
};

// Bit depth 1, 2, 4 or 8, the smallest that holds the palette. The same bytes for the same input:
// no time stamp, no text. Throws Error(output) with `path` as subject.
void write_indexed_png(const std::filesystem::path& path, const IndexedPicture& picture);

}  // namespace tincture
