// Reading pictures of any supported format: metadata first, then the way to decode.
#pragma once

#include <cstdint>
#include <filesystem>

#include "picture/picture.h"

namespace tincture {

struct ReadOptions {
    std::uint64_t max_pixels = 500'000'000;  // checked against the header, before memory is taken
};

// Reads PNG, JPEG, TIFF, WebP, AVIF, BMP and PNM, told apart by their first bytes and never by
// name. Anything that a decoder reports as missing or damaged data is an error: a picture is read
// whole or not at all. Throws Error(input) for a file that is missing, no picture, damaged or of a
// kind that is not supported, Error(limit) above max_pixels; the subject is `path` as given.
[[nodiscard]] Picture read_picture(const std::filesystem::path& path,
                                   const ReadOptions& options = {});

}  // namespace tincture
