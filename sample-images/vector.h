// Points and directions in space; colours as three amounts of light.
#pragma once

#include <algorithm>
#include <cmath>

namespace tincture::samples {

struct Vec {
    double x = 0;
    double y = 0;
    double z = 0;

    Vec& operator+=(const Vec& b) { return *this = {x + b.x, y + b.y, z + b.z}; }
    Vec& operator*=(const Vec& b) { return *this = {x * b.x, y * b.y, z * b.z}; }
    Vec& operator*=(double k) { return *this = {x * k, y * k, z * k}; }
};

[[nodiscard]] constexpr Vec operator+(Vec a, Vec b) {
    return {a.x + b.x, a.y + b.y, a.z + b.z};
}
[[nodiscard]] constexpr Vec operator-(Vec a, Vec b) {
    return {a.x - b.x, a.y - b.y, a.z - b.z};
}
[[nodiscard]] constexpr Vec operator-(Vec a) {
    return {-a.x, -a.y, -a.z};
}
[[nodiscard]] constexpr Vec operator*(Vec a, Vec b) {
    return {a.x * b.x, a.y * b.y, a.z * b.z};
}
[[nodiscard]] constexpr Vec operator*(Vec a, double k) {
    return {a.x * k, a.y * k, a.z * k};
}
[[nodiscard]] constexpr Vec operator/(Vec a, double k) {
    return {a.x / k, a.y / k, a.z / k};
}
[[nodiscard]] constexpr double dot(Vec a, Vec b) {
    return a.x * b.x + a.y * b.y + a.z * b.z;
}
[[nodiscard]] constexpr Vec cross(Vec a, Vec b) {
    return {a.y * b.z - a.z * b.y, a.z * b.x - a.x * b.z, a.x * b.y - a.y * b.x};
}
[[nodiscard]] inline double length(Vec a) {
    return std::sqrt(dot(a, a));
}
[[nodiscard]] inline Vec normalised(Vec a) {
    return a / length(a);
}
[[nodiscard]] constexpr Vec mixed(Vec a, Vec b, double t) {
    return a + (b - a) * t;
}
[[nodiscard]] inline double largest(Vec a) {
    return std::max({a.x, a.y, a.z});
}

// Three directions at right angles; `up` is along the given one (length 1).
struct Frame {
    Vec side;
    Vec up;
    Vec front;

    explicit Frame(Vec direction) : up(direction) {
        const Vec other = std::fabs(up.y) < 0.9 ? Vec{0, 1, 0} : Vec{1, 0, 0};
        side = normalised(cross(other, up));
        front = cross(side, up);
    }
    [[nodiscard]] Vec to_world(Vec v) const { return side * v.x + up * v.y + front * v.z; }
    [[nodiscard]] Vec to_local(Vec v) const { return {dot(v, side), dot(v, up), dot(v, front)}; }
};

// The point in a grid that stands askew, so that noise does not line up with the things it is on.
[[nodiscard]] inline Vec skewed(Vec p) {
    static const Frame frame(normalised({0.48, 0.64, 0.60}));
    return frame.to_local(p);
}

}  // namespace tincture::samples
