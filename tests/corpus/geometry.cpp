#include "tests/corpus/geometry.h"

#include <cmath>
#include <numbers>

namespace tincture::corpus {

double sine_of_turn(double turns) {
    double t = turns - std::floor(turns);  // 0..1
    double sign = 1;
    if (t >= 0.5) {
        t -= 0.5;
        sign = -1;
    }
    if (t > 0.25) t = 0.5 - t;
    // Taylor's series to the 13th power, at most a quarter turn from zero.
    const double x = t * 2 * std::numbers::pi;
    const double xx = x * x;
    double sum = 0;
    for (int n = 13; n >= 3; n -= 2) sum = xx / (n * (n - 1)) * (1 - sum);
    return sign * x * (1 - sum);
}

Point around(Point centre, double radius, double turns) {
    return {centre.x + radius * cosine_of_turn(turns), centre.y + radius * sine_of_turn(turns)};
}

std::vector<Point> arc(Point centre, double radius, double from_turns, double to_turns, int steps) {
    std::vector<Point> line;
    for (int i = 0; i <= steps; ++i) {
        line.push_back(around(centre, radius, from_turns + (to_turns - from_turns) * i / steps));
    }
    return line;
}

std::vector<Point> star(Point centre, double outer, double inner, int corners, double turns) {
    std::vector<Point> outline;
    for (int i = 0; i < corners; ++i) {
        outline.push_back(
            around(centre, i % 2 == 0 ? outer : inner, turns + static_cast<double>(i) / corners));
    }
    return outline;
}

}  // namespace tincture::corpus
