// Reads drawings back, as far as the tests need it: well-formed XML, texts and lines.
#pragma once

#include <map>
#include <string>
#include <string_view>
#include <vector>

#include "output/geometry.h"

namespace tincture::svg_reading {

struct Element {
    std::string name;
    std::map<std::string, std::string> attributes;  // with entities resolved
    std::string text;                               // of its own, with entities resolved
};

// All elements in the order in which they begin. Throws std::runtime_error where the text is not
// well-formed: tags, quotes, entities, characters that XML 1.0 forbids.
[[nodiscard]] std::vector<Element> parse(std::string_view xml);

[[nodiscard]] double number(const Element& element, const std::string& attribute);

// Where a text element stands: its width by the built-in typeface, from the top of its capitals to
// just below its baseline.
[[nodiscard]] Box text_box(const Element& element);

// The segments of all polylines and lines of one stroke colour and width.
[[nodiscard]] std::vector<Segment> segments(const std::vector<Element>& elements,
                                            const std::string& stroke_width);

}  // namespace tincture::svg_reading
