#include "numbers.h"

namespace tincture::samples {
namespace {

std::uint64_t scramble(std::uint64_t z) {
    z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9U;
    z = (z ^ (z >> 27)) * 0x94D049BB133111EBU;
    return z ^ (z >> 31);
}

// Sine and cosine for |x| <= pi / 4, Taylor series.
double small_sine(double x) {
    const double s = x * x;
    return x * (1 + s * (-1.0 / 6 +
                         s * (1.0 / 120 +
                              s * (-1.0 / 5040 + s * (1.0 / 362880 + s * (-1.0 / 39916800))))));
}

double small_cosine(double x) {
    const double s = x * x;
    return 1 + s * (-1.0 / 2 +
                    s * (1.0 / 24 +
                         s * (-1.0 / 720 +
                              s * (1.0 / 40320 + s * (-1.0 / 3628800 + s * (1.0 / 479001600))))));
}

}  // namespace

std::uint64_t Random::next() {
    state_ += 0x9E3779B97F4A7C15U;
    return scramble(state_);
}

double Random::unit() {
    return static_cast<double>(next() >> 11) * 0x1p-53;
}

double Random::between(double low, double high) {
    return low + (high - low) * unit();
}

double Random::normal() {
    double sum = -6;
    for (int i = 0; i < 12; ++i) sum += unit();
    return sum;
}

double sine(double radians) {
    const double quarter = std::floor(radians / (pi / 2) + 0.5);
    const double rest = radians - quarter * (pi / 2);
    switch (static_cast<std::int64_t>(quarter) & 3) {
        case 0:
            return small_sine(rest);
        case 1:
            return small_cosine(rest);
        case 2:
            return -small_sine(rest);
        default:
            return -small_cosine(rest);
    }
}

double cosine(double radians) {
    return sine(radians + pi / 2);
}

double exponential(double x) {
    if (x < -700) return 0;
    constexpr double ln2 = 0.69314718055994530942;
    const double whole = std::floor(x / ln2 + 0.5);
    const double rest = x - whole * ln2;
    double term = 1;
    double sum = 1;
    for (int i = 1; i <= 13; ++i) {
        term *= rest / i;
        sum += term;
    }
    return std::ldexp(sum, static_cast<int>(whole));
}

double logarithm(double x) {
    int exponent = 0;
    double fraction = std::frexp(x, &exponent);  // 0.5 to 1
    if (fraction < 0.70710678118654752) {
        fraction *= 2;
        --exponent;
    }
    const double t = (fraction - 1) / (fraction + 1);
    const double s = t * t;
    double sum = 0;
    for (int i = 19; i >= 1; i -= 2) sum = sum * s + 1.0 / i;
    return 2 * t * sum + exponent * 0.69314718055994530942;
}

double power(double base, double exponent) {
    return base <= 0 ? 0 : exponential(exponent * logarithm(base));
}

double angle_of(double y, double x) {
    if (x == 0 && y == 0) return 0;
    // Two halvings of the angle bring the arc tangent's argument below 0.2.
    const double length = std::sqrt(x * x + y * y);
    double t = std::fabs(y) / (length + std::fabs(x));
    t = t / (1 + std::sqrt(1 + t * t));
    const double s = t * t;
    double sum = 0;
    for (int i = 21; i >= 1; i -= 2) sum = 1.0 / i - s * sum;
    const double acute = 4 * t * sum;
    const double upper = x < 0 ? pi - acute : acute;
    return y < 0 ? -upper : upper;
}

double cell_value(std::int64_t x, std::int64_t y, std::int64_t z, std::uint64_t seed) {
    const std::uint64_t mixed = 0x9E3779B97F4A7C15U * static_cast<std::uint64_t>(x) +
                                0xC2B2AE3D27D4EB4FU * static_cast<std::uint64_t>(y) +
                                0x165667B19E3779F9U * static_cast<std::uint64_t>(z) +
                                0xD6E8FEB86659FD93U * seed;
    return static_cast<double>(scramble(mixed) >> 11) * 0x1p-53;
}

double noise(double x, double y, double z, std::uint64_t seed) {
    const double fx = std::floor(x);
    const double fy = std::floor(y);
    const double fz = std::floor(z);
    const double u = smooth_step(0, 1, x - fx);
    const double v = smooth_step(0, 1, y - fy);
    const double w = smooth_step(0, 1, z - fz);
    const auto at = [&](int i, int j, int k) {
        return cell_value(static_cast<std::int64_t>(fx) + i, static_cast<std::int64_t>(fy) + j,
                          static_cast<std::int64_t>(fz) + k, seed);
    };
    const auto plane = [&](int k) {
        return mix(mix(at(0, 0, k), at(1, 0, k), u), mix(at(0, 1, k), at(1, 1, k), u), v);
    };
    // Flat pictures ask with a whole z and need only one of the two planes.
    return 2 * (w == 0 ? plane(0) : mix(plane(0), plane(1), w)) - 1;
}

double fractal_noise(double x, double y, double z, int octaves, std::uint64_t seed) {
    double sum = 0;
    double weight = 0.5;
    for (int i = 0; i < octaves; ++i) {
        sum += weight * noise(x, y, z, seed + static_cast<std::uint64_t>(i));
        weight *= 0.5;
        x = x * 2.03 + 17.1;
        y = y * 2.03 - 9.7;
        z *= 2.03;
    }
    return sum * 1.4;
}

double linear_from_srgb(double encoded) {
    return encoded <= 0.04045 ? encoded / 12.92 : power((encoded + 0.055) / 1.055, 2.4);
}

double srgb_from_linear(double linear) {
    return linear <= 0.0031308 ? linear * 12.92 : 1.055 * power(linear, 1 / 2.4) - 0.055;
}

}  // namespace tincture::samples
