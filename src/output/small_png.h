// PNG in memory for drawings: large flat fields and little else.
#pragma once

#include <cstdint>
#include <functional>
#include <span>
#include <vector>

#include "colour/rgb.h"

namespace tincture {

// Some rows of a drawing in sRGB, row by row from the top, white at first. Coordinates are pixels
// of the whole drawing; what lies outside the band is left out.
class Band {
  public:
    Band(int width, int top, int bottom);

    // Whether anything from row `top` to before row `bottom` could be seen.
    [[nodiscard]] bool shows(int top, int bottom) const { return top < bottom_ && bottom > top_; }

    // Fills [left, right) x [top, bottom).
    void fill(int left, int top, int right, int bottom, Rgb8 colour);

    // Mixes `colour` into a pixel; 255 covers it whole.
    void blend(int x, int y, Rgb8 colour, std::uint8_t coverage);

    [[nodiscard]] std::span<const Rgb8> row(int y) const;

  private:
    int width_;
    int top_;
    int bottom_;
    std::vector<Rgb8> pixels_;
};

// A drawing as PNG (third edition): indexed up to 256 colours, else RGB; 8 bits, an sRGB chunk,
// `pixels_per_metre` as its resolution. `draw` is called for one band after another, so that large
// drawings take little memory, and for all of them again where the colours are too many for an
// index. The same bytes for the same drawing and zlib.
[[nodiscard]] std::vector<std::uint8_t> draw_png(int width, int height,
                                                 std::uint32_t pixels_per_metre,
                                                 const std::function<void(Band&)>& draw);

}  // namespace tincture
