// Finds places for the labels of a drawing where they cover nothing.
#pragma once

#include <optional>
#include <span>
#include <vector>

#include "output/geometry.h"

namespace tincture {

struct LabelRequest {
    double width = 0;
    double height = 0;
    Point anchor;               // what the label is about
    std::vector<Point> places;  // left upper corners, the best first
};

struct LabelPlace {
    Box box;
    std::optional<Segment> leader;  // from the label to its anchor, where they lie apart
};

// One place a request, the first requests choosing first: the first of its places that lies in
// `frame` at least 3 pixels off every line, every box of `taken` and every label placed before; if
// there is none, the free place nearest to the anchor, joined to it by a leader; none if the frame
// is full.
[[nodiscard]] std::vector<std::optional<LabelPlace>> place_labels(
    const Box& frame, std::span<const Segment> lines, std::span<const Box> taken,
    std::span<const LabelRequest> requests);

}  // namespace tincture
