// Points and boxes of a drawing; x runs right, y runs down.
#pragma once

namespace tincture {

struct Point {
    double x = 0;
    double y = 0;
};

struct Segment {
    Point from;
    Point to;
};

struct Box {
    double x = 0;  // left upper corner
    double y = 0;
    double width = 0;
    double height = 0;

    [[nodiscard]] double right() const { return x + width; }
    [[nodiscard]] double bottom() const { return y + height; }
};

// Boxes that only touch do not overlap.
[[nodiscard]] bool overlap(const Box& one, const Box& other);

[[nodiscard]] bool contains(const Box& outer, const Box& inner);

// Whether any point of the segment lies inside the box (its edge not counted).
[[nodiscard]] bool crosses(const Segment& segment, const Box& box);

}  // namespace tincture
