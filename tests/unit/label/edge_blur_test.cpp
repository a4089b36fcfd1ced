#include "label/edge_blur.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "label/label_map.h"
#include "support/parallel.h"
#include "tests/unit/label/drawn_scene.h"

namespace tincture {
namespace {

using test_support::DrawnScene;

EdgeBlur blur_of(const DrawnScene& drawn, double blur, double noise) {
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = drawn.picture(blur, noise);
    const ColourTable table = count_colours(picture, space);
    const Palette palette = drawn.palette();
    const Samples<std::uint8_t> labels = label_pixels(picture, table, space, palette);
    return measure_edge_blur(labels.data(), PixelLab(picture, table, space), mixed_of(palette));
}

// Upright edges at every part of a pixel.
DrawnScene upright_edges() {
    DrawnScene drawn(200, {{250, 240, 230}, {30, 40, 160}});
    for (int i = 0; i < 10; ++i) {
        drawn.box(1, 10 + 18 * i + i / 9.0, 20, 19.4 + 18 * i + i / 7.0, 180);
    }
    return drawn;
}

// A Gauss function over the coverage of a pixel, whose deviation is 12^(-1/2).
TEST(MeasureEdgeBlur, KnownBlur) {
    const DrawnScene drawn = upright_edges();
    for (const double blur : {0.6, 0.8, 1.0, 1.3}) {
        const double wanted = std::sqrt(blur * blur + 1.0 / 12);
        for (const double noise : {0.0, 3.0}) {
            const EdgeBlur found = blur_of(drawn, blur, noise);
            EXPECT_NEAR(found.lightness, wanted, 0.07) << blur << ' ' << noise;
            EXPECT_NEAR(found.colour, wanted, 0.07) << blur << ' ' << noise;
        }
    }
}

TEST(MeasureEdgeBlur, DrawnEdgesAreSharp) {
    for (const double noise : {0.0, 5.0}) {
        const EdgeBlur found = blur_of(upright_edges(), 0, noise);
        EXPECT_LT(found.lightness, 0.4);
        EXPECT_GT(found.lightness, 0.1);
        EXPECT_LT(found.colour, 0.4);
        EXPECT_GT(found.colour, 0.1);
    }
}

TEST(MeasureEdgeBlur, WithoutEdges) {
    const DrawnScene flat(40, {{250, 240, 230}, {30, 40, 160}});
    EXPECT_EQ(blur_of(flat, 0, 0).lightness, 0.3F);
    EXPECT_EQ(blur_of(flat, 0, 0).colour, 0.3F);
}

TEST(MeasureEdgeBlur, ThreadsHaveNoSay) {
    set_thread_count(1);
    const EdgeBlur wanted = blur_of(upright_edges(), 1, 3);
    set_thread_count(3);
    const EdgeBlur found = blur_of(upright_edges(), 1, 3);
    set_thread_count(0);
    EXPECT_EQ(found.lightness, wanted.lightness);
    EXPECT_EQ(found.colour, wanted.colour);
}

TEST(BlurKernel, SumAndVariance) {
    for (float deviation = 0; deviation < 2; deviation += 0.1F) {
        const BlurKernel kernel = blur_kernel(deviation);
        double sum = kernel[0];
        double variance = 0;
        for (std::size_t i = 1; i < kernel.size(); ++i) {
            EXPECT_GE(kernel[i], 0);
            EXPECT_LE(kernel[i], kernel[i - 1] + 1e-6F);
            sum += 2.0 * kernel[i];
            variance += 2.0 * kernel[i] * static_cast<double>(i * i);
        }
        EXPECT_NEAR(sum, 1, 1e-6);
        const double wide = 1.1 * deviation;
        const double wanted = std::clamp(wide * wide - 1.0 / 12, 0.0, 6 * 0.32);
        EXPECT_NEAR(variance, wanted, 1e-5) << deviation;
    }
}

}  // namespace
}  // namespace tincture
