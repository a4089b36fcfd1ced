// Random numbers, functions and noise that give the same digits on every computer: those of the C
// and C++ libraries may differ between processors and compilers.
#pragma once

#include <cmath>
#include <cstdint>

namespace tincture::samples {

constexpr double pi = 3.14159265358979323846;

// SplitMix64 (Steele, Lea, Flood 2014, "Fast splittable pseudorandom number generators").
class Random {
  public:
    explicit Random(std::uint64_t seed) : state_(seed) {}

    [[nodiscard]] std::uint64_t next();
    [[nodiscard]] double unit();  // 0 <= x < 1
    [[nodiscard]] double between(double low, double high);
    [[nodiscard]] double normal();  // mean 0, standard deviation 1, never beyond 6

  private:
    std::uint64_t state_;
};

// Plain series, relative error below 1e-12 for the arguments that drawings have.
[[nodiscard]] double sine(double radians);
[[nodiscard]] double cosine(double radians);
[[nodiscard]] double exponential(double x);
[[nodiscard]] double logarithm(double x);                  // x > 0
[[nodiscard]] double power(double base, double exponent);  // base >= 0
[[nodiscard]] double angle_of(double y, double x);         // like atan2, radians

[[nodiscard]] constexpr double clamp01(double x) {
    return x < 0 ? 0 : x > 1 ? 1 : x;
}
[[nodiscard]] constexpr double mix(double a, double b, double t) {
    return a + (b - a) * t;
}
// 0 at `from`, 1 at `to`, smooth between them.
[[nodiscard]] constexpr double smooth_step(double from, double to, double x) {
    const double t = clamp01((x - from) / (to - from));
    return t * t * (3 - 2 * t);
}

// A number 0 <= x < 1 that belongs to a cell of a grid.
[[nodiscard]] double cell_value(std::int64_t x, std::int64_t y, std::int64_t z, std::uint64_t seed);
// Smooth noise between -1 and 1 over cells of size 1, and a sum of `octaves` of it (about -1 to 1).
[[nodiscard]] double noise(double x, double y, double z, std::uint64_t seed);
[[nodiscard]] double fractal_noise(double x, double y, double z, int octaves, std::uint64_t seed);

// Encoding of IEC 61966-2-1 (sRGB), both 0 to 1.
[[nodiscard]] double linear_from_srgb(double encoded);
[[nodiscard]] double srgb_from_linear(double linear);

}  // namespace tincture::samples
