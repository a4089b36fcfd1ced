// Small drawings whose labels are known, with edges mixed by coverage.
#pragma once

#include <cstdint>
#include <functional>
#include <vector>

#include "colour/rgb.h"
#include "palette/palette.h"
#include "picture/picture.h"

namespace tincture::test_support {

// A drawing of `side` x `side` pixels, 3 x 3 sub-samples each.
class DrawnScene {
  public:
    DrawnScene(int side, std::vector<Rgb8> inks);

    // Draws with an ink where inside(x, y) holds; in pixels.
    void fill(std::uint8_t ink, const std::function<bool(double x, double y)>& inside);
    void disc(std::uint8_t ink, double x, double y, double radius);
    void box(std::uint8_t ink, double left, double top, double right, double bottom);
    // With round ends. Strokes that `counted` is set for are told apart by kept_strokes().
    void line(std::uint8_t ink, std::vector<std::pair<double, double>> points, double thickness,
              bool counted = false);

    [[nodiscard]] int side() const { return side_; }
    [[nodiscard]] const std::vector<Rgb8>& inks() const { return inks_; }

    // 8-bit sRGB, the mean of the sub-samples; blurred by a Gauss function and with noise, both
    // deviations in pixels and in steps of 255.
    [[nodiscard]] Picture picture(double blur = 0, double noise = 0) const;
    [[nodiscard]] Palette palette() const;

    // The ink at the centre of each pixel.
    [[nodiscard]] std::vector<std::uint8_t> truth() const;
    // Pixels with an ink that no pixel of the 3 x 3 around them has in truth.
    [[nodiscard]] int halo_pixels(const std::vector<std::uint8_t>& labels) const;
    // Counted strokes: the part of their pixels that has their ink, and how many hang together in
    // one piece of at least nine tenths of those.
    struct Strokes {
        double kept = 0;
        int whole = 0;
        int all = 0;
    };
    [[nodiscard]] Strokes kept_strokes(const std::vector<std::uint8_t>& labels) const;

  private:
    int side_;
    std::vector<Rgb8> inks_;
    std::vector<std::uint8_t> sub_;  // inks of the sub-samples
    std::vector<int> stroke_;        // the counted stroke at the centre of each pixel, or 0
    int strokes_ = 0;
};

}  // namespace tincture::test_support
