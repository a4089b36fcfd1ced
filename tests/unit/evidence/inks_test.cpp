#include "evidence/inks.h"

#include <gtest/gtest.h>

#include <algorithm>

namespace tincture {
namespace {

constexpr double pixels = 1e6;
constexpr double radius = 2;

const Peak paper{92, 0, 4, 600'000, 1};
const Peak black{18, 2, -2, 300'000, 1};
const Peak red{50, 60, 40, 50'000, 1};

Peak between(const Peak& one, const Peak& two, double share, double weight, double prominence) {
    const auto mix = [share](double from, double to) { return from + share * (to - from); };
    return {mix(one.L, two.L), mix(one.a, two.a), mix(one.b, two.b), weight, prominence};
}

// The weight of a last peak beside paper and black.
double weight_of(const Peak& peak, double of_pixels = pixels, double found_with = radius) {
    const std::vector<double> weights = ink_weights({paper, black, peak}, of_pixels, found_with);
    EXPECT_EQ(weights.size(), 3U);
    EXPECT_EQ(weights[0], 1);
    EXPECT_EQ(weights[1], 1);
    return weights[2];
}

TEST(InkWeights, AreThePeaksThatStandOut) {
    EXPECT_EQ(ink_weights({paper, black, red}, pixels, radius), (std::vector<double>{1, 1, 1}));
    EXPECT_TRUE(ink_weights({}, pixels, radius).empty());
    EXPECT_EQ(ink_weights({red}, pixels, radius), (std::vector<double>{1}));
}

TEST(InkWeights, AreNoBlendsOfTwoHeavierOnes) {
    for (const double share : {0.1, 0.3, 0.5, 0.7, 0.9}) {
        EXPECT_EQ(weight_of(between(paper, black, share, 500, 1)), 0) << share;
        // A mix that covers a thousandth is there on purpose: a tint.
        EXPECT_EQ(weight_of(between(paper, black, share, 5000, 1)), 1) << share;
    }
    // Off the line, or beyond its ends, though as light.
    EXPECT_EQ(weight_of({50, 60, 40, 500, 1}), 1);
    EXPECT_EQ(weight_of(between(paper, black, 1.15, 500, 1)), 1);
    EXPECT_EQ(weight_of(between(paper, black, -0.1, 500, 1)), 1);
}

// A light peak between a heavy ink and one that is lighter than itself is no blend of them.
TEST(InkWeights, AreExplainedByHeavierOnesOnly) {
    const Peak spot{18, 2, -2, 300, 1};
    const Peak middle = between(paper, spot, 0.5, 500, 1);
    EXPECT_EQ(ink_weights({paper, spot, middle}, pixels, radius), (std::vector<double>{1, 1, 1}));
    const Peak heavier{18, 2, -2, 700, 1};
    EXPECT_EQ(ink_weights({paper, heavier, middle}, pixels, radius),
              (std::vector<double>{1, 1, 0}));
}

TEST(InkWeights, AreNotTiny) {
    EXPECT_EQ(weight_of({50, 60, 40, 201, 1}), 1);
    EXPECT_EQ(weight_of({50, 60, 40, 199, 1}), 0);
    EXPECT_EQ(weight_of({50, 60, 40, 201, 1}, 1.1 * pixels), 0);
}

TEST(InkWeights, WeighMoreTheMoreTheyStandOut) {
    double last = 0;
    for (const double prominence : {0.5, 0.55, 0.6, 0.65, 0.7, 0.75, 0.9}) {
        // Too light to be the ink of a stroke.
        const double weight = weight_of({50, 60, 40, 300, prominence});
        EXPECT_GE(weight, last);
        EXPECT_LE(weight, 1);
        last = weight;
    }
    EXPECT_EQ(weight_of({50, 60, 40, 300, 0.5}), 0);
    EXPECT_NEAR(weight_of({50, 60, 40, 300, 0.625}), 0.5, 1e-12);
    EXPECT_EQ(weight_of({50, 60, 40, 300, 0.75}), 1);
}

TEST(InkWeights, OfThinStrokesAreOffEveryLine) {
    EXPECT_EQ(weight_of({50, 60, 40, 5000, 0.4}), 1);
    EXPECT_EQ(weight_of({50, 60, 40, 350, 0.4}), 0);
    EXPECT_EQ(weight_of(between(paper, black, 0.5, 5000, 0.4)), 0);
    // Nor on one that is drawn out beyond its end.
    const std::vector<double> weights =
        ink_weights({paper, red, between(paper, red, 1.4, 5000, 0.4)}, pixels, radius);
    EXPECT_EQ(weights, (std::vector<double>{1, 1, 0}));
    EXPECT_EQ(ink_weights({paper, red, between(paper, red, 2.2, 5000, 0.4)}, pixels, radius)[2], 1);
}

// The skirt of an ink, within three radii of it, is none.
TEST(InkWeights, OfThinStrokesAreFarFromOthers) {
    const Peak near_red{50, 60, 47, 5000, 0.4};
    EXPECT_EQ(ink_weights({red, near_red}, pixels, 2.2)[1], 1);
    EXPECT_EQ(ink_weights({red, near_red}, pixels, 2.4)[1], 0);
    // What stands out is, however near.
    const Peak standing{50, 60, 47, 5000, 1};
    EXPECT_EQ(ink_weights({red, standing}, pixels, 2.4)[1], 1);
}

TEST(InkWeights, AreTheSameInAnyOrder) {
    std::vector<Peak> peaks = {red,   between(paper, black, 0.5, 500, 1),
                               paper, {40, -50, 20, 5000, 0.3},
                               black, between(paper, red, 0.4, 900, 0.3)};
    const std::vector<double> wanted = {1, 0, 1, 1, 1, 0};
    EXPECT_EQ(ink_weights(peaks, pixels, radius), wanted);
    std::reverse(peaks.begin(), peaks.end());
    std::vector<double> weights = ink_weights(peaks, pixels, radius);
    std::reverse(weights.begin(), weights.end());
    EXPECT_EQ(weights, wanted);
}

}  // namespace
}  // namespace tincture
