// Lettering in an invented alphabet: glyphs of a few strokes with round caps.
#pragma once

#include "tests/corpus/canvas.h"

namespace tincture::corpus {

struct Lettering {
    double height = 20;     // of a glyph, pixels
    double thickness = 3;   // of its strokes
    double slant = 0;       // to the right at the top, part of the height
    double spacing = 0.3;   // between glyphs, part of the height
    bool measured = false;  // each glyph is a stroke of its own whose survival is measured
};

[[nodiscard]] int glyph_count();

// Draws one glyph with its top left corner there; returns how far to the next.
double draw_glyph(Canvas& canvas, int glyph, Point corner, const Lettering& style, Pen pen);

// Words of random glyphs from `corner` on, up to `width` wide; at least one glyph. Returns the
// width that was used.
double draw_words(Canvas& canvas, Random& random, Point corner, double width,
                  const Lettering& style, Pen pen);

// Lines of words that fill a box from its top.
void draw_paragraph(Canvas& canvas, Random& random, const Box& box, double leading,
                    const Lettering& style, Pen pen);

}  // namespace tincture::corpus
