#include "tests/corpus/motifs.h"

#include <array>

namespace tincture::corpus {
namespace {

void draw_bands(Canvas& canvas, Random& random, const NextPen& next) {
    const int bands = 1 + static_cast<int>(random.below(3));
    double y = random.between(0.35, 0.6) * canvas.height();
    for (int i = 0; i < bands; ++i) {
        const Wave edge{y, random.between(0, 24), random.between(120, 600), random.unit()};
        canvas.below(edge, canvas.height(), next());
        y += random.between(50, 110);
    }
}

void draw_rays(Canvas& canvas, Random& random, const NextPen& next) {
    const Point from{canvas.width() * random.between(0.2, 0.8),
                     canvas.height() * random.between(0.3, 1)};
    const int rays = 7 + static_cast<int>(random.below(12));
    const Pen pen = next();
    for (int i = 0; i < rays; ++i) {
        const double turns = static_cast<double>(i) / rays;
        const std::array<Point, 3> wedge = {from, around(from, 900, turns),
                                            around(from, 900, turns + 0.5 / rays)};
        canvas.polygon(wedge, pen);
    }
}

void draw_stripes(Canvas& canvas, Random& random, const NextPen& next) {
    const double period = random.between(50, 130);
    const double lean = random.between(-1, 1);
    const std::array<Pen, 2> pens = {next(), next()};
    const double part = random.between(0.3, 0.6);
    int i = 0;
    for (double x = -500; x < 1000; x += period, ++i) {
        const double to = x + period * part;
        const double shift = lean * canvas.height();
        const double bottom = canvas.height();
        const std::array<Point, 4> stripe = {
            {{x, 0}, {to, 0}, {to + shift, bottom}, {x + shift, bottom}}};
        canvas.polygon(stripe, pens[static_cast<std::size_t>(i % 2)]);
    }
}

void draw_blocks(Canvas& canvas, Random& random, const NextPen& next) {
    const int columns = 2 + static_cast<int>(random.below(3));
    const int rows = 2 + static_cast<int>(random.below(3));
    const double gap = random.below(2) == 0 ? 0 : random.between(3, 8);
    const double w = static_cast<double>(canvas.width()) / columns;
    const double h = static_cast<double>(canvas.height()) / rows;
    for (int j = 0; j < rows; ++j) {
        for (int i = 0; i < columns; ++i) {
            if (random.below(3) == 0) continue;
            canvas.rectangle(Box{i * w, j * h, (i + 1) * w, (j + 1) * h}.inset(gap), next());
        }
    }
}

void draw_rings(Canvas& canvas, Random& random, const NextPen& next) {
    const Point centre{canvas.width() * random.between(0.3, 0.7),
                       canvas.height() * random.between(0.3, 0.7)};
    const std::array<Pen, 2> pens = {next(), next()};
    const double step = random.between(22, 50);
    for (int i = 6; i > 0; --i) {
        canvas.disk(centre, step * i, pens[static_cast<std::size_t>(i % 2)]);
    }
}

void draw_hills(Canvas& canvas, Random& random, Point c, double size, const NextPen& next) {
    const std::array<Point, 3> hill = {{{c.x - size * random.between(0.5, 0.9), c.y + size / 2},
                                        {c.x, c.y - size / 2},
                                        {c.x + size * random.between(0.5, 0.9), c.y + size / 2}}};
    canvas.polygon(hill, next());
    const auto down = [&](Point foot, double part) {
        return Point{c.x + (foot.x - c.x) * part, c.y - size / 2 + size * part};
    };
    const std::array<Point, 5> cap = {hill[1],
                                      down(hill[2], 0.3),
                                      {c.x + size * 0.05, c.y - size * 0.3},
                                      {c.x - size * 0.05, c.y - size * 0.12},
                                      down(hill[0], 0.3)};
    canvas.polygon(cap, next());
}

void draw_leaves(Canvas& canvas, Random& random, Point c, double size, const NextPen& next) {
    const Pen leaf = next();
    const double lean = random.between(-0.05, 0.05);
    for (int i = 0; i < 3; ++i) {
        const double y = c.y - size * 0.4 + i * size * 0.3;
        for (const double side : {-1.0, 1.0}) {
            canvas.ellipse({c.x + side * size * 0.22, y}, size * 0.24, size * 0.09,
                           side * -0.09 + lean, leaf);
        }
    }
    const std::array<Point, 2> stem = {{{c.x, c.y - size * 0.5}, {c.x, c.y + size * 0.5}}};
    canvas.line(stem, std::max(3.5, size * 0.05), leaf);
}

void draw_boat(Canvas& canvas, Random&, Point c, double size, const NextPen& next) {
    const double s = size / 2;
    const std::array<Point, 4> hull = {{{c.x - s, c.y + s * 0.4},
                                        {c.x + s, c.y + s * 0.4},
                                        {c.x + s * 0.6, c.y + s * 0.9},
                                        {c.x - s * 0.6, c.y + s * 0.9}}};
    const std::array<Point, 3> sail = {{{c.x - s * 0.05, c.y - s},
                                        {c.x - s * 0.05, c.y + s * 0.3},
                                        {c.x - s * 0.8, c.y + s * 0.3}}};
    const std::array<Point, 3> jib = {{{c.x + s * 0.08, c.y - s * 0.8},
                                       {c.x + s * 0.7, c.y + s * 0.3},
                                       {c.x + s * 0.08, c.y + s * 0.3}}};
    canvas.polygon(hull, next());
    canvas.polygon(sail, next());
    canvas.polygon(jib, next());
}

void draw_fish(Canvas& canvas, Random& random, Point c, double size, const NextPen& next) {
    const Pen body = next();
    const double way = random.below(2) == 0 ? 1 : -1;
    canvas.ellipse(c, size * 0.42, size * 0.2, 0, body);
    const std::array<Point, 3> tail = {{{c.x - way * size * 0.35, c.y},
                                        {c.x - way * size * 0.6, c.y - size * 0.2},
                                        {c.x - way * size * 0.6, c.y + size * 0.2}}};
    canvas.polygon(tail, body);
    canvas.disk({c.x + way * size * 0.24, c.y - size * 0.05}, std::max(3.0, size * 0.05), next());
}

void draw_house(Canvas& canvas, Random&, Point c, double size, const NextPen& next) {
    const double s = size / 2;
    const std::array<Point, 3> roof = {
        {{c.x - s * 0.9, c.y - s * 0.2}, {c.x, c.y - s}, {c.x + s * 0.9, c.y - s * 0.2}}};
    canvas.rectangle({c.x - s * 0.7, c.y - s * 0.2, c.x + s * 0.7, c.y + s}, next());
    canvas.polygon(roof, next());
    const Pen window = next();
    for (const double x : {-0.4, 0.12}) {
        for (const double y : {0.0, 0.45}) {
            canvas.rectangle({c.x + s * x, c.y + s * y, c.x + s * (x + 0.28), c.y + s * (y + 0.3)},
                             window);
        }
    }
}

void draw_round(Canvas& canvas, Random& random, Point c, double size, const NextPen& next) {
    const int kind = static_cast<int>(random.below(5));
    const int points = 5 + static_cast<int>(random.below(8));
    const Pen pen = next();
    if (kind == 0) canvas.disk(c, size / 2, pen);
    if (kind == 1) canvas.ring(c, size / 2, size * random.between(0.25, 0.38), pen);
    if (kind == 2) {
        const double inner = size * random.between(0.2, 0.38);
        canvas.polygon(star(c, size / 2, inner, 2 * points, random.unit()), pen);
    }
    if (kind == 3) canvas.polygon(star(c, size / 2, size / 2, 3 + points % 4, random.unit()), pen);
    if (kind == 4) {
        for (int i = 0; i < points; ++i) {
            canvas.disk(around(c, size * 0.38, static_cast<double>(i) / points),
                        size * 0.8 / points, pen);
        }
        canvas.disk(c, size * 0.2, next());
    }
}

void draw_zigzag(Canvas& canvas, Random& random, Point c, double size, const NextPen& next) {
    std::vector<Point> line;
    for (int i = 0; i <= 8; ++i) {
        line.push_back({c.x + (i - 4) * size * 0.2, c.y + (i % 2 == 0 ? -1 : 1) * size * 0.12});
    }
    canvas.line(line, random.between(4, 12), next());
}

}  // namespace

void draw_ground(Canvas& canvas, Random& random, const NextPen& next) {
    switch (random.below(6)) {
        case 0:
            draw_bands(canvas, random, next);
            break;
        case 1:
            draw_rays(canvas, random, next);
            break;
        case 2:
            draw_stripes(canvas, random, next);
            break;
        case 3:
            draw_blocks(canvas, random, next);
            break;
        case 4:
            draw_rings(canvas, random, next);
            break;
        default:
            break;
    }
}

void draw_motif(Canvas& canvas, Random& random, Point centre, double size, const NextPen& next) {
    constexpr std::array motifs = {draw_hills, draw_leaves, draw_boat,  draw_fish,
                                   draw_house, draw_round,  draw_round, draw_zigzag};
    motifs[random.below(motifs.size())](canvas, random, centre, size, next);
}

}  // namespace tincture::corpus
