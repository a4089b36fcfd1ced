// Flat shapes drawn as an unsampled truth: every sub-sample has an ink, edges are exact.
#pragma once

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <functional>
#include <span>
#include <vector>

#include "colour/rgb.h"
#include "picture/picture.h"
#include "tests/corpus/geometry.h"

namespace tincture::corpus {

// What a shape is drawn with. `stroke` above 0 marks a stroke whose survival is measured.
struct Pen {
    std::uint8_t ink = 0;
    std::uint16_t stroke = 0;
};

class Canvas {
  public:
    // `fine` (odd) sub-samples a pixel each way, all of the ink `ground`.
    Canvas(int width, int height, int fine, std::uint8_t ground);

    [[nodiscard]] int width() const { return width_; }
    [[nodiscard]] int height() const { return height_; }
    [[nodiscard]] int fine() const { return fine_; }
    [[nodiscard]] Box whole() const {
        return {0, 0, static_cast<double>(width_), static_cast<double>(height_)};
    }

    // Later shapes are drawn inside this box only.
    void clip(const Box& box) { clip_ = box; }
    void clip_nothing() { clip_ = whole(); }

    // A number for one more stroke whose survival is measured.
    [[nodiscard]] std::uint16_t new_stroke() { return ++last_stroke_; }

    // Draws where inside(x, y) holds, asked at the centres of the sub-samples in `box`.
    template <typename Inside>
    void fill(const Box& box, Pen pen, const Inside& inside);

    void rectangle(const Box& box, Pen pen);
    void rounded_rectangle(const Box& box, double radius, Pen pen);
    void disk(Point centre, double radius, Pen pen);
    void ellipse(Point centre, double along, double across, double turns, Pen pen);
    void ring(Point centre, double outer, double inner, Pen pen);
    void polygon(std::span<const Point> outline, Pen pen);                // even-odd
    void line(std::span<const Point> points, double thickness, Pen pen);  // round caps and joins
    void frame(const Box& box, double thickness, Pen pen);                // inside the box
    // Everything below the wave, down to `bottom`.
    void below(const Wave& wave, double bottom, Pen pen);

    // The ink and the stroke at the centre of each pixel: the truth of its label.
    [[nodiscard]] std::vector<std::uint8_t> centre_inks() const;
    [[nodiscard]] const std::vector<std::uint16_t>& centre_strokes() const { return strokes_; }
    // For each pixel whether all sub-samples of it and of its eight neighbours have its ink.
    [[nodiscard]] std::vector<bool> solid() const;
    // The sub-samples, row by row.
    [[nodiscard]] const std::vector<std::uint8_t>& inks() const { return inks_; }

  private:
    int width_, height_, fine_;
    Box clip_;
    std::vector<std::uint8_t> inks_;      // width * fine by height * fine
    std::vector<std::uint16_t> strokes_;  // a pixel
    std::uint16_t last_stroke_ = 0;
};

// Red, green and blue in 0..255.
struct Light {
    double r, g, b;
};
[[nodiscard]] constexpr Light light_of(Rgb8 c) {
    return {static_cast<double>(c.r), static_cast<double>(c.g), static_cast<double>(c.b)};
}
[[nodiscard]] constexpr Light mix(Light one, Light two, double part) {
    return {one.r + (two.r - one.r) * part, one.g + (two.g - one.g) * part,
            one.b + (two.b - one.b) * part};
}
[[nodiscard]] std::uint8_t to_byte(double value);  // rounded and clipped

// 8-bit sRGB: each pixel the mean of its sub-samples' values as they are encoded, as most programs
// mix edges.
[[nodiscard]] Picture render(const Canvas& canvas, std::span<const Rgb8> inks);

// The same where a sub-sample of an ink at a place has a shade of its own.
using Shade = std::function<Light(double x, double y, std::uint8_t ink)>;
[[nodiscard]] Picture render(const Canvas& canvas, const Shade& shade);

template <typename Inside>
void Canvas::fill(const Box& box, Pen pen, const Inside& inside) {
    const auto low = [&](double edge, double border) {
        return static_cast<int>(std::floor(std::max({edge, border, 0.0}) * fine_));
    };
    const auto high = [&](double edge, double border, int size) {
        const double limit = std::min({edge, border, static_cast<double>(size)});
        return std::min(static_cast<int>(std::ceil(limit * fine_)), size * fine_);
    };
    const int right = high(box.right, clip_.right, width_);
    const int bottom = high(box.bottom, clip_.bottom, height_);
    const int middle = fine_ / 2;
    for (int j = low(box.top, clip_.top); j < bottom; ++j) {
        const double y = (j + 0.5) / fine_;
        if (y < clip_.top || y >= clip_.bottom) continue;
        for (int i = low(box.left, clip_.left); i < right; ++i) {
            const double x = (i + 0.5) / fine_;
            if (x < clip_.left || x >= clip_.right || !inside(x, y)) continue;
            inks_[static_cast<std::size_t>(j) * width_ * fine_ + i] = pen.ink;
            if (i % fine_ == middle && j % fine_ == middle) {
                strokes_[static_cast<std::size_t>(j / fine_) * width_ + i / fine_] = pen.stroke;
            }
        }
    }
}

}  // namespace tincture::corpus
