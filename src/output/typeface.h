// The typeface of drawings: Roboto, built in, so that text has the same width on every machine.
#pragma once

#include <cstdint>
#include <map>
#include <string>
#include <string_view>
#include <tuple>
#include <vector>

namespace tincture {

enum class Weight { regular, medium };

// Advance width of `utf8` in the unit of `size` (the height of the em), with kerning. Characters
// that the typeface lacks count as wide as its replacement box.
[[nodiscard]] double text_width(std::string_view utf8, double size, Weight weight);

// `utf8`, or as much of its start and end as fits into `width` with an ellipsis between them.
[[nodiscard]] std::string shortened(std::string_view utf8, double size, Weight weight,
                                    double width);

// Grey coverage of one glyph, 0 to 255, rows from the top.
struct GlyphImage {
    int left = 0;  // from the whole pixel of the pen
    int top = 0;   // from the baseline, negative is above it
    int width = 0;
    int height = 0;
    std::vector<std::uint8_t> coverage;
};

struct PlacedGlyph {
    int x = 0;  // pixel of the image's left upper corner
    int y = 0;
    const GlyphImage* image = nullptr;  // owned by the painter
};

// Turns text into pixels. Keeps what it has drawn; one painter a thread.
class TextPainter {
  public:
    // The glyphs of `utf8`, `size` pixels to the em, with the pen at (x, baseline) in pixels; pens
    // stand on quarters of a pixel across and on whole pixels down.
    [[nodiscard]] std::vector<PlacedGlyph> paint(std::string_view utf8, double size, Weight weight,
                                                 double x, double baseline);

  private:
    const GlyphImage& image_of(int glyph, double size, Weight weight, int quarter);

    std::map<std::tuple<int, double, Weight, int>, GlyphImage> images_;
};

}  // namespace tincture
