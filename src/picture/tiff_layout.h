// How the samples of a TIFF lie in its rows and tiles, and turning them into those of a picture.
#pragma once

#include <array>
#include <cstdint>
#include <vector>

#include "picture/formats.h"

namespace tincture::formats {

struct TiffLayout {
    std::uint32_t width = 0;
    std::uint32_t height = 0;
    int bits = 8;               // of a stored sample: 1, 2, 4, 8 or 16
    int samples_per_pixel = 1;  // colour, alpha and others
    bool separate = false;      // one plane a sample instead of all samples of a pixel side by side
    bool white_is_zero = false;  // grey only
    bool palette = false;        // one index a pixel
    ColourModel model = ColourModel::rgb;
    int alpha_index = -1;  // which sample is alpha; -1: none
    bool premultiplied = false;
    std::vector<std::array<std::uint8_t, 3>> colours;  // of the palette, 2^bits of them
};

// Takes pieces of rows as libtiff decodes them, in any order but for the alpha plane, which has to
// come first where planes are separate and premultiplied.
class TiffPixels {
  public:
    // Takes the memory of the picture.
    TiffPixels(const TiffLayout& layout, Picture& picture);

    // Whether a whole row of the file is a row of the picture as it is.
    [[nodiscard]] bool is_plain() const;
    [[nodiscard]] std::uint8_t* plain_row(std::uint32_t y);

    // `raw` holds `count` pixels from column x of row y: all of their samples, or where planes are
    // separate those of `plane`.
    void put(const std::uint8_t* raw, std::uint32_t x, std::uint32_t y, std::uint32_t count,
             int plane);

    // Once, at the end.
    void finish();

  private:
    [[nodiscard]] std::size_t plain_pixel_size() const;
    template <typename T>
    void put_samples(const std::uint8_t* raw, std::size_t pixel, std::uint32_t count, int plane,
                     std::vector<T>& unpacked, Samples<T>& to, Samples<T>& alpha);
    void put_palette(const std::uint8_t* indices, std::size_t stride, std::size_t pixel,
                     std::uint32_t count);

    const TiffLayout& layout_;
    Picture& picture_;
    OpaquePlane opaque_;
    std::vector<std::uint8_t> unpacked8_;
    std::vector<std::uint16_t> unpacked16_;
    Samples<std::uint8_t> alpha8_;  // of separate premultiplied planes
    Samples<std::uint16_t> alpha16_;
};

}  // namespace tincture::formats
