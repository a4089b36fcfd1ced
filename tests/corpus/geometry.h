// Points and directions on a canvas. Angles in plain arithmetic: the same bits on every processor.
#pragma once

#include <vector>

#include "tests/support/random.h"

namespace tincture::corpus {

using test_support::Random;

// In pixels, from the top left corner of the picture; pixel (0, 0) has its centre at (0.5, 0.5).
struct Point {
    double x = 0;
    double y = 0;
};

struct Box {
    double left = 0;
    double top = 0;
    double right = 0;
    double bottom = 0;

    [[nodiscard]] double width() const { return right - left; }
    [[nodiscard]] double height() const { return bottom - top; }
    [[nodiscard]] Point centre() const { return {(left + right) / 2, (top + bottom) / 2}; }
    [[nodiscard]] Box inset(double by) const {
        return {left + by, top + by, right - by, bottom - by};
    }
};

// Sine of a part of a whole turn, within 1e-9: sine_of_turn(0.25) is 1.
[[nodiscard]] double sine_of_turn(double turns);
[[nodiscard]] inline double cosine_of_turn(double turns) {
    return sine_of_turn(turns + 0.25);
}

// The point at `radius` around `centre`, `turns` whole turns on from the right, downwards first.
[[nodiscard]] Point around(Point centre, double radius, double turns);

// A circle or a part of one as a line of `steps` pieces.
[[nodiscard]] std::vector<Point> arc(Point centre, double radius, double from_turns,
                                     double to_turns, int steps);

// An outline of `corners` corners; every second one lies on `inner` instead of `outer`.
[[nodiscard]] std::vector<Point> star(Point centre, double outer, double inner, int corners,
                                      double turns);

// A wavy line from left to right: y = middle + height * sin(x / length + phase).
struct Wave {
    double middle;
    double height;
    double length;  // pixels a whole turn
    double phase;   // turns
    [[nodiscard]] double at(double x) const {
        return middle + height * sine_of_turn(x / length + phase);
    }
};

}  // namespace tincture::corpus
