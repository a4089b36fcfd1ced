// Flat shapes with exact areas: how much of each pixel each ink covers, mixed as light. It shares
// nothing with Canvas, so that what holds for pictures of both is not owed to how one draws.
#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "colour/rgb.h"
#include "picture/picture.h"
#include "tests/corpus/geometry.h"

namespace tincture::corpus {

// A closed line through its corners.
using Outline = std::vector<Point>;
// Outlines of one direction, with holes in them of the other. Where outlines overlap the shape is
// still covered once.
using Shape = std::vector<Outline>;

class Sheet {
  public:
    // All of the ink `ground`, which is below `inks`.
    Sheet(int width, int height, std::size_t inks, std::uint8_t ground);

    [[nodiscard]] int width() const { return width_; }
    [[nodiscard]] int height() const { return height_; }

    // Covers what lies below in the parts of pixels that the shape covers. `stroke` above 0 marks
    // a stroke whose survival is measured.
    void paint(const Shape& shape, std::uint8_t ink, std::uint16_t stroke = 0);

    // The part of pixel (x, y) that shows the ink, 0 to 1.
    [[nodiscard]] double coverage(int x, int y, std::size_t ink) const;
    // The ink with the largest part of the pixel there; places outside are moved to the border.
    [[nodiscard]] std::uint8_t ink_at(Point place) const;

    // For each pixel the ink with the largest part of it: the truth of its label.
    [[nodiscard]] std::vector<std::uint8_t> largest_inks() const;
    // For each pixel the stroke that covers most of it, or 0.
    [[nodiscard]] const std::vector<std::uint16_t>& strokes() const { return strokes_; }
    // For each pixel whether its ink covers it and its eight neighbours wholly.
    [[nodiscard]] std::vector<bool> solid() const;
    // 8-bit sRGB: each pixel the mean of the light of its inks, as a camera would see it.
    [[nodiscard]] Picture render(std::span<const Rgb8> inks) const;

  private:
    void add_edge(Point from, Point to);
    void add_in_row(int row, double from, double to, double rise);
    [[nodiscard]] std::uint8_t largest(std::size_t pixel) const;

    int width_, height_;
    std::size_t inks_;
    std::vector<float> parts_;            // for each pixel the part of each ink
    std::vector<std::uint16_t> strokes_;  // a pixel
    // Of the shape at work: how its coverage changes from pixel to pixel, one more a row.
    std::vector<double> changes_;
};

// sRGB (IEC 61966-2-1): the light, 0 to 1, of an encoded value of 0 to 1; within 1e-14.
[[nodiscard]] double light_of_encoded(double value);

}  // namespace tincture::corpus
