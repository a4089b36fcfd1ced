#include "tests/corpus/canvas.h"

#include <limits>

namespace tincture::corpus {
namespace {

Box bounds(std::span<const Point> points, double margin) {
    constexpr double far = std::numeric_limits<double>::max();
    Box box{far, far, -far, -far};
    for (const Point& p : points) {
        box.left = std::min(box.left, p.x);
        box.top = std::min(box.top, p.y);
        box.right = std::max(box.right, p.x);
        box.bottom = std::max(box.bottom, p.y);
    }
    return box.inset(-margin);
}

double squared_distance(double x, double y, Point from, Point to) {
    const double dx = to.x - from.x;
    const double dy = to.y - from.y;
    const double length = dx * dx + dy * dy;
    double t = length > 0 ? ((x - from.x) * dx + (y - from.y) * dy) / length : 0;
    t = std::clamp(t, 0.0, 1.0);
    const double ex = x - from.x - t * dx;
    const double ey = y - from.y - t * dy;
    return ex * ex + ey * ey;
}

}  // namespace

Canvas::Canvas(int width, int height, int fine, std::uint8_t ground)
    : width_(width),
      height_(height),
      fine_(fine),
      clip_(whole()),
      inks_(static_cast<std::size_t>(width) * height * fine * fine, ground),
      strokes_(static_cast<std::size_t>(width) * height, 0) {}

void Canvas::rectangle(const Box& box, Pen pen) {
    fill(box, pen, [&](double x, double y) {
        return x >= box.left && x < box.right && y >= box.top && y < box.bottom;
    });
}

void Canvas::rounded_rectangle(const Box& box, double radius, Pen pen) {
    fill(box, pen, [&](double x, double y) {
        const double dx = std::max({box.left + radius - x, x - box.right + radius, 0.0});
        const double dy = std::max({box.top + radius - y, y - box.bottom + radius, 0.0});
        return dx * dx + dy * dy <= radius * radius;
    });
}

void Canvas::disk(Point centre, double radius, Pen pen) {
    ring(centre, radius, -1, pen);
}

void Canvas::ellipse(Point centre, double along, double across, double turns, Pen pen) {
    const double c = cosine_of_turn(turns);
    const double s = sine_of_turn(turns);
    const Point one[] = {centre};
    fill(bounds(one, std::max(along, across)), pen, [&](double x, double y) {
        const double u = ((x - centre.x) * c + (y - centre.y) * s) / along;
        const double v = ((y - centre.y) * c - (x - centre.x) * s) / across;
        return u * u + v * v <= 1;
    });
}

void Canvas::ring(Point centre, double outer, double inner, Pen pen) {
    const Point one[] = {centre};
    fill(bounds(one, outer), pen, [&](double x, double y) {
        const double dx = x - centre.x;
        const double dy = y - centre.y;
        const double squared = dx * dx + dy * dy;
        return squared <= outer * outer && (inner < 0 || squared > inner * inner);
    });
}

void Canvas::polygon(std::span<const Point> outline, Pen pen) {
    fill(bounds(outline, 0), pen, [&](double x, double y) {
        bool inside = false;
        for (std::size_t i = 0, j = outline.size() - 1; i < outline.size(); j = i++) {
            const Point& p = outline[i];
            const Point& q = outline[j];
            if ((p.y > y) != (q.y > y) && x < (q.x - p.x) * (y - p.y) / (q.y - p.y) + p.x) {
                inside = !inside;
            }
        }
        return inside;
    });
}

void Canvas::line(std::span<const Point> points, double thickness, Pen pen) {
    const double reach = thickness / 2;
    for (std::size_t i = 0; i + 1 < points.size(); ++i) {
        fill(bounds(points.subspan(i, 2), reach), pen, [&](double x, double y) {
            return squared_distance(x, y, points[i], points[i + 1]) <= reach * reach;
        });
    }
}

void Canvas::frame(const Box& box, double thickness, Pen pen) {
    const Box hole = box.inset(thickness);
    fill(box, pen, [&](double x, double y) {
        const bool within = x >= box.left && x < box.right && y >= box.top && y < box.bottom;
        return within && !(x >= hole.left && x < hole.right && y >= hole.top && y < hole.bottom);
    });
}

void Canvas::below(const Wave& wave, double bottom, Pen pen) {
    std::vector<double> edge;  // a column of sub-samples
    for (int i = 0; i < width_ * fine_; ++i) edge.push_back(wave.at((i + 0.5) / fine_));
    const Box box{0, wave.middle - wave.height, static_cast<double>(width_), bottom};
    fill(box, pen, [&](double x, double y) {
        return y < bottom && y >= edge[static_cast<std::size_t>(x * fine_)];
    });
}

std::vector<std::uint8_t> Canvas::centre_inks() const {
    std::vector<std::uint8_t> centre;
    centre.reserve(strokes_.size());
    for (int y = 0; y < height_; ++y) {
        const std::size_t row = static_cast<std::size_t>(y * fine_ + fine_ / 2) * width_ * fine_;
        for (int x = 0; x < width_; ++x) centre.push_back(inks_[row + x * fine_ + fine_ / 2]);
    }
    return centre;
}

std::vector<bool> Canvas::solid() const {
    // A pixel's own ink if all its sub-samples agree, else -1.
    std::vector<int> pure(strokes_.size());
    for (int y = 0; y < height_; ++y) {
        for (int x = 0; x < width_; ++x) {
            const std::size_t first =
                static_cast<std::size_t>(y) * fine_ * width_ * fine_ + x * fine_;
            int ink = inks_[first];
            for (int j = 0; j < fine_; ++j) {
                for (int i = 0; i < fine_; ++i) {
                    if (inks_[first + static_cast<std::size_t>(j) * width_ * fine_ + i] != ink) {
                        ink = -1;
                        j = i = fine_;
                    }
                }
            }
            pure[static_cast<std::size_t>(y) * width_ + x] = ink;
        }
    }
    std::vector<bool> result(pure.size(), false);
    for (int y = 1; y + 1 < height_; ++y) {
        for (int x = 1; x + 1 < width_; ++x) {
            const std::size_t at = static_cast<std::size_t>(y) * width_ + x;
            bool same = pure[at] >= 0;
            for (int j = -1; j <= 1 && same; ++j) {
                for (int i = -1; i <= 1; ++i) same = same && pure[at + j * width_ + i] == pure[at];
            }
            result[at] = same;
        }
    }
    return result;
}

std::uint8_t to_byte(double value) {
    return static_cast<std::uint8_t>(std::clamp(std::floor(value + 0.5), 0.0, 255.0));
}

Picture render(const Canvas& canvas, const Shade& shade) {
    const int fine = canvas.fine();
    Picture picture;
    picture.width = static_cast<std::uint32_t>(canvas.width());
    picture.height = static_cast<std::uint32_t>(canvas.height());
    picture.samples8 = Samples<std::uint8_t>(picture.pixel_count() * 3);
    std::size_t out = 0;
    for (int y = 0; y < canvas.height(); ++y) {
        for (int x = 0; x < canvas.width(); ++x) {
            Light sum{0, 0, 0};
            for (int j = 0; j < fine; ++j) {
                const std::size_t row =
                    (static_cast<std::size_t>(y) * fine + j) * canvas.width() * fine + x * fine;
                for (int i = 0; i < fine; ++i) {
                    const Light light =
                        shade(x + (i + 0.5) / fine, y + (j + 0.5) / fine, canvas.inks()[row + i]);
                    sum = {sum.r + light.r, sum.g + light.g, sum.b + light.b};
                }
            }
            const double n = fine * fine;
            picture.samples8[out++] = to_byte(sum.r / n);
            picture.samples8[out++] = to_byte(sum.g / n);
            picture.samples8[out++] = to_byte(sum.b / n);
        }
    }
    return picture;
}

Picture render(const Canvas& canvas, std::span<const Rgb8> inks) {
    return render(canvas, [&](double, double, std::uint8_t ink) { return light_of(inks[ink]); });
}

}  // namespace tincture::corpus
