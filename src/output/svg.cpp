#include "output/svg.h"

#include "support/format.h"
#include "support/utf8.h"

namespace tincture {
namespace {

// Common practice for fonts as wide as Roboto; wider ones still fit, see curve_drawing.cpp.
constexpr std::string_view fonts =
    "Roboto, 'Helvetica Neue', Helvetica, Arial, 'Liberation Sans', sans-serif";

std::string number(double value) {
    std::string text = fixed(value, 2);
    while (text.ends_with('0')) text.pop_back();
    if (text.ends_with('.')) text.pop_back();
    return text;
}

}  // namespace

std::string xml_escape(std::string_view raw) {
    std::string escaped;
    for (const char c : legible(raw)) {
        switch (c) {
            case '&':
                escaped += "&amp;";
                break;
            case '<':
                escaped += "&lt;";
                break;
            case '>':
                escaped += "&gt;";
                break;
            case '"':
                escaped += "&quot;";
                break;
            case '\'':
                escaped += "&#39;";
                break;
            default:
                escaped += c;
        }
    }
    return escaped;
}

SvgWriter::SvgWriter(double width, double height, std::string_view id, std::string_view title,
                     std::string_view description) {
    const std::string name = xml_escape(id);
    text_ = "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n<svg xmlns=\"http://www.w3.org/2000/svg\"";
    attribute("width", width);
    attribute("height", height);
    attribute("viewBox", "0 0 " + number(width) + ' ' + number(height));
    attribute("role", "img");
    attribute("aria-labelledby", name + "-title " + name + "-description");
    attribute("font-family", fonts);
    text_ += ">\n<title id=\"" + name + "-title\">" + xml_escape(title) + "</title>\n<desc id=\"" +
             name + "-description\">" + xml_escape(description) + "</desc>\n";
    box({0, 0, width, height}, "#ffffff");
}

void SvgWriter::attribute(std::string_view name, double value) {
    attribute(name, number(value));
}

void SvgWriter::attribute(std::string_view name, std::string_view value) {
    text_ += ' ';
    text_ += name;
    text_ += "=\"";
    text_ += value;
    text_ += '"';
}

void SvgWriter::points(std::span<const Point> points) {
    std::string list;
    for (const Point& point : points) {
        if (!list.empty()) list += ' ';
        list += number(point.x) + ',' + number(point.y);
    }
    attribute("points", list);
}

void SvgWriter::stroke(const Stroke& stroke) {
    attribute("fill", "none");
    attribute("stroke", stroke.colour);
    attribute("stroke-width", stroke.width);
    if (!stroke.dashes.empty()) attribute("stroke-dasharray", stroke.dashes);
}

void SvgWriter::box(const Box& box, std::string_view fill, std::string_view outline) {
    text_ += "<rect";
    attribute("x", box.x);
    attribute("y", box.y);
    attribute("width", box.width);
    attribute("height", box.height);
    attribute("fill", fill);
    if (!outline.empty()) attribute("stroke", outline);
    text_ += "/>\n";
}

void SvgWriter::line(const Segment& segment, const Stroke& style) {
    text_ += "<line";
    attribute("x1", segment.from.x);
    attribute("y1", segment.from.y);
    attribute("x2", segment.to.x);
    attribute("y2", segment.to.y);
    stroke(style);
    text_ += "/>\n";
}

void SvgWriter::polyline(std::span<const Point> list, const Stroke& style) {
    text_ += "<polyline";
    points(list);
    stroke(style);
    attribute("stroke-linejoin", "round");
    text_ += "/>\n";
}

void SvgWriter::polygon(std::span<const Point> list, std::string_view fill,
                        std::string_view outline) {
    text_ += "<polygon";
    points(list);
    attribute("fill", fill);
    attribute("stroke", outline);
    text_ += "/>\n";
}

void SvgWriter::dot(Point centre, double radius, std::string_view fill, std::string_view outline) {
    text_ += "<circle";
    attribute("cx", centre.x);
    attribute("cy", centre.y);
    attribute("r", radius);
    attribute("fill", fill);
    if (!outline.empty()) attribute("stroke", outline);
    text_ += "/>\n";
}

void SvgWriter::text(Point baseline, std::string_view words, const TextStyle& style) {
    text_ += "<text";
    attribute("x", baseline.x);
    attribute("y", baseline.y);
    attribute("font-size", style.size);
    if (style.weight == Weight::medium) attribute("font-weight", "500");
    if (style.anchor == Anchor::middle) attribute("text-anchor", "middle");
    if (style.anchor == Anchor::end) attribute("text-anchor", "end");
    attribute("fill", style.colour);
    text_ += '>' + xml_escape(words) + "</text>\n";
}

std::string SvgWriter::finish() && {
    text_ += "</svg>\n";
    return std::move(text_);
}

}  // namespace tincture
