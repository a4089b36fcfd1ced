#include "tests/corpus/lettering.h"

#include <array>
#include <utility>

namespace tincture::corpus {
namespace {

using Polyline = std::vector<Point>;
struct Glyph {
    double width;
    std::vector<Polyline> strokes;  // in a box of height 1; all of them hang together
};

const std::vector<Glyph>& glyphs() {
    static const std::vector<Glyph> all = {
        {0.55, {{{0, 1}, {0, 0}, {0.55, 0.35}, {0, 0.6}}}},
        {0.6, {{{0, 0}, {0.6, 0}, {0.6, 1}, {0, 1}}}},
        {0.65, {{{0, 1}, {0.32, 0}, {0.65, 1}}}},
        {0.5, {arc({0.25, 0.25}, 0.25, 0, 1, 16), {{0.25, 0.5}, {0.25, 1}}}},
        {0.6, {{{0, 0}, {0, 1}}, {{0, 0.5}, {0.6, 0.5}}, {{0.6, 0.5}, {0.6, 1}}}},
        {0.7, {arc({0.35, 0.65}, 0.35, 0, 1, 20)}},
        {0.5, {{{0.5, 0}, {0, 0.3}, {0.5, 0.65}, {0, 1}}}},
        {0.6, {{{0, 0}, {0.3, 0.5}, {0.6, 0}}, {{0.3, 0.5}, {0.3, 1}}}},
        {0.6, {arc({0.3, 0.3}, 0.3, 0.5, 1, 12), {{0, 0.3}, {0, 1}}, {{0.6, 0.3}, {0.6, 1}}}},
        {0.5, {{{0, 0}, {0, 1}, {0.5, 1}}, {{0, 0.4}, {0.35, 0.4}}}},
        {0.12, {{{0.06, 0}, {0.06, 1}}}},
        {0.65, {{{0, 1}, {0, 0.3}, {0.65, 1}, {0.65, 0.3}}}},
        {0.7, {arc({0.35, 0.5}, 0.35, 0.1, 0.9, 16), {{0.35, 0.15}, {0.35, 0.5}}}},
        {0.55, {{{0, 0}, {0.55, 0}, {0, 1}, {0.55, 1}}}},
        {0.6, {arc({0.3, 0.7}, 0.3, 0, 0.5, 12), {{0, 0.7}, {0, 0}}, {{0.6, 0.7}, {0.6, 0.35}}}},
        {0.6, {{{0, 0.5}, {0.3, 0}, {0.6, 0.5}, {0.3, 1}, {0, 0.5}}}},
        {0.75, {{{0, 0}, {0.18, 1}, {0.37, 0.35}, {0.56, 1}, {0.75, 0}}}},
        {0.5, {arc({0.25, 0.75}, 0.25, 0, 1, 16), {{0.5, 0.75}, {0.5, 0}}}},
    };
    return all;
}

}  // namespace

int glyph_count() {
    return static_cast<int>(glyphs().size());
}

double draw_glyph(Canvas& canvas, int glyph, Point corner, const Lettering& style, Pen pen) {
    const Glyph& drawn = glyphs()[static_cast<std::size_t>(glyph)];
    if (style.measured) pen.stroke = canvas.new_stroke();
    for (const Polyline& stroke : drawn.strokes) {
        Polyline placed;
        for (const Point& p : stroke) {
            placed.push_back({corner.x + (p.x + style.slant * (1 - p.y)) * style.height,
                              corner.y + p.y * style.height});
        }
        canvas.line(placed, style.thickness, pen);
    }
    return (drawn.width + style.spacing) * style.height + style.thickness;
}

double draw_words(Canvas& canvas, Random& random, Point corner, double width,
                  const Lettering& style, Pen pen) {
    double x = 0;
    int left_in_word = 2 + static_cast<int>(random.below(7));
    const double widest = 0.8 * style.height;
    do {
        const int glyph = static_cast<int>(random.below(glyphs().size()));
        x += draw_glyph(canvas, glyph, {corner.x + x, corner.y}, style, pen);
        if (--left_in_word == 0) {
            x += 0.6 * style.height;
            left_in_word = 2 + static_cast<int>(random.below(7));
        }
    } while (x + widest < width);
    return x;
}

void draw_paragraph(Canvas& canvas, Random& random, const Box& box, double leading,
                    const Lettering& style, Pen pen) {
    for (double y = box.top; y + style.height < box.bottom; y += leading) {
        const bool last = y + leading + style.height >= box.bottom;
        const double part = last ? random.between(0.3, 0.8) : random.between(0.88, 1);
        draw_words(canvas, random, {box.left, y}, box.width() * part, style, pen);
    }
}

}  // namespace tincture::corpus
