#include "output/geometry.h"

#include <algorithm>

namespace tincture {

bool overlap(const Box& one, const Box& other) {
    return one.x < other.right() && other.x < one.right() && one.y < other.bottom() &&
           other.y < one.bottom();
}

bool contains(const Box& outer, const Box& inner) {
    return inner.x >= outer.x && inner.right() <= outer.right() && inner.y >= outer.y &&
           inner.bottom() <= outer.bottom();
}

bool crosses(const Segment& segment, const Box& box) {
    // Liang and Barsky 1984: the part of the segment, as a range of its parameter, within the box.
    const double dx = segment.to.x - segment.from.x;
    const double dy = segment.to.y - segment.from.y;
    double first = 0;
    double last = 1;
    const auto cut = [&first, &last](double step, double room_before, double room_after) {
        if (step == 0) return room_before < 0 && room_after > 0;
        double enter = room_before / step;
        double leave = room_after / step;
        if (enter > leave) std::swap(enter, leave);
        first = std::max(first, enter);
        last = std::min(last, leave);
        return first < last;
    };
    return cut(dx, box.x - segment.from.x, box.right() - segment.from.x) &&
           cut(dy, box.y - segment.from.y, box.bottom() - segment.from.y);
}

}  // namespace tincture
