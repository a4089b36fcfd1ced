// The vector form of delta_e.cpp, in single precision; see there for the way it is computed. Every
// step is a separate multiply or add, so that each instruction set gives the same bits.
#include <cstdint>

#include "colour/delta_e.h"

#undef HWY_TARGET_INCLUDE
#define HWY_TARGET_INCLUDE "colour/delta_e_batch.cpp"
#include <hwy/foreach_target.h>
#include <hwy/highway.h>

HWY_BEFORE_NAMESPACE();
namespace tincture {
namespace HWY_NAMESPACE {
namespace hn = hwy::HWY_NAMESPACE;

using D = hn::ScalableTag<float>;
using V = hn::Vec<D>;

HWY_INLINE V constant(float value) {
    return hn::Set(D(), value);
}
HWY_INLINE V square(V x) {
    return hn::Mul(x, x);
}
HWY_INLINE V power_7(V x) {
    const V x2 = hn::Mul(x, x);
    return hn::Mul(hn::Mul(hn::Mul(x2, x2), x2), x);
}

struct Directions {
    V c;
    V s;
};

// Unit direction of (a, b) with length C; (1, 0) where C is 0.
HWY_INLINE Directions unit(V a, V b, V C) {
    const auto none = hn::Le(C, constant(0));
    const V safe = hn::IfThenElse(none, constant(1), C);
    return {hn::IfThenElse(none, constant(1), hn::Div(a, safe)),
            hn::IfThenElse(none, constant(0), hn::Div(b, safe))};
}

HWY_INLINE Directions mean_hue(Directions u1, Directions u2, V C1, V C2) {
    const V zero = constant(0);
    const V c = hn::Add(u1.c, u2.c);
    const V s = hn::Add(u1.s, u2.s);
    const V length = hn::Sqrt(hn::Add(square(c), square(s)));
    // Nearly opposite hues go by what lies across their difference; see delta_e.cpp.
    const V across_c = hn::Sub(u1.s, u2.s);
    const V across_s = hn::Sub(u2.c, u1.c);
    const V chord = hn::Sqrt(hn::Add(square(across_c), square(across_s)));
    const auto half_turn = hn::Lt(length, constant(1e-6F));
    const auto half_turn_along =
        hn::Or(hn::Lt(across_c, zero), hn::And(hn::Eq(across_c, zero), hn::Gt(across_s, zero)));
    const auto sum_along = hn::Gt(hn::Add(hn::Mul(c, across_c), hn::Mul(s, across_s)), zero);
    const auto along =
        hn::Or(hn::And(half_turn, half_turn_along), hn::AndNot(half_turn, sum_along));
    const V scale = hn::Div(hn::IfThenElse(along, constant(1), constant(-1)), chord);
    const auto by_sum = hn::Gt(length, constant(1));
    Directions h = {hn::IfThenElse(by_sum, hn::Div(c, length), hn::Mul(scale, across_c)),
                    hn::IfThenElse(by_sum, hn::Div(s, length), hn::Mul(scale, across_s))};
    // Where one colour has no chroma the hue of the other serves.
    const auto no_1 = hn::Le(C1, constant(0));
    const auto no_2 = hn::Le(C2, constant(0));
    h.c = hn::IfThenElse(no_1, u2.c, hn::IfThenElse(no_2, u1.c, h.c));
    h.s = hn::IfThenElse(no_1, u2.s, hn::IfThenElse(no_2, u1.s, h.s));
    return h;
}

HWY_INLINE V weight_T(Directions h) {
    const V one = constant(1);
    const V two = constant(2);
    const V c2 = hn::Sub(hn::Mul(two, square(h.c)), one);
    const V s2 = hn::Mul(two, hn::Mul(h.s, h.c));
    const V c3 = hn::Sub(hn::Mul(c2, h.c), hn::Mul(s2, h.s));
    const V s3 = hn::Add(hn::Mul(s2, h.c), hn::Mul(c2, h.s));
    const V c4 = hn::Sub(hn::Mul(two, square(c2)), one);
    const V s4 = hn::Mul(two, hn::Mul(s2, c2));
    V T = one;
    T = hn::Sub(T, hn::Add(hn::Mul(constant(0.17F * 0.8660254F), h.c),
                           hn::Mul(constant(0.17F * 0.5F), h.s)));
    T = hn::Add(T, hn::Mul(constant(0.24F), c2));
    T = hn::Add(T, hn::Sub(hn::Mul(constant(0.32F * 0.9945219F), c3),
                           hn::Mul(constant(0.32F * 0.1045285F), s3)));
    return hn::Sub(T, hn::Add(hn::Mul(constant(0.20F * 0.4539905F), c4),
                              hn::Mul(constant(0.20F * 0.8910065F), s4)));
}

// exp(-(angle / 25 degrees)^2) of a direction's angle; taken as 0 past a quarter-turn, where it is
// below 3e-6.
HWY_INLINE V bell_25(Directions d) {
    const V one = constant(1);
    const auto near = hn::Gt(d.c, constant(0));
    const V half_c = hn::Sqrt(hn::Mul(constant(0.5F), hn::Add(one, hn::Max(d.c, constant(0)))));
    const V half_s = hn::Div(d.s, hn::Mul(constant(2), half_c));
    const V t = hn::Div(half_s, hn::Add(one, half_c));  // tangent of a quarter of the angle
    const V t2 = square(t);
    // 4 atan(t) as its Taylor series to t^13; |t| <= 0.4143 leaves less than 5e-7.
    V sum = constant(1.0F / 13);
    for (const float term : {1.0F / 11, 1.0F / 9, 1.0F / 7, 1.0F / 5, 1.0F / 3, 1.0F}) {
        sum = hn::Sub(constant(term), hn::Mul(t2, sum));
    }
    const V x = hn::Mul(hn::Mul(t, sum), constant(4 * 57.29578F / 25));
    // exp(-x^2) = (exp(-x^2 / 16))^16 with |x^2 / 16| < 0.82.
    const V y = hn::Mul(square(x), constant(-1.0F / 16));
    V e = constant(1);
    for (const float divisor :
         {1.0F / 9, 1.0F / 8, 1.0F / 7, 1.0F / 6, 1.0F / 5, 1.0F / 4, 1.0F / 3, 1.0F / 2, 1.0F}) {
        e = hn::Add(one, hn::Mul(hn::Mul(y, constant(divisor)), e));
    }
    for (int i = 0; i < 4; ++i) e = square(e);
    return hn::IfThenElse(near, e, constant(0));
}

HWY_INLINE V rotation_R_T(Directions h, V C_bar_p) {
    const V cos_275 = constant(0.08715574F);
    const V sin_85 = constant(0.9961947F);
    const Directions d = {hn::Sub(hn::Mul(cos_275, h.c), hn::Mul(sin_85, h.s)),
                          hn::Add(hn::Mul(cos_275, h.s), hn::Mul(sin_85, h.c))};
    // Nothing from 0 to 95 degrees; see delta_e.cpp.
    const auto none = hn::And(hn::Ge(h.s, constant(0)), hn::Gt(h.c, constant(-0.08715574F)));
    const V bell = hn::IfThenElse(none, constant(0), bell_25(d));
    const V angle = hn::Mul(constant(1.0471976F), bell);  // 2 * 30 degrees
    const V x2 = square(angle);
    // sin by its Taylor series to x^9; |x| <= 1.05 leaves less than 5e-8.
    V sine = constant(1);
    for (const float divisor : {1.0F / 72, 1.0F / 42, 1.0F / 20, 1.0F / 6}) {
        sine = hn::Sub(constant(1), hn::Mul(hn::Mul(x2, constant(divisor)), sine));
    }
    sine = hn::Mul(sine, angle);
    const V C7 = power_7(C_bar_p);
    const V R_C = hn::Mul(constant(2), hn::Sqrt(hn::Div(C7, hn::Add(C7, constant(6103515625.0F)))));
    return hn::Neg(hn::Mul(sine, R_C));
}

HWY_INLINE V delta_e_2000_vector(V L1, V a1, V b1, V L2, V a2, V b2) {
    const V one = constant(1);
    const V half = constant(0.5F);
    const V C1 = hn::Sqrt(hn::Add(square(a1), square(b1)));
    const V C2 = hn::Sqrt(hn::Add(square(a2), square(b2)));
    const V C_bar_7 = power_7(hn::Mul(half, hn::Add(C1, C2)));
    const V ratio = hn::Div(C_bar_7, hn::Add(C_bar_7, constant(6103515625.0F)));
    const V stretch = hn::Add(one, hn::Mul(half, hn::Sub(one, hn::Sqrt(ratio))));
    const V a1_p = hn::Mul(a1, stretch);
    const V a2_p = hn::Mul(a2, stretch);
    const V C1_p = hn::Sqrt(hn::Add(square(a1_p), square(b1)));
    const V C2_p = hn::Sqrt(hn::Add(square(a2_p), square(b2)));
    const Directions u1 = unit(a1_p, b1, C1_p);
    const Directions u2 = unit(a2_p, b2, C2_p);
    const Directions h_bar = mean_hue(u1, u2, C1_p, C2_p);
    const V chord = hn::Sqrt(hn::Add(square(hn::Sub(u1.c, u2.c)), square(hn::Sub(u1.s, u2.s))));
    const V turn = hn::Sub(hn::Mul(u1.c, u2.s), hn::Mul(u1.s, u2.c));
    const V dH_size = hn::Mul(hn::Sqrt(hn::Mul(C1_p, C2_p)), chord);
    const V dH = hn::IfThenElse(hn::Lt(turn, constant(0)), hn::Neg(dH_size), dH_size);

    const V L_bar_50 = square(hn::Sub(hn::Mul(half, hn::Add(L1, L2)), constant(50)));
    const V C_bar_p = hn::Mul(half, hn::Add(C1_p, C2_p));
    const V S_L = hn::Add(one, hn::Div(hn::Mul(constant(0.015F), L_bar_50),
                                       hn::Sqrt(hn::Add(constant(20), L_bar_50))));
    const V S_C = hn::Add(one, hn::Mul(constant(0.045F), C_bar_p));
    const V S_H = hn::Add(one, hn::Mul(hn::Mul(constant(0.015F), C_bar_p), weight_T(h_bar)));
    const V l = hn::Div(hn::Sub(L2, L1), S_L);
    const V c = hn::Div(hn::Sub(C2_p, C1_p), S_C);
    const V h = hn::Div(dH, S_H);
    const V rotation = hn::Mul(hn::Mul(rotation_R_T(h_bar, C_bar_p), c), h);
    const V sum = hn::Add(hn::Add(square(l), hn::Add(square(c), square(h))), rotation);
    return hn::Sqrt(hn::Max(constant(0), sum));
}

void DeltaE2000Batch(const LabelledColours& colours, const ReferenceColours& references,
                     float* out) {
    const D d;
    const hn::Rebind<std::uint16_t, D> d16;
    const hn::RebindToSigned<D> d32;
    const std::size_t lanes = hn::Lanes(d);
    std::size_t i = 0;
    for (; i + lanes <= colours.n; i += lanes) {
        const auto label = hn::PromoteTo(d32, hn::LoadU(d16, colours.label + i));
        const V difference = delta_e_2000_vector(
            hn::LoadU(d, colours.L + i), hn::LoadU(d, colours.a + i), hn::LoadU(d, colours.b + i),
            hn::GatherIndex(d, references.L, label), hn::GatherIndex(d, references.a, label),
            hn::GatherIndex(d, references.b, label));
        hn::StoreU(difference, d, out + i);
    }
    for (; i < colours.n; ++i) {
        const std::uint16_t k = colours.label[i];
        const V difference = delta_e_2000_vector(
            constant(colours.L[i]), constant(colours.a[i]), constant(colours.b[i]),
            constant(references.L[k]), constant(references.a[k]), constant(references.b[k]));
        out[i] = hn::GetLane(difference);
    }
}

}  // namespace HWY_NAMESPACE
}  // namespace tincture
HWY_AFTER_NAMESPACE();

#if HWY_ONCE
namespace tincture {
HWY_EXPORT(DeltaE2000Batch);

void delta_e_2000_batch(const LabelledColours& colours, const ReferenceColours& references,
                        float* out) {
    HWY_DYNAMIC_DISPATCH(DeltaE2000Batch)(colours, references, out);
}
}  // namespace tincture
#endif
