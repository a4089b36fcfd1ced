// PNG in memory for drawings: large flat fields and little else.
#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "colour/rgb.h"

namespace tincture {

// Pixels of sRGB, row by row from the top.
struct Canvas {
    Canvas(std::uint32_t canvas_width, std::uint32_t canvas_height);

    // Fills the part of [left, right) x [top, bottom) that lies on the canvas.
    void fill(int left, int top, int right, int bottom, Rgb8 colour);

    // Mixes `colour` into the pixel (x, y), which may lie off the canvas; 255 covers it whole.
    void blend(int x, int y, Rgb8 colour, std::uint8_t coverage);

    std::uint32_t width;
    std::uint32_t height;
    std::vector<Rgb8> pixels;
};

// The canvas as PNG (third edition): indexed up to 256 colours, else RGB; 8 bits, an sRGB chunk,
// `pixels_per_metre` as its resolution. The same bytes for the same canvas and zlib.
[[nodiscard]] std::vector<std::uint8_t> encode_png(const Canvas& canvas,
                                                   std::uint32_t pixels_per_metre);

}  // namespace tincture
