// One panel of the curve drawing: lines over the counts on a logarithmic axis, with marks and
// names.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "output/geometry.h"
#include "output/plot_axes.h"
#include "output/svg.h"

namespace tincture {

struct PanelLine {
    std::string name;
    std::vector<double> values;  // one a count
    bool main = true;            // solid with full dots; else dashed with open dots
};

enum class MarkShape { diamond, triangle };

struct PanelMark {
    MarkShape shape;
    int count;
    double value;
    std::string name;
};

struct Panel {
    Box frame;  // of the plot, without title and tick labels
    std::string title;
    double title_height;  // of its baseline above the frame
    double floor;         // smaller values stand on the foot of the axis
    std::vector<PanelLine> lines;
    std::vector<PanelMark> marks;
    std::optional<double> level;  // a dotted line right across
    std::string level_name;
    int choice;  // the count of the upright line
    Box band;    // a grey field behind all; no width: none
};

// Draws it; `counts` belong to the values of the lines. Names that found no free place, which takes
// a very full panel, are returned.
std::vector<std::string> draw_panel(SvgWriter& svg, const Panel& panel, const CountAxis& axis,
                                    const std::vector<int>& counts);

}  // namespace tincture
