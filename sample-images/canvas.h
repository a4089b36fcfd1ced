// Flat drawing: outlines are filled with inks on a grid finer than the pixels, then averaged.
#pragma once

#include <cstdint>
#include <initializer_list>
#include <span>
#include <vector>

namespace tincture::samples {

// Pixels from the top left corner, y downwards.
struct Point {
    double x = 0;
    double y = 0;
};

struct Ink {
    std::uint8_t red = 0;
    std::uint8_t green = 0;
    std::uint8_t blue = 0;
};

// `percent` of the area covered with the ink, the rest bare paper (Yule and Nielsen 1951, n = 2,
// which allows for the light that spreads in the paper).
[[nodiscard]] Ink tint(Ink ink, Ink paper, double percent);

// Closed rings, filled by the nonzero rule.
struct Outline {
    std::vector<std::vector<Point>> rings;

    Outline& add(const Outline& other);
    Outline& add_reversed(const Outline& hole);  // cuts out a ring of the same direction
    [[nodiscard]] Outline moved(double dx, double dy) const;
    [[nodiscard]] Outline scaled(double factor_x, double factor_y) const;  // about (0, 0)
    [[nodiscard]] Outline turned(double radians) const;  // about (0, 0), clockwise
};

[[nodiscard]] Outline polygon(std::vector<Point> points);
[[nodiscard]] Outline rectangle(double left, double top, double right, double bottom);
[[nodiscard]] Outline rounded_rectangle(double left, double top, double right, double bottom,
                                        double radius);
[[nodiscard]] Outline ellipse(Point centre, double radius_x, double radius_y);
[[nodiscard]] Outline circle(Point centre, double radius);
[[nodiscard]] Outline ring(Point centre, double outer, double inner);

// Lines: points along a curve. Angles are clockwise from the right.
using Line = std::vector<Point>;
[[nodiscard]] Line arc(Point centre, double radius_x, double radius_y, double from, double to);
[[nodiscard]] Line quadratic(Point from, Point bend, Point to);
[[nodiscard]] Line through(std::span<const Point> points);  // smooth, Catmull-Rom
// The line with round ends and joins; the width may run from one value to another.
[[nodiscard]] Outline stroke(const Line& line, double width_from, double width_to);
[[nodiscard]] Outline stroke(const Line& line, double width);

class Canvas {
  public:
    static constexpr std::uint8_t transparent = 255;

    // `fineness` x `fineness` samples a pixel; everything begins as `ground`, an index of inks or
    // transparent.
    Canvas(int width, int height, int fineness, std::vector<Ink> inks, std::uint8_t ground);

    void fill(const Outline& outline, std::uint8_t ink);
    // Only where one of `over` is on top so far.
    void fill_over(const Outline& outline, std::uint8_t ink,
                   std::initializer_list<std::uint8_t> over);
    // Within the outline ink i becomes inks[i]: the look of two inks printed one over the other.
    void exchange(const Outline& outline, std::span<const std::uint8_t> inks);
    void keep_only(const Outline& outline);  // transparent elsewhere
    // Every sample becomes paint(its middle, its ink so far).
    template <typename Paint>
    void repaint(Paint paint) {
        std::size_t i = 0;
        for (int row = 0; row < height_ * fineness_; ++row) {
            for (int column = 0; column < width_ * fineness_; ++column, ++i) {
                const Point at{(column + 0.5) / fineness_, (row + 0.5) / fineness_};
                samples_[i] = paint(at, samples_[i]);
            }
        }
    }

    [[nodiscard]] int width() const { return width_; }
    [[nodiscard]] int height() const { return height_; }
    // Four bytes a pixel: red, green, blue, alpha (not premultiplied). Averaged in linear light.
    [[nodiscard]] std::vector<std::uint8_t> rgba() const;

  private:
    int width_;
    int height_;
    int fineness_;
    std::vector<Ink> inks_;
    std::vector<std::uint8_t> samples_;
};

}  // namespace tincture::samples
