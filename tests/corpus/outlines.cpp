#include "tests/corpus/outlines.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <iterator>

namespace tincture::corpus {
namespace {

Outline corners_of(const Box& box) {
    return {
        {box.left, box.top}, {box.right, box.top}, {box.right, box.bottom}, {box.left, box.bottom}};
}

Outline backwards(Outline outline) {
    std::reverse(outline.begin(), outline.end());
    return outline;
}

Outline circle(Point centre, double radius, int corners, double turns) {
    Outline outline = arc(centre, radius, turns, turns + 1, corners);
    outline.pop_back();  // the first once more
    return outline;
}

Point moved(Point p, double along_x, double along_y) {
    return {p.x + along_x, p.y + along_y};
}

// Solid forms in a box of height 1: outlines first, holes after them.
struct Letter {
    double width;
    Shape solid;
    Shape holes;
};

const std::vector<Letter>& letters() {
    static const std::vector<Letter> all = {
        {0.6, {{{0, 0}, {0.6, 0}, {0.6, 0.25}, {0.42, 0.25}, {0.42, 1}, {0.16, 1}, {0, 0.3}}}, {}},
        {0.7, {circle({0.35, 0.5}, 0.35, 24, 0)}, {circle({0.35, 0.5}, 0.13, 16, 0)}},
        {0.75, {{{0.25, 0}, {0.5, 0}, {0.75, 1}, {0.48, 1}, {0.375, 0.5}, {0.27, 1}, {0, 1}}}, {}},
        {0.55, {{{0, 0}, {0.25, 0}, {0.25, 0.72}, {0.55, 0.72}, {0.55, 1}, {0, 1}}}, {}},
        {0.65,
         {{{0, 0}, {0.65, 0}, {0.65, 1}, {0, 1}}},
         {{{0.24, 0.3}, {0.42, 0.3}, {0.33, 0.75}}}},
        {0.6, {{{0, 0}, {0.6, 0.35}, {0.35, 0.5}, {0.6, 0.65}, {0, 1}}}, {}},
        {0.5, {{{0, 0}, {0.5, 0}, {0.3, 0.5}, {0.5, 1}, {0, 1}, {0.2, 0.5}}}, {}},
        {0.7,
         {{{0, 0},
           {0.24, 0},
           {0.24, 0.38},
           {0.46, 0.38},
           {0.46, 0},
           {0.7, 0},
           {0.7, 1},
           {0.46, 1},
           {0.46, 0.62},
           {0.24, 0.62},
           {0.24, 1},
           {0, 1}}},
         {}},
        {0.5, {arc({0, 0.5}, 0.5, -0.25, 0.25, 20)}, {{{0.1, 0.36}, {0.3, 0.5}, {0.1, 0.64}}}},
        {0.24, {{{0, 0.3}, {0.24, 0.2}, {0.24, 1}, {0, 1}}}, {}},
    };
    return all;
}

}  // namespace

void add_to(Shape& shape, Shape&& more) {
    std::move(more.begin(), more.end(), std::back_inserter(shape));
}

Shape box_shape(const Box& box) {
    return {corners_of(box)};
}

Shape frame_shape(const Box& box, double thickness) {
    return {corners_of(box), backwards(corners_of(box.inset(thickness)))};
}

Shape disc_shape(Point centre, double radius, int corners, double turns) {
    return {circle(centre, radius, corners, turns)};
}

Shape ring_shape(Point centre, double outer, double inner) {
    return {circle(centre, outer, 96, 0), backwards(circle(centre, inner, 96, 0))};
}

Shape rays_shape(Point centre, double reach, int rays, double turns) {
    Shape shape;
    for (int i = 0; i < rays; ++i) {
        const double from = turns + static_cast<double>(i) / rays;
        shape.push_back(
            {centre, around(centre, reach, from), around(centre, reach, from + 0.5 / rays)});
    }
    return shape;
}

Shape cog_shape(Point centre, double radius, int teeth, double turns) {
    Outline outline;
    constexpr std::array<double, 4> at = {0, 0.1, 0.45, 0.55};  // foot, top, top, foot
    for (int i = 0; i < teeth; ++i) {
        for (std::size_t j = 0; j < at.size(); ++j) {
            const bool top = j == 1 || j == 2;
            outline.push_back(
                around(centre, top ? radius : radius * 0.76, turns + (i + at[j]) / teeth));
        }
    }
    return {outline, backwards(circle(centre, radius * 0.3, 48, 0))};
}

Shape crescent_shape(Point centre, double radius, double turns) {
    Outline outline = arc(centre, radius, turns + 0.15, turns + 0.85, 64);
    // The inner side runs back on a circle through both tips.
    const double reach = radius * sine_of_turn(0.15);
    const Point inner = around(centre, radius * cosine_of_turn(0.15), turns);
    const Outline back = arc(inner, reach, turns + 0.75, turns + 0.25, 48);
    outline.insert(outline.end(), back.begin() + 1, back.end() - 1);
    return {outline};
}

Shape leaf_shape(Point stem, double length, double width, double turns) {
    const double c = cosine_of_turn(turns);
    const double s = sine_of_turn(turns);
    constexpr int steps = 32;
    Outline outline;
    for (int i = 0; i < 2 * steps; ++i) {
        const double t = static_cast<double>(i <= steps ? i : 2 * steps - i) / steps;
        const double out = width / 2 * sine_of_turn(t / 2) * (i <= steps ? -1 : 1);
        outline.push_back({stem.x + c * t * length - s * out, stem.y + s * t * length + c * out});
    }
    return {outline};
}

Shape hill_shape(const Wave& one, const Wave& two, double width, double bottom) {
    Outline outline;
    for (double x = 0; x < width + 3; x += 3) outline.push_back({x, one.at(x) + two.at(x)});
    outline.push_back({outline.back().x, bottom});
    outline.push_back({0, bottom});
    return {outline};
}

Shape brush_shape(std::span<const Point> points, std::span<const double> widths) {
    const std::size_t n = points.size();
    std::vector<Point> aside(n);  // half the width, at right angles
    for (std::size_t i = 0; i < n; ++i) {
        const Point before = points[i == 0 ? 0 : i - 1];
        const Point after = points[std::min(i + 1, n - 1)];
        const double dx = after.x - before.x;
        const double dy = after.y - before.y;
        const double scale = widths[i] / 2 / std::sqrt(dx * dx + dy * dy);
        aside[i] = {dy * scale, -dx * scale};
    }
    constexpr int steps = 12;
    Outline outline;
    for (std::size_t i = 0; i < n; ++i) outline.push_back(moved(points[i], aside[i].x, aside[i].y));
    const auto add_end = [&](Point end, Point from) {
        for (int i = 1; i < steps; ++i) {
            const double c = cosine_of_turn(0.5 * i / steps);
            const double s = sine_of_turn(0.5 * i / steps);
            outline.push_back(moved(end, from.x * c - from.y * s, from.y * c + from.x * s));
        }
    };
    add_end(points[n - 1], aside[n - 1]);
    for (std::size_t i = n; i-- > 0;) {
        outline.push_back(moved(points[i], -aside[i].x, -aside[i].y));
    }
    add_end(points[0], {-aside[0].x, -aside[0].y});
    return {outline};
}

int letter_count() {
    return static_cast<int>(letters().size());
}

double add_letter(Shape& shape, int letter, Point corner, double height) {
    const Letter& drawn = letters()[static_cast<std::size_t>(letter)];
    const auto place = [&](const Outline& outline) {
        Outline placed;
        for (const Point& p : outline) {
            placed.push_back({corner.x + p.x * height, corner.y + p.y * height});
        }
        return placed;
    };
    for (const Outline& outline : drawn.solid) shape.push_back(place(outline));
    for (const Outline& hole : drawn.holes) shape.push_back(backwards(place(hole)));
    return drawn.width * height;
}

}  // namespace tincture::corpus
