#include "canvas.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <numeric>

#include "numbers.h"

namespace tincture::samples {
namespace {

struct Crossing {
    int row;
    double x;
    int direction;
};

// Where the outline crosses the middle of each row of samples, by row, then from the left.
std::vector<Crossing> crossings(const Outline& outline, double fineness, int rows) {
    std::vector<Crossing> found;
    for (const auto& ring : outline.rings) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            Point a = ring[i];
            Point b = ring[(i + 1) % ring.size()];
            const int direction = a.y < b.y ? 1 : -1;
            if (direction < 0) std::swap(a, b);
            const double top = std::ceil(a.y * fineness - 0.5);
            const double bottom = std::ceil(b.y * fineness - 0.5);
            const int first = static_cast<int>(std::max(0.0, top));
            const int last = static_cast<int>(std::min<double>(rows, bottom));
            for (int row = first; row < last; ++row) {
                const double y = (row + 0.5) / fineness;
                const double x = a.x + (b.x - a.x) * ((y - a.y) / (b.y - a.y));
                found.push_back({row, x, direction});
            }
        }
    }
    std::sort(found.begin(), found.end(), [](const Crossing& p, const Crossing& q) {
        return p.row != q.row ? p.row < q.row : p.x < q.x;
    });
    return found;
}

// Calls span(row, first, last) for every run of samples inside the outline.
template <typename Span>
void scan(const Outline& outline, int fineness, int columns, int rows, Span span) {
    const auto found = crossings(outline, fineness, rows);
    int winding = 0;
    const auto column = [&](double x) {
        return static_cast<int>(std::clamp<double>(std::ceil(x * fineness - 0.5), 0, columns));
    };
    for (std::size_t i = 0; i + 1 < found.size(); ++i) {
        if (i == 0 || found[i].row != found[i - 1].row) winding = 0;
        winding += found[i].direction;
        if (winding == 0 || found[i + 1].row != found[i].row) continue;
        const int first = column(found[i].x);
        const int last = column(found[i + 1].x);
        if (first < last) span(found[i].row, first, last);
    }
}

template <typename Move>
Outline changed(const Outline& outline, Move move) {
    Outline result = outline;
    for (auto& ring : result.rings) {
        for (Point& p : ring) p = move(p);
    }
    return result;
}

}  // namespace

Ink tint(Ink ink, Ink paper, double percent) {
    const auto blend = [&](std::uint8_t a, std::uint8_t b) {
        const double root = mix(std::sqrt(linear_from_srgb(b / 255.0)),
                                std::sqrt(linear_from_srgb(a / 255.0)), percent / 100);
        const double light = root * root;
        return static_cast<std::uint8_t>(std::floor(srgb_from_linear(light) * 255 + 0.5));
    };
    return {blend(ink.red, paper.red), blend(ink.green, paper.green), blend(ink.blue, paper.blue)};
}

Outline& Outline::add(const Outline& other) {
    rings.insert(rings.end(), other.rings.begin(), other.rings.end());
    return *this;
}

Outline& Outline::add_reversed(const Outline& hole) {
    for (auto ring : hole.rings) {
        std::reverse(ring.begin(), ring.end());
        rings.push_back(std::move(ring));
    }
    return *this;
}

Outline Outline::moved(double dx, double dy) const {
    return changed(*this, [&](Point p) { return Point{p.x + dx, p.y + dy}; });
}

Outline Outline::scaled(double factor_x, double factor_y) const {
    return changed(*this, [&](Point p) { return Point{p.x * factor_x, p.y * factor_y}; });
}

Outline Outline::turned(double radians) const {
    const double c = cosine(radians);
    const double s = sine(radians);
    return changed(*this, [&](Point p) { return Point{p.x * c - p.y * s, p.x * s + p.y * c}; });
}

Outline polygon(std::vector<Point> points) {
    return {{std::move(points)}};
}

Outline rectangle(double left, double top, double right, double bottom) {
    return polygon({{left, top}, {right, top}, {right, bottom}, {left, bottom}});
}

Outline rounded_rectangle(double left, double top, double right, double bottom, double radius) {
    Line line;
    const std::array<Point, 4> centres{{{left + radius, top + radius},
                                        {right - radius, top + radius},
                                        {right - radius, bottom - radius},
                                        {left + radius, bottom - radius}}};
    for (std::size_t i = 0; i < 4; ++i) {
        const double from = pi + pi / 2 * static_cast<double>(i);
        const Line corner = arc(centres[i], radius, radius, from, from + pi / 2);
        line.insert(line.end(), corner.begin(), corner.end());
    }
    return polygon(std::move(line));
}

Outline ellipse(Point centre, double radius_x, double radius_y) {
    Line line = arc(centre, radius_x, radius_y, 0, 2 * pi);
    line.pop_back();
    return polygon(std::move(line));
}

Outline circle(Point centre, double radius) {
    return ellipse(centre, radius, radius);
}

Outline ring(Point centre, double outer, double inner) {
    return circle(centre, outer).add_reversed(circle(centre, inner));
}

Line arc(Point centre, double radius_x, double radius_y, double from, double to) {
    const double length = std::max(std::fabs(radius_x), std::fabs(radius_y)) * std::fabs(to - from);
    const int steps = std::max(4, static_cast<int>(length / 3));
    Line line;
    for (int i = 0; i <= steps; ++i) {
        const double t = from + (to - from) * i / steps;
        line.push_back({centre.x + radius_x * cosine(t), centre.y + radius_y * sine(t)});
    }
    return line;
}

Line quadratic(Point from, Point bend, Point to) {
    constexpr int steps = 48;
    Line line;
    for (int i = 0; i <= steps; ++i) {
        const double t = static_cast<double>(i) / steps;
        const double a = (1 - t) * (1 - t);
        const double b = 2 * t * (1 - t);
        const double c = t * t;
        line.push_back({a * from.x + b * bend.x + c * to.x, a * from.y + b * bend.y + c * to.y});
    }
    return line;
}

Line through(std::span<const Point> points) {
    constexpr int steps = 16;
    Line line;
    const auto at = [&](std::size_t i) { return points[std::min(i, points.size() - 1)]; };
    for (std::size_t i = 0; i + 1 < points.size(); ++i) {
        const Point a = at(i == 0 ? 0 : i - 1);
        const Point b = at(i);
        const Point c = at(i + 1);
        const Point d = at(i + 2);
        const auto spline = [](double p, double q, double r, double s, double t) {
            return q +
                   0.5 * t * (r - p + t * (2 * p - 5 * q + 4 * r - s + t * (3 * (q - r) + s - p)));
        };
        for (int k = 0; k < steps; ++k) {
            const double t = static_cast<double>(k) / steps;
            line.push_back({spline(a.x, b.x, c.x, d.x, t), spline(a.y, b.y, c.y, d.y, t)});
        }
    }
    line.push_back(points.back());
    return line;
}

Outline stroke(const Line& line, double width_from, double width_to) {
    Outline result;
    const double last = static_cast<double>(std::max<std::size_t>(1, line.size() - 1));
    const auto half = [&](std::size_t i) {
        return mix(width_from, width_to, static_cast<double>(i) / last) / 2;
    };
    for (std::size_t i = 0; i < line.size(); ++i) {
        result.add(circle(line[i], half(i)));
        if (i + 1 == line.size()) break;
        const double dx = line[i + 1].x - line[i].x;
        const double dy = line[i + 1].y - line[i].y;
        const double length = std::sqrt(dx * dx + dy * dy);
        if (length == 0) continue;
        const Point side{-dy / length, dx / length};
        const auto corner = [&](std::size_t k, double sign) {
            return Point{line[k].x + sign * half(k) * side.x, line[k].y + sign * half(k) * side.y};
        };
        result.add(polygon({corner(i, -1), corner(i + 1, -1), corner(i + 1, 1), corner(i, 1)}));
    }
    return result;
}

Outline stroke(const Line& line, double width) {
    return stroke(line, width, width);
}

Canvas::Canvas(int width, int height, int fineness, std::vector<Ink> inks, std::uint8_t ground)
    : width_(width),
      height_(height),
      fineness_(fineness),
      inks_(std::move(inks)),
      samples_(static_cast<std::size_t>(width) * height * fineness * fineness, ground) {}

void Canvas::fill(const Outline& outline, std::uint8_t ink) {
    std::array<std::uint8_t, 256> table;
    table.fill(ink);
    exchange(outline, table);
}

void Canvas::fill_over(const Outline& outline, std::uint8_t ink,
                       std::initializer_list<std::uint8_t> over) {
    std::array<std::uint8_t, 256> table;
    std::iota(table.begin(), table.end(), std::uint8_t{0});
    for (const std::uint8_t i : over) table[i] = ink;
    exchange(outline, table);
}

void Canvas::exchange(const Outline& outline, std::span<const std::uint8_t> inks) {
    const int columns = width_ * fineness_;
    scan(outline, fineness_, columns, height_ * fineness_, [&](int row, int first, int last) {
        std::uint8_t* samples = samples_.data() + static_cast<std::size_t>(row) * columns;
        for (int i = first; i < last; ++i) {
            if (samples[i] < inks.size()) samples[i] = inks[samples[i]];
        }
    });
}

void Canvas::keep_only(const Outline& outline) {
    const int columns = width_ * fineness_;
    std::vector<std::uint8_t> kept(samples_.size(), transparent);
    scan(outline, fineness_, columns, height_ * fineness_, [&](int row, int first, int last) {
        const std::size_t start = static_cast<std::size_t>(row) * columns;
        std::copy(samples_.begin() + static_cast<std::ptrdiff_t>(start + first),
                  samples_.begin() + static_cast<std::ptrdiff_t>(start + last),
                  kept.begin() + static_cast<std::ptrdiff_t>(start + first));
    });
    samples_ = std::move(kept);
}

std::vector<std::uint8_t> Canvas::rgba() const {
    std::vector<std::array<double, 3>> light;
    for (const Ink& ink : inks_) {
        light.push_back({linear_from_srgb(ink.red / 255.0), linear_from_srgb(ink.green / 255.0),
                         linear_from_srgb(ink.blue / 255.0)});
    }
    const int columns = width_ * fineness_;
    std::vector<std::uint8_t> result;
    result.reserve(static_cast<std::size_t>(width_) * height_ * 4);
    for (int y = 0; y < height_; ++y) {
        for (int x = 0; x < width_; ++x) {
            std::array<double, 3> sum{};
            int covered = 0;
            for (int k = 0; k < fineness_ * fineness_; ++k) {
                const int row = y * fineness_ + k / fineness_;
                const int column = x * fineness_ + k % fineness_;
                const auto ink = samples_[static_cast<std::size_t>(row) * columns + column];
                if (ink == transparent) continue;
                ++covered;
                for (std::size_t c = 0; c < 3; ++c) sum[c] += light[ink][c];
            }
            for (const double channel : sum) {
                const double mean = covered == 0 ? 0 : channel / covered;
                result.push_back(
                    static_cast<std::uint8_t>(std::floor(srgb_from_linear(mean) * 255 + 0.5)));
            }
            const double alpha = 255.0 * covered / (fineness_ * fineness_);
            result.push_back(static_cast<std::uint8_t>(std::floor(alpha + 0.5)));
        }
    }
    return result;
}

}  // namespace tincture::samples
