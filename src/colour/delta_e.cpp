// Symbols as in Sharma, Wu, Dalal 2005. Instead of hue angles the formula is evaluated on hue
// directions (cosine and sine): what it needs of the mean hue are cosines of its multiples, which
// are polynomials of those two, and one angle near the blue axis.
#include "colour/delta_e.h"

#include <cmath>

namespace tincture {
namespace {

struct Direction {
    double c;
    double s;
};

double square(double x) {
    return x * x;
}

double power_7(double x) {
    const double x2 = x * x;
    return x2 * x2 * x2 * x;
}

// atan(t) for |t| <= 0.4143, by its Taylor series; the first term left out is below 2e-15.
double atan_small(double t) {
    const double t2 = t * t;
    double sum = 0;
    for (int k = 17; k >= 0; --k) sum = 1.0 / (2 * k + 1) - t2 * sum;
    return t * sum;
}

// The angle of a direction within a quarter-turn of zero, in radians: four times that of a quarter.
double angle_near_zero(Direction d) {
    const double half_c = std::sqrt((1 + d.c) / 2);
    const double half_s = d.s / (2 * half_c);
    return 4 * atan_small(half_s / (1 + half_c));
}

// exp(-y) for 0 <= y <= 60: series for y / 256, squared eight times.
double exp_negative(double y) {
    const double x = -y / 256;
    double power = 0;
    for (int k = 9; k >= 1; --k) power = (x / k) * (1 + power);
    power += 1;
    for (int i = 0; i < 8; ++i) power *= power;
    return power;
}

// sin(x) for |x| <= 1.1, by its Taylor series; the first term left out is below 1e-16.
double sin_small(double x) {
    const double x2 = x * x;
    double sum = 1;
    for (int k = 10; k >= 1; --k) sum = 1 - x2 / ((2 * k) * (2 * k + 1)) * sum;
    return x * sum;
}

// The direction of the mean hue h_bar'.
Direction mean_hue(Direction u1, Direction u2) {
    const Direction sum = {u1.c + u2.c, u1.s + u2.s};
    const double length = std::sqrt(square(sum.c) + square(sum.s));
    if (length > 1) return {sum.c / length, sum.s / length};
    // Nearly opposite: the sum has lost digits, but it lies across the difference, which has not.
    const Direction across = {u1.s - u2.s, u2.c - u1.c};
    const double chord = std::sqrt(square(across.c) + square(across.s));
    // A half-turn apart: the mean of the two angles in 0..360, which is 90 or more and below 270.
    const bool half_turn = length < 1e-9;
    const bool along = half_turn ? across.c < 0 || (across.c == 0 && across.s > 0)
                                 : sum.c * across.c + sum.s * across.s > 0;
    const double scale = (along ? 1 : -1) / chord;
    return {scale * across.c, scale * across.s};
}

double weight_T(Direction h) {
    const double c2 = 2 * h.c * h.c - 1;
    const double s2 = 2 * h.s * h.c;
    const double c3 = c2 * h.c - s2 * h.s;
    const double s3 = s2 * h.c + c2 * h.s;
    const double c4 = 2 * c2 * c2 - 1;
    const double s4 = 2 * s2 * c2;
    // cos(h - 30), cos(2h), cos(3h + 6), cos(4h - 63), with degrees opened by the sum formula.
    return 1 - 0.17 * (0.866025403784438647 * h.c + 0.5 * h.s) + 0.24 * c2 +
           0.32 * (0.994521895368273337 * c3 - 0.104528463267653471 * s3) -
           0.20 * (0.453990499739546792 * c4 + 0.891006524188367862 * s4);
}

double rotation_R_T(Direction h, double C_bar_p) {
    // The formula does not wrap h_bar' - 275: from 0 to 95 degrees it is below -180, and the
    // rotation is nothing (below 1e-20).
    if (h.s >= 0 && h.c > -0.0871557427476581736) return 0;
    // The mean hue less 275 degrees.
    const Direction d = {0.0871557427476581736 * h.c - 0.996194698091745532 * h.s,
                         0.0871557427476581736 * h.s + 0.996194698091745532 * h.c};
    const double angle =
        d.c >= 0 ? angle_near_zero(d)
                 : std::copysign(3.14159265358979324, d.s) - angle_near_zero({-d.c, d.s});
    const double degrees_25 = 25 * 3.14159265358979324 / 180;
    const double y = square(angle / degrees_25);
    const double delta_theta = 30 * 3.14159265358979324 / 180 * exp_negative(y);
    const double C7 = power_7(C_bar_p);
    const double R_C = 2 * std::sqrt(C7 / (C7 + 6103515625.0));  // 25^7
    return -sin_small(2 * delta_theta) * R_C;
}

}  // namespace

double delta_e_76(const Lab& one, const Lab& two) {
    return std::sqrt(square(one.L - two.L) + square(one.a - two.a) + square(one.b - two.b));
}

double delta_e_2000(const Lab& one, const Lab& two) {
    const double C1 = std::sqrt(square(one.a) + square(one.b));
    const double C2 = std::sqrt(square(two.a) + square(two.b));
    const double C_bar_7 = power_7((C1 + C2) / 2);
    const double G = 0.5 * (1 - std::sqrt(C_bar_7 / (C_bar_7 + 6103515625.0)));
    const double a1 = (1 + G) * one.a;
    const double a2 = (1 + G) * two.a;
    const double C1_p = std::sqrt(square(a1) + square(one.b));
    const double C2_p = std::sqrt(square(a2) + square(two.b));

    double dH = 0;
    // Without chroma there is no hue: the other colour's hue serves, as its angle plus zero does.
    Direction h_bar = {1, 0};
    if (C1_p > 0 && C2_p > 0) {
        const Direction u1 = {a1 / C1_p, one.b / C1_p};
        const Direction u2 = {a2 / C2_p, two.b / C2_p};
        h_bar = mean_hue(u1, u2);
        const double chord = std::sqrt(square(u1.c - u2.c) + square(u1.s - u2.s));
        const double turn = u1.c * u2.s - u1.s * u2.c;
        dH = std::copysign(std::sqrt(C1_p * C2_p) * chord, turn);
    } else if (C1_p > 0) {
        h_bar = {a1 / C1_p, one.b / C1_p};
    } else if (C2_p > 0) {
        h_bar = {a2 / C2_p, two.b / C2_p};
    }

    const double dL = two.L - one.L;
    const double dC = C2_p - C1_p;
    const double L_bar_50 = square((one.L + two.L) / 2 - 50);
    const double C_bar_p = (C1_p + C2_p) / 2;
    const double S_L = 1 + 0.015 * L_bar_50 / std::sqrt(20 + L_bar_50);
    const double S_C = 1 + 0.045 * C_bar_p;
    const double S_H = 1 + 0.015 * C_bar_p * weight_T(h_bar);
    const double R_T = rotation_R_T(h_bar, C_bar_p);
    const double l = dL / S_L;
    const double c = dC / S_C;
    const double h = dH / S_H;
    return std::sqrt(std::fmax(0, l * l + c * c + h * h + R_T * c * h));
}

}  // namespace tincture
