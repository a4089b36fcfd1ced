#include "tests/support/ciede2000_textbook.h"

#include <algorithm>
#include <cmath>

namespace tincture::test_support {
namespace {

using Real = long double;

constexpr Real degree = 3.14159265358979323846264338327950288L / 180;

Real square(Real x) {
    return x * x;
}

Real share_of_25_to_7(Real C) {
    const Real C_7 = std::pow(C, Real{7});
    return std::sqrt(C_7 / (C_7 + 6103515625.0L));
}

struct Hues {
    Real C1_p, C2_p, h1_p, h2_p;  // h in degrees, 0 to 360
    Real h_bar_p;
    Real dh_p;
};

Real hue(Real a_p, Real b) {
    if (a_p == 0 && b == 0) return 0;
    const Real h = std::atan2(b, a_p) / degree;
    return h < 0 ? h + 360 : h;
}

Hues hues_of(const Lab& one, const Lab& two) {
    const Real C1 = std::sqrt(square(one.a) + square(one.b));
    const Real C2 = std::sqrt(square(two.a) + square(two.b));
    const Real G = 0.5L * (1 - share_of_25_to_7((C1 + C2) / 2));
    const Real a1_p = (1 + G) * one.a;
    const Real a2_p = (1 + G) * two.a;
    Hues hues{};
    hues.C1_p = std::sqrt(square(a1_p) + square(one.b));
    hues.C2_p = std::sqrt(square(a2_p) + square(two.b));
    hues.h1_p = hue(a1_p, one.b);
    hues.h2_p = hue(a2_p, two.b);
    const Real sum = hues.h1_p + hues.h2_p;
    if (hues.C1_p == 0 || hues.C2_p == 0) {
        hues.h_bar_p = sum;
        return hues;
    }
    hues.dh_p = hues.h2_p - hues.h1_p;
    if (std::abs(hues.dh_p) <= 180) {
        hues.h_bar_p = sum / 2;
        return hues;
    }
    hues.h_bar_p = sum < 360 ? (sum + 360) / 2 : (sum - 360) / 2;
    hues.dh_p += hues.dh_p > 180 ? -360 : 360;
    return hues;
}

}  // namespace

long double ciede2000_textbook(const Lab& one, const Lab& two) {
    const Hues hues = hues_of(one, two);
    const Real h_bar_p = hues.h_bar_p;
    const Real dL_p = Real{two.L} - Real{one.L};
    const Real dC_p = hues.C2_p - hues.C1_p;
    const Real dH_p = 2 * std::sqrt(hues.C1_p * hues.C2_p) * std::sin(hues.dh_p / 2 * degree);
    const Real L_bar_p = (Real{one.L} + Real{two.L}) / 2;
    const Real C_bar_p = (hues.C1_p + hues.C2_p) / 2;
    const Real T = 1 - 0.17L * std::cos((h_bar_p - 30) * degree) +
                   0.24L * std::cos(2 * h_bar_p * degree) +
                   0.32L * std::cos((3 * h_bar_p + 6) * degree) -
                   0.20L * std::cos((4 * h_bar_p - 63) * degree);
    const Real dtheta = 30 * std::exp(-square((h_bar_p - 275) / 25));
    const Real R_C = 2 * share_of_25_to_7(C_bar_p);
    const Real S_L = 1 + 0.015L * square(L_bar_p - 50) / std::sqrt(20 + square(L_bar_p - 50));
    const Real S_C = 1 + 0.045L * C_bar_p;
    const Real S_H = 1 + 0.015L * C_bar_p * T;
    const Real R_T = -std::sin(2 * dtheta * degree) * R_C;
    const Real squared = square(dL_p / S_L) + square(dC_p / S_C) + square(dH_p / S_H) +
                         R_T * (dC_p / S_C) * (dH_p / S_H);
    return std::sqrt(std::max(squared, Real{0}));
}

HueGaps hue_gaps(const Lab& one, const Lab& two) {
    const Hues hues = hues_of(one, two);
    if (hues.C1_p == 0 && hues.C2_p == 0) return {180 * degree, 180 * degree};
    const Real half_turn =
        hues.C1_p == 0 || hues.C2_p == 0 ? 180 : std::abs(std::abs(hues.h1_p - hues.h2_p) - 180);
    return {half_turn * degree, std::min(hues.h_bar_p, std::abs(360 - hues.h_bar_p)) * degree};
}

}  // namespace tincture::test_support
