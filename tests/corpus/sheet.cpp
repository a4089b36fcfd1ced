#include "tests/corpus/sheet.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>
#include <utility>

namespace tincture::corpus {
namespace {

constexpr double whole = 1 - 1e-6;  // nearer to 1 than that is rounding

// Newton's method from above: plain arithmetic, unlike a library's power.
double fifth_root(double a) {
    double root = 1;
    for (int i = 0; i < 60; ++i) {
        const double square = root * root;
        root -= (root - a / (square * square)) / 5;
    }
    return root;
}

struct Encoding {
    std::array<double, 256> light;   // of each byte
    std::array<double, 255> border;  // between a byte and the next
    Encoding() {
        for (std::size_t i = 0; i < light.size(); ++i) {
            light[i] = light_of_encoded(static_cast<double>(i) / 255);
        }
        for (std::size_t i = 0; i < border.size(); ++i) {
            border[i] = light_of_encoded((static_cast<double>(i) + 0.5) / 255);
        }
    }
    [[nodiscard]] std::uint8_t byte(double mixed) const {
        const auto* above = std::upper_bound(border.begin(), border.end(), mixed);
        return static_cast<std::uint8_t>(above - border.begin());
    }
};

const Encoding& encoding() {
    static const Encoding tables;
    return tables;
}

}  // namespace

double light_of_encoded(double value) {
    if (value <= 0.04045) return value / 12.92;
    const double base = (value + 0.055) / 1.055;
    return base * base * fifth_root(base * base);  // to the power of 2.4
}

Sheet::Sheet(int width, int height, std::size_t inks, std::uint8_t ground)
    : width_(width),
      height_(height),
      inks_(inks),
      parts_(static_cast<std::size_t>(width) * height * inks, 0),
      strokes_(static_cast<std::size_t>(width) * height, 0),
      changes_(static_cast<std::size_t>(width + 1) * height, 0) {
    for (std::size_t i = ground; i < parts_.size(); i += inks_) parts_[i] = 1;
}

// An edge covers all to the right of it; the edge on the other side takes that back.
void Sheet::add_edge(Point from, Point to) {
    if (from.y == to.y) return;
    const double sign = from.y < to.y ? 1 : -1;
    if (sign < 0) std::swap(from, to);
    const double slope = (to.x - from.x) / (to.y - from.y);
    const double start = std::max(from.y, 0.0);
    const double end = std::min(to.y, static_cast<double>(height_));
    for (int row = static_cast<int>(start); row < end; ++row) {
        const double top = std::max(start, static_cast<double>(row));
        const double bottom = std::min(end, row + 1.0);
        add_in_row(row, from.x + (top - from.y) * slope, from.x + (bottom - from.y) * slope,
                   sign * (bottom - top));
    }
}

// A piece of an edge between two places in a row of pixels.
void Sheet::add_in_row(int row, double from, double to, double rise) {
    if (from > to) std::swap(from, to);
    double* change = changes_.data() + static_cast<std::size_t>(row) * (width_ + 1);
    const double run = to - from;
    if (from < 0) {
        // What lies left of the sheet covers whole rows of it.
        const double part = to <= 0 ? rise : rise * (-from / run);
        change[0] += part;
        if (to <= 0) return;
    }
    for (int x = static_cast<int>(std::max(from, 0.0)); x < width_ && x <= to; ++x) {
        const double left = std::max(from, static_cast<double>(x));
        const double right = std::min(to, x + 1.0);
        const double part = run > 0 ? rise * ((right - left) / run) : rise;
        const double within = (left + right) / 2 - x;
        change[x] += part * (1 - within);
        change[x + 1] += part * within;
        if (run <= 0) return;
    }
}

void Sheet::paint(const Shape& shape, std::uint8_t ink, std::uint16_t stroke) {
    double low = height_;
    double high = 0;
    for (const Outline& outline : shape) {
        for (std::size_t i = 0; i < outline.size(); ++i) {
            add_edge(outline[i], outline[(i + 1) % outline.size()]);
            low = std::min(low, outline[i].y);
            high = std::max(high, outline[i].y);
        }
    }
    const int bottom = static_cast<int>(std::ceil(std::min(high, static_cast<double>(height_))));
    for (int y = static_cast<int>(std::max(low, 0.0)); y < bottom; ++y) {
        double* change = changes_.data() + static_cast<std::size_t>(y) * (width_ + 1);
        double sum = 0;
        for (int x = 0; x < width_; ++x) {
            sum += change[x];
            change[x] = 0;
            double covered = std::min(std::abs(sum), 1.0);
            if (covered < 1 - whole) continue;
            if (covered > whole) covered = 1;
            const std::size_t at = static_cast<std::size_t>(y) * width_ + x;
            float* parts = parts_.data() + at * inks_;
            const auto part = static_cast<float>(covered);
            for (std::size_t k = 0; k < inks_; ++k) parts[k] *= 1 - part;
            parts[ink] += part;
            if (covered > 0.5) strokes_[at] = stroke;
        }
        change[width_] = 0;
    }
}

double Sheet::coverage(int x, int y, std::size_t ink) const {
    return parts_[(static_cast<std::size_t>(y) * width_ + x) * inks_ + ink];
}

std::uint8_t Sheet::largest(std::size_t pixel) const {
    const float* parts = parts_.data() + pixel * inks_;
    return static_cast<std::uint8_t>(std::max_element(parts, parts + inks_) - parts);
}

std::uint8_t Sheet::ink_at(Point place) const {
    const int x = std::clamp(static_cast<int>(place.x), 0, width_ - 1);
    const int y = std::clamp(static_cast<int>(place.y), 0, height_ - 1);
    return largest(static_cast<std::size_t>(y) * width_ + x);
}

std::vector<std::uint8_t> Sheet::largest_inks() const {
    std::vector<std::uint8_t> inks(strokes_.size());
    for (std::size_t at = 0; at < inks.size(); ++at) inks[at] = largest(at);
    return inks;
}

std::vector<bool> Sheet::solid() const {
    const std::vector<std::uint8_t> inks = largest_inks();
    std::vector<bool> pure(inks.size());
    for (std::size_t at = 0; at < inks.size(); ++at) {
        pure[at] = parts_[at * inks_ + inks[at]] > static_cast<float>(whole);
    }
    std::vector<bool> result(inks.size(), false);
    for (int y = 1; y + 1 < height_; ++y) {
        for (int x = 1; x + 1 < width_; ++x) {
            const std::size_t at = static_cast<std::size_t>(y) * width_ + x;
            bool same = true;
            for (int j = -1; j <= 1; ++j) {
                for (int i = -1; i <= 1; ++i) {
                    const std::size_t near = at + j * width_ + i;
                    same = same && pure[near] && inks[near] == inks[at];
                }
            }
            result[at] = same;
        }
    }
    return result;
}

Picture Sheet::render(std::span<const Rgb8> inks) const {
    const Encoding& tables = encoding();
    Picture picture;
    picture.width = static_cast<std::uint32_t>(width_);
    picture.height = static_cast<std::uint32_t>(height_);
    picture.samples8 = Samples<std::uint8_t>(picture.pixel_count() * 3);
    for (std::size_t at = 0; at < strokes_.size(); ++at) {
        std::array<double, 3> light{};
        double sum = 0;
        for (std::size_t k = 0; k < inks_; ++k) {
            const double part = parts_[at * inks_ + k];
            sum += part;
            light[0] += part * tables.light[inks[k].r];
            light[1] += part * tables.light[inks[k].g];
            light[2] += part * tables.light[inks[k].b];
        }
        for (std::size_t c = 0; c < 3; ++c) {
            picture.samples8[3 * at + c] = tables.byte(light[c] / sum);
        }
    }
    return picture;
}

}  // namespace tincture::corpus
