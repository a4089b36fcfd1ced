// Writes an SVG 1.1 drawing that stands alone.
#pragma once

#include <span>
#include <string>
#include <string_view>

#include "output/geometry.h"
#include "output/typeface.h"

namespace tincture {

// Any bytes as the text or an attribute of an XML 1.0 document. What is ill-formed, forbidden in
// XML, invisible or turns the direction of text becomes U+FFFD.
[[nodiscard]] std::string xml_escape(std::string_view raw);

enum class Anchor { start, middle, end };

struct TextStyle {
    double size = 13;
    Weight weight = Weight::regular;
    std::string_view colour = "#1c1c1c";
    Anchor anchor = Anchor::start;
};

struct Stroke {
    std::string_view colour = "#1c1c1c";
    double width = 1;
    std::string_view dashes = "";  // as in stroke-dasharray
};

// Lengths are in pixels of CSS, written with up to two decimals; texts are escaped here.
class SvgWriter {
  public:
    // `id` tells drawings in one page apart; title and description are read out to the blind.
    SvgWriter(double width, double height, std::string_view id, std::string_view title,
              std::string_view description);

    void box(const Box& box, std::string_view fill, std::string_view outline = "");
    void line(const Segment& segment, const Stroke& stroke);
    void polyline(std::span<const Point> points, const Stroke& stroke);
    void polygon(std::span<const Point> points, std::string_view fill, std::string_view outline);
    void dot(Point centre, double radius, std::string_view fill, std::string_view outline = "");
    void text(Point baseline, std::string_view words, const TextStyle& style);

    [[nodiscard]] std::string finish() &&;

  private:
    void attribute(std::string_view name, double value);
    void attribute(std::string_view name, std::string_view value);
    void points(std::span<const Point> points);
    void stroke(const Stroke& stroke);

    std::string text_;
};

}  // namespace tincture
