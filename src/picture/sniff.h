// Telling files apart by their first bytes.
#pragma once

#include <cstdint>
#include <span>

namespace tincture::formats {

enum class FileKind {
    avif,
    bmp,
    jpeg,
    png,
    pnm,
    tiff,
    webp,
    // Known by name only, to say what to do instead.
    gif,
    heic,
    jpeg_2000,
    jpeg_xl,
    pam,
    pdf,
    postscript,
    svg,
    unknown,
};

// How many first bytes are enough: an SVG may start with a long comment.
inline constexpr std::size_t sniff_size = 4096;

[[nodiscard]] FileKind sniff(std::span<const std::uint8_t> head);

}  // namespace tincture::formats
