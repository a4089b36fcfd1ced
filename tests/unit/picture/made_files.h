// Picture files made in memory, each with the library of its format, so that the tests need none on
// disk; and reading them back.
#pragma once

#include <cstdio>
// jpeglib.h needs <cstdio> before it.
#include <avif/avif.h>
#include <jpeglib.h>
#include <png.h>
#include <tiffio.h>

#include <cstdint>
#include <functional>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "picture/read.h"
#include "support/error.h"

namespace tincture::testing_pictures {

using Bytes = std::vector<std::uint8_t>;

// The same arbitrary bytes for the same seed.
[[nodiscard]] Bytes noise(std::size_t size, unsigned seed = 1);
// A soft gradient with a few waves: what lossy formats are made for.
[[nodiscard]] Bytes smooth(std::uint32_t width, std::uint32_t height, int channels);
// 16-bit values in this machine's order as bytes.
[[nodiscard]] Bytes bytes_of(const std::vector<std::uint16_t>& values);
[[nodiscard]] std::vector<std::uint16_t> noise16(std::size_t size, unsigned seed = 1);

[[nodiscard]] Bytes little(std::uint64_t value, int bytes);
[[nodiscard]] Bytes big(std::uint64_t value, int bytes);
[[nodiscard]] Bytes text(const std::string& characters);
[[nodiscard]] Bytes joined(const std::vector<Bytes>& parts);

[[nodiscard]] Picture read_bytes(const Bytes& file, const ReadOptions& options = {});
// The error that reading ends with; a test failure and an empty one if it does not.
[[nodiscard]] Error error_of(const Bytes& file, const ReadOptions& options = {});

[[nodiscard]] Bytes samples_of(const Picture& picture);  // 8 bits
[[nodiscard]] std::vector<std::uint16_t> samples16_of(const Picture& picture);
[[nodiscard]] Bytes opaque_of(const Picture& picture);

// A little-endian EXIF block without "Exif\0\0": orientation and, above 0, dots per inch.
[[nodiscard]] Bytes exif_block(int orientation, unsigned x_dpi = 0, unsigned y_dpi = 0);

// `rows` are packed as PNG has them, 16-bit values in big-endian order. `extras` sets the other
// chunks before they are written.
struct PngSpec {
    std::uint32_t width = 1;
    std::uint32_t height = 1;
    int depth = 8;
    int type = PNG_COLOR_TYPE_RGB;
    int interlace = PNG_INTERLACE_NONE;
    std::function<void(png_structp, png_infop)> extras = [](png_structp, png_infop) {};
    std::vector<std::pair<std::string, Bytes>> raw_chunks = {};  // before the palette
};
[[nodiscard]] Bytes encode_png(const PngSpec& spec, const Bytes& rows);

// `setup` runs before the start, `markers` right after it.
struct JpegSpec {
    std::uint32_t width = 1;
    std::uint32_t height = 1;
    J_COLOR_SPACE space = JCS_RGB;
    int channels = 3;
    int quality = 95;
    std::function<void(j_compress_ptr)> setup = [](j_compress_ptr) {};
    std::function<void(j_compress_ptr)> markers = [](j_compress_ptr) {};
};
[[nodiscard]] Bytes encode_jpeg(const JpegSpec& spec, const Bytes& samples);
// What plain libjpeg makes of a file.
[[nodiscard]] Bytes plain_jpeg_decode(const Bytes& file, J_COLOR_SPACE space);

// `tags` sets what differs from one strip of 8-bit RGB, top left; `rows` go through
// TIFFWriteScanline, plane by plane where planes are separate.
struct TiffSpec {
    std::uint32_t width = 1;
    std::uint32_t height = 1;
    int bits = 8;
    int channels = 3;
    int photometric = PHOTOMETRIC_RGB;
    int planes = PLANARCONFIG_CONTIG;
    int compression = COMPRESSION_NONE;
    const char* mode = "w";
    std::function<void(TIFF*)> tags = [](TIFF*) {};
    std::function<void(TIFF*)> pixels = {};  // instead of the rows
};
[[nodiscard]] Bytes encode_tiff(const TiffSpec& spec, const Bytes& rows);

[[nodiscard]] Bytes encode_webp(std::uint32_t width, std::uint32_t height, const Bytes& samples,
                                bool alpha, bool lossless);
// The extended form with chunks before ("ICCP") and after ("EXIF") the pixels.
[[nodiscard]] Bytes wrap_webp(const Bytes& simple, std::uint32_t width, std::uint32_t height,
                              const Bytes& icc, const Bytes& exif, bool alpha = false);

// Lossless. `setup` may change the image before the planes are filled from `samples`, which are
// RGB, or grey for YUV400, of 8 bits or in host order of 16 bits holding values of `depth` bits.
struct AvifSpec {
    std::uint32_t width = 1;
    std::uint32_t height = 1;
    std::uint32_t depth = 8;
    avifPixelFormat format = AVIF_PIXEL_FORMAT_YUV444;
    std::function<void(avifImage*)> setup = [](avifImage*) {};
    std::function<void(avifImage*)> finish = [](avifImage*) {};  // after the planes are filled
};
[[nodiscard]] Bytes encode_avif(const AvifSpec& spec, const Bytes& samples);

}  // namespace tincture::testing_pictures
