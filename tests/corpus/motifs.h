// What posters are made of: grounds that fill a picture, and motifs on them.
#pragma once

#include <functional>

#include "tests/corpus/canvas.h"

namespace tincture::corpus {

// Hands out the pen for the next part of a drawing.
using NextPen = std::function<Pen()>;

// Divides the whole canvas: bands, rays, stripes, blocks, rings or nothing.
void draw_ground(Canvas& canvas, Random& random, const NextPen& next);

// One motif around a place, about `size` across, of one ink or a few.
void draw_motif(Canvas& canvas, Random& random, Point centre, double size, const NextPen& next);

}  // namespace tincture::corpus
