#include "svg_reading.h"

#include <cstdlib>
#include <sstream>
#include <stdexcept>

#include "output/typeface.h"
#include "support/text.h"

namespace tincture::svg_reading {
namespace {

bool is_name(std::string_view name) {
    return !name.empty() && name.find_first_not_of(
                                "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRST"
                                "UVWXYZ0123456789-_:") == std::string_view::npos;
}

std::string resolve(std::string_view raw) {
    static const std::map<std::string_view, char> entities = {
        {"amp", '&'}, {"lt", '<'}, {"gt", '>'}, {"quot", '"'}, {"#39", '\''}};
    std::string text;
    while (!raw.empty()) {
        const char c = raw.front();
        if (c == '<' || (static_cast<unsigned char>(c) < 0x20 && c != '\n')) {
            throw std::runtime_error("a character that XML forbids here");
        }
        if (c == '&') {
            const auto end = raw.find(';');
            if (end == std::string_view::npos) throw std::runtime_error("a bare ampersand");
            text += entities.at(raw.substr(1, end - 1));
            raw.remove_prefix(end + 1);
        } else {
            text += c;
            raw.remove_prefix(1);
        }
    }
    return text;
}

Element read_tag(std::string_view tag) {
    Element element;
    const auto name_end = std::min(tag.find_first_of(" \n"), tag.size());
    element.name = tag.substr(0, name_end);
    if (!is_name(element.name)) throw std::runtime_error("no name: " + element.name);
    tag.remove_prefix(name_end);
    while (tag.find_first_not_of(" \n") != std::string_view::npos) {
        tag.remove_prefix(tag.find_first_not_of(" \n"));
        const auto equals = tag.find("=\"");
        if (equals == std::string_view::npos) throw std::runtime_error("no value");
        const std::string name(tag.substr(0, equals));
        if (!is_name(name)) throw std::runtime_error("no name: " + name);
        tag.remove_prefix(equals + 2);
        const auto quote = tag.find('"');
        if (quote == std::string_view::npos) throw std::runtime_error("an open quote");
        const bool added = element.attributes.emplace(name, resolve(tag.substr(0, quote))).second;
        if (!added) throw std::runtime_error("an attribute twice: " + name);
        tag.remove_prefix(quote + 1);
    }
    return element;
}

std::size_t tag_end(std::string_view xml) {
    bool quoted = false;
    for (std::size_t i = 0; i < xml.size(); ++i) {
        if (xml[i] == '"') quoted = !quoted;
        if (xml[i] == '>' && !quoted) return i;
    }
    throw std::runtime_error("an open tag");
}

std::vector<Point> points_of(const Element& element) {
    std::istringstream list(element.attributes.at("points"));
    std::vector<Point> points;
    char comma = 0;
    for (Point point; list >> point.x >> comma >> point.y;) points.push_back(point);
    return points;
}

}  // namespace

std::vector<Element> parse(std::string_view xml) {
    constexpr std::string_view declaration = "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n";
    if (!xml.starts_with(declaration)) throw std::runtime_error("no XML declaration");
    if (valid_utf8(xml) != xml) throw std::runtime_error("not UTF-8");
    xml.remove_prefix(declaration.size());
    std::vector<Element> elements;
    std::vector<std::size_t> open;
    while (!xml.empty()) {
        const auto start = std::min(xml.find('<'), xml.size());
        const std::string text = resolve(xml.substr(0, start));
        if (!open.empty()) elements[open.back()].text += text;
        xml.remove_prefix(start);
        if (xml.empty()) break;
        const std::size_t end = tag_end(xml);
        std::string_view tag = xml.substr(1, end - 1);
        xml.remove_prefix(end + 1);
        if (tag.starts_with('/')) {
            if (open.empty() || elements[open.back()].name != tag.substr(1)) {
                throw std::runtime_error("tags do not match");
            }
            open.pop_back();
            continue;
        }
        const bool closed = tag.ends_with('/');
        if (closed) tag.remove_suffix(1);
        if (open.empty() && !elements.empty()) throw std::runtime_error("two roots");
        elements.push_back(read_tag(tag));
        if (!closed) open.push_back(elements.size() - 1);
    }
    if (!open.empty()) throw std::runtime_error("an open element");
    return elements;
}

double number(const Element& element, const std::string& attribute) {
    return std::atof(element.attributes.at(attribute).c_str());
}

Box text_box(const Element& element) {
    const bool medium = element.attributes.contains("font-weight");
    const double size = number(element, "font-size");
    const double width = text_width(element.text, size, medium ? Weight::medium : Weight::regular);
    const auto anchor = element.attributes.find("text-anchor");
    double x = number(element, "x");
    if (anchor != element.attributes.end()) x -= anchor->second == "end" ? width : width / 2;
    return {x, number(element, "y") - 0.75 * size, width, 0.95 * size};
}

std::vector<Segment> segments(const std::vector<Element>& elements,
                              const std::string& stroke_width) {
    std::vector<Segment> list;
    for (const Element& element : elements) {
        const auto width = element.attributes.find("stroke-width");
        if (width == element.attributes.end() || width->second != stroke_width) continue;
        if (element.name == "polyline") {
            const std::vector<Point> points = points_of(element);
            for (std::size_t i = 1; i < points.size(); ++i) {
                list.push_back({points[i - 1], points[i]});
            }
        } else if (element.name == "line") {
            list.push_back({{number(element, "x1"), number(element, "y1")},
                            {number(element, "x2"), number(element, "y2")}});
        }
    }
    return list;
}

}  // namespace tincture::svg_reading
