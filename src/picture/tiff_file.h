// Opening a TIFF with libtiff, silently and without the whole file in memory.
#pragma once

#include <tiffio.h>

#include <cstdint>
#include <memory>

#include "picture/formats.h"

namespace tincture::formats {

// The file as libtiff reads it, and what libtiff said.
struct TiffInput {
    int descriptor;
    std::uint64_t size;
    std::uint64_t position = 0;
    bool decoding = false;    // pixels, not the directory
    bool complained = false;  // of something that costs pixels or facts
};

struct CloseTiff {
    void operator()(TIFF* tiff) const { TIFFClose(tiff); }
};
using TiffHandle = std::unique_ptr<TIFF, CloseTiff>;

// Memory that a decoder may take at once beyond the bytes of the file.
inline constexpr std::uint64_t tiff_decoder_memory = std::uint64_t{256} << 20;

// Opens the first page; `input` has to outlive the handle. Throws Error(input) without a directory.
[[nodiscard]] TiffHandle open_tiff(const Source& source, TiffInput& input);

}  // namespace tincture::formats
