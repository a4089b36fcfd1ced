// Line art: outlines of one to three pixels, hatching, now and then a flat fill.
#include <array>
#include <stdexcept>

#include "tests/corpus/inks.h"
#include "tests/corpus/lettering.h"
#include "tests/corpus/pictures.h"

namespace tincture::corpus {
namespace {

constexpr int edge = 480;
constexpr double apart = 14;          // CIEDE2000
constexpr double line_to_paper = 35;  // outlines are drawn to be seen
constexpr double least_share = 0.002;

struct Drawing {
    Random& random;
    Canvas canvas;
    std::size_t inks;

    void line(std::span<const Point> points, double thickness, std::uint8_t ink = 1) {
        Pen pen{ink};
        if (thickness == 2) pen.stroke = canvas.new_stroke();
        canvas.line(points, thickness, pen);
    }
    void closed(std::vector<Point> points, double thickness, std::uint8_t ink = 1) {
        points.push_back(points.front());
        line(points, thickness, ink);
    }
    // Another ink than that of the outlines, where there is one.
    [[nodiscard]] std::uint8_t colour(std::size_t i) const {
        return static_cast<std::uint8_t>(inks > 2 ? 2 + i % (inks - 2) : 1);
    }
    double thickness() { return 1 + static_cast<double>(random.below(3)); }
};

// Parallel lines in a box.
void hatch(Drawing& d, const Box& box, double step, double lean, double thickness) {
    for (double x = box.left; x < box.right; x += step) {
        const double to = std::clamp(x + lean * box.height(), box.left, box.right);
        const double part = lean == 0 ? 1 : (to - x) / (lean * box.height());
        const std::array<Point, 2> stroke = {{{x, box.top}, {to, box.top + part * box.height()}}};
        d.line(stroke, thickness);
    }
}

void draw_leaf(Drawing& d, Point foot, double length, double turns, bool filled) {
    std::vector<Point> outline;
    const Point way = around({0, 0}, 1, turns);
    const auto at = [&](double along, double across) {
        return Point{foot.x + way.x * along - way.y * across,
                     foot.y + way.y * along + way.x * across};
    };
    for (int i = 0; i <= 24; ++i) {
        const double t = i / 24.0;
        outline.push_back(at(length * t, length * 0.25 * sine_of_turn(t / 2)));
    }
    for (int i = 23; i > 0; --i) {
        const double t = i / 24.0;
        outline.push_back(at(length * t, -length * 0.25 * sine_of_turn(t / 2)));
    }
    if (filled) d.canvas.polygon(outline, Pen{d.colour(0)});
    d.closed(outline, 2);
    const std::array<Point, 2> rib = {at(0, 0), at(length * 0.85, 0)};
    d.line(rib, 1);
    for (double t = 0.2; t < 0.8; t += 0.12) {
        const double reach = length * 0.2 * sine_of_turn(t / 2);
        for (const double side : {-1.0, 1.0}) {
            const std::array<Point, 2> vein = {at(length * t, 0),
                                               at(length * (t + 0.1), side * reach)};
            d.line(vein, 1);
        }
    }
}

void draw_plant(Drawing& d, const Box& box, bool filled) {
    const Point foot{box.centre().x, box.bottom};
    const std::array<Point, 3> stem = {
        {foot, {foot.x + 6, box.centre().y}, {foot.x - 4, box.top + box.height() * 0.2}}};
    for (int i = 0; i < 6; ++i) {
        const double y = box.bottom - box.height() * (0.12 + 0.12 * i);
        const double turns =
            i % 2 == 0 ? d.random.between(-0.14, -0.04) : d.random.between(0.54, 0.64);
        draw_leaf(d, {foot.x + 2, y}, box.width() * d.random.between(0.3, 0.48), turns,
                  filled && i % 3 != 2);
    }
    d.line(stem, 3);
}

void draw_town(Drawing& d, const Box& box, bool filled) {
    double x = box.left;
    while (x + 40 < box.right) {
        const double w = d.random.between(38, 70);
        const double top = box.bottom - box.height() * d.random.between(0.4, 0.75);
        const double right = std::min(x + w, box.right);
        const Box wall{x, top, right, box.bottom};
        const Point ridge{(x + right) / 2, top - d.random.between(16, 50)};
        const std::vector<Point> roof = {{x - 4, top}, ridge, {right + 4, top}};
        if (filled && d.random.below(2) == 0) d.canvas.polygon(roof, Pen{d.colour(1)});
        d.closed(roof, d.thickness());
        d.closed({{x, top}, {right, top}, {right, box.bottom}, {x, box.bottom}}, 2);
        for (double y = top + 14; y + 16 < box.bottom; y += 30) {
            const double middle = wall.centre().x;
            d.closed({{middle - 8, y}, {middle + 8, y}, {middle + 8, y + 14}, {middle - 8, y + 14}},
                     1);
        }
        if (d.random.below(2) == 0) {
            hatch(d, {x + 2, box.bottom - box.height() * 0.2, right - 2, box.bottom - 2}, 5, 0.5,
                  1);
        }
        x = right + d.random.between(0, 12);
    }
}

// Height lines of an invented hill country.
void draw_contours(Drawing& d, const Box& box) {
    d.canvas.clip(box);
    const Point c = box.centre();
    const double lobes = 2 + static_cast<double>(d.random.below(4));
    const double phase = d.random.unit();
    int i = 0;
    for (double radius = 12; radius < box.width() * 0.75; radius += d.random.between(9, 15), ++i) {
        std::vector<Point> ring;
        for (int k = 0; k < 120; ++k) {
            const double t = k / 120.0;
            const double bump = 1 + 0.16 * sine_of_turn(t * lobes + phase) +
                                0.07 * sine_of_turn(t * (lobes + 3) - phase);
            ring.push_back(around(c, radius * bump, t));
        }
        d.closed(ring, i % 4 == 0 ? 2 : 1, i % 4 == 0 ? d.colour(0) : std::uint8_t{1});
    }
    d.canvas.clip_nothing();
    d.closed({{box.left, box.top},
              {box.right, box.top},
              {box.right, box.bottom},
              {box.left, box.bottom}},
             3);
}

void draw_caption(Drawing& d) {
    Lettering title;
    title.height = d.random.between(18, 30);
    title.thickness = d.random.below(2) == 0 ? 2 : 3;
    title.measured = title.thickness == 2;
    draw_words(d.canvas, d.random, {40, 30}, d.random.between(160, 310), title, Pen{1});
    const std::array<Point, 2> rule = {{{40, 70.5}, {440, 70.5}}};
    d.line(rule, d.thickness(), d.colour(0));
}

std::vector<Rgb8> choose(Random& random) {
    std::vector<Rgb8> inks;
    do {
        inks = choose_inks(random, 2 + static_cast<int>(random.below(3)), apart);
    } while (lab_of(inks[0]).L < 70 || difference(inks[0], inks[1]) < line_to_paper);
    return inks;
}

}  // namespace

Sample draw_lines(Random& random) {
    for (int tries = 0; tries < 200; ++tries) {
        std::vector<Rgb8> inks = choose(random);
        Drawing d{random, Canvas(edge, edge, 5, 0), inks.size()};
        draw_caption(d);
        const bool filled = inks.size() > 2;
        const Box left{40, 100, 230, 440};
        const Box right{250, 100, 440, 440};
        const Box wide{40, 100, 440, 440};
        switch (random.below(4)) {
            case 0:
                draw_plant(d, left, filled);
                draw_plant(d, right, filled);
                break;
            case 1:
                draw_town(d, wide, filled);
                break;
            case 2:
                draw_contours(d, wide);
                break;
            default:
                draw_plant(d, left, filled);
                draw_contours(d, {250, 100, 440, 290});
                draw_town(d, {250, 310, 440, 440}, filled);
                break;
        }
        if (filled) {  // each colour has a place of its own
            for (std::size_t i = 2; i < inks.size(); ++i) {
                d.canvas.disk({380 + 40 * (static_cast<double>(i) - 2), 44}, 13,
                              Pen{static_cast<std::uint8_t>(i)});
            }
        }
        Sample sample = flat_sample(d.canvas, std::move(inks));
        const auto short_of = [](double share) { return share < least_share; };
        if (std::none_of(sample.shares.begin(), sample.shares.end(), short_of)) return sample;
    }
    throw std::logic_error("no line art came out complete");
}

}  // namespace tincture::corpus
