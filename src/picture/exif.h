// The two facts that a picture needs out of an EXIF block (CIPA DC-008, a TIFF 6.0 directory).
#pragma once

#include <cstdint>
#include <optional>
#include <span>

#include "picture/picture.h"

namespace tincture {

struct ExifFacts {
    int orientation = 1;  // 1 to 8, see orientation.h
    std::optional<Resolution> resolution;
};

// Takes a block with or without the leading "Exif\0\0". Whatever is missing or makes no sense keeps
// its default: an EXIF block is never a reason to refuse a picture.
[[nodiscard]] ExifFacts read_exif(std::span<const std::uint8_t> block);

}  // namespace tincture
