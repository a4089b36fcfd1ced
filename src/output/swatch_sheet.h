// swatches.svg and swatches.png: the palette as chips with their figures beside them.
#pragma once

#include <cstdint>
#include <string>
#include <variant>
#include <vector>

#include "choose/study.h"
#include "output/geometry.h"
#include "output/svg.h"
#include "output/typeface.h"

namespace tincture {

struct SheetField {
    Box box;
    Rgb8 fill;
    bool outlined = false;  // with a hairline, for what would melt into the white page
};

struct SheetText {
    Point baseline;
    std::string words;
    double size;
    Weight weight;
    Rgb8 colour;
    Anchor anchor;
};

// The one layout that both files are drawn from; lengths in pixels of CSS, all fields on whole
// ones.
struct SwatchSheet {
    double width = 0;
    double height = 0;
    std::string title;
    std::string description;
    std::vector<std::variant<SheetField, SheetText>> shapes;
};

// Lays out the palette of study.count: one column up to 12 colours, two up to 48, else four.
[[nodiscard]] SwatchSheet lay_out_swatches(const Study& study);

[[nodiscard]] std::string swatches_svg(const Study& study);

// A PNG in sRGB, two pixels for one of the layout.
[[nodiscard]] std::vector<std::uint8_t> swatches_png(const Study& study);

}  // namespace tincture
