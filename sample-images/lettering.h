// Lettering as outlines, so that it is filled like every other shape.
#pragma once

#include <memory>
#include <string>
#include <string_view>

#include "canvas.h"

namespace tincture::samples {

enum class Align { left, centre, right };

// `size` is the em in pixels; `tracking` is added between letters, in thousandths of the em.
class Typeface {
  public:
    // The name of a file in the folder of fonts, such as "Roboto-Black". Throws std::runtime_error.
    explicit Typeface(const std::string& name);
    ~Typeface();

    [[nodiscard]] double width(std::string_view text, double size, double tracking = 0) const;
    [[nodiscard]] double cap_height(double size) const;
    // The size at which the ink of the text (side bearings left out) is `width` pixels wide.
    [[nodiscard]] double size_to_fill(std::string_view text, double width,
                                      double tracking = 0) const;

    // `origin` is on the base line: where the text starts, has its middle or ends. The ink, not the
    // side bearing, stands at the origin.
    [[nodiscard]] Outline text(std::string_view text, Point origin, double size,
                               Align align = Align::left, double tracking = 0) const;
    // Along the outside of a circle, its middle at `angle` (clockwise from the right, radians), or
    // along the inside, read from the centre, for text at the foot of a badge.
    [[nodiscard]] Outline around(std::string_view text, Point centre, double radius, double angle,
                                 double size, double tracking, bool inside = false) const;

  private:
    struct Font;
    std::unique_ptr<Font> font_;
};

}  // namespace tincture::samples
