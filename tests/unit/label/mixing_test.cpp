#include "label/mixing.h"

#include <gtest/gtest.h>

#include <cmath>

#include "colour/colour_space.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

// The values of sRGB that a colour was made from, by its own formulas: luma and differences of the
// encoded values, weights of ITU-R BT.601.
TEST(Mixed, IsThatOfTheEncodedValues) {
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    test_support::Random random(21);
    double largest = 0;
    for (int i = 0; i < 20000; ++i) {
        const Rgb8 rgb{static_cast<std::uint8_t>(random.below(256)),
                       static_cast<std::uint8_t>(random.below(256)),
                       static_cast<std::uint8_t>(random.below(256))};
        const Lab lab = srgb.lab_of(rgb);
        const Mixed mixed = mixed_of(static_cast<float>(lab.L), static_cast<float>(lab.a),
                                     static_cast<float>(lab.b));
        const double luma = 0.299 * rgb.r + 0.587 * rgb.g + 0.114 * rgb.b;
        largest = std::max({largest, std::abs(mixed.y - luma),
                            std::abs(mixed.u - 0.7 * 0.564 * (rgb.b - luma)),
                            std::abs(mixed.v - 0.7 * 0.713 * (rgb.r - luma))});
    }
    // Profiles are rounded to 16 bits; colours at the border of the space are cut off.
    EXPECT_LT(largest, 1.0);
    EXPECT_GT(largest, 0.001);
}

TEST(Mixed, MixturesLieInTheMiddle) {
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    test_support::Random random(22);
    for (int i = 0; i < 2000; ++i) {
        const auto value = [&] { return static_cast<std::uint8_t>(2 * random.below(128)); };
        const Rgb8 one{value(), value(), value()};
        const Rgb8 two{value(), value(), value()};
        const auto middle = [](std::uint8_t a, std::uint8_t b) {
            return static_cast<std::uint8_t>((a + b) / 2);
        };
        const auto mixed = [&](Rgb8 rgb) {
            const Lab lab = srgb.lab_of(rgb);
            return mixed_of(static_cast<float>(lab.L), static_cast<float>(lab.a),
                            static_cast<float>(lab.b));
        };
        const Mixed m = mixed({middle(one.r, two.r), middle(one.g, two.g), middle(one.b, two.b)});
        const Mixed a = mixed(one);
        const Mixed b = mixed(two);
        EXPECT_NEAR(m.y, (a.y + b.y) / 2, 1);
        EXPECT_NEAR(m.u, (a.u + b.u) / 2, 1);
        EXPECT_NEAR(m.v, (a.v + b.v) / 2, 1);
    }
}

// Colours beyond sRGB, and what stands for no colour, give finite values.
TEST(Mixed, AnyLab) {
    for (const float L : {-512.0F, 0.0F, 50.0F, 130.0F}) {
        for (const float a : {-511.0F, 0.0F, 511.0F}) {
            const Mixed mixed = mixed_of(L, a, -a);
            EXPECT_TRUE(std::isfinite(dot(mixed, mixed)));
            EXPECT_LT(std::abs(mixed.y), 300);
        }
    }
}

}  // namespace
}  // namespace tincture
