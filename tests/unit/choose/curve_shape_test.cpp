#include "choose/curve_shape.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "support/maths.h"
#include "tests/support/published.h"

namespace tincture {
namespace {

std::size_t largest_at(const std::vector<double>& values) {
    return static_cast<std::size_t>(std::max_element(values.begin(), values.end()) -
                                    values.begin());
}

void expect_near(const std::vector<double>& found, const std::vector<double>& wanted,
                 double bound) {
    ASSERT_EQ(found.size(), wanted.size());
    for (std::size_t i = 0; i < found.size(); ++i) EXPECT_NEAR(found[i], wanted[i], bound) << i;
}

// The best known within-cluster sums of squares of iris, k = 1 to 10; see SOURCES.md.
struct IrisCurve {
    std::vector<double> k, W, ln_W;
};
IrisCurve iris_curve() {
    const test_support::PublishedTable table = test_support::read_published("kmeans_reference.csv");
    IrisCurve curve;
    for (std::size_t i = 0; i < table.rows.size(); ++i) {
        if (table.text(i, "weights") != "unit") continue;
        curve.k.push_back(table.number(i, "k"));
        curve.W.push_back(table.number(i, "wss_R"));
        curve.ln_W.push_back(natural_log(curve.W.back()));
    }
    return curve;
}

// Common practice, no source.
TEST(SecondDifferences, AreLargestWhereTheCurveBends) {
    const std::vector<double> y = {2.5, 2, 1.3, 1.1};
    const std::vector<double> bend = second_differences(y);
    expect_near(bend, {-0.2, 0.5}, 1e-12);
    EXPECT_EQ(y[largest_at(bend) + 1], 1.3);
}

// Computed outside with numpy 1.24.2 from the same sums of squares.
TEST(SecondDifferences, OfIris) {
    const IrisCurve curve = iris_curve();
    ASSERT_EQ(curve.W.size(), 10U);
    expect_near(
        second_differences(curve.W),
        {455.526138, 51.873542, 10.840677, 3.376096, 2.664437, 0.432472, 2.106434, 0.250814}, 1e-6);
    expect_near(second_differences(curve.ln_W),
                {0.839338, 0.338087, 0.111757, 0.035049, 0.044215, -0.004772, 0.057972, 0.003451},
                1e-6);
}

TEST(SecondDifferences, OfTooFewPoints) {
    EXPECT_TRUE(second_differences({}).empty());
    EXPECT_TRUE(second_differences(std::vector<double>{1}).empty());
    EXPECT_TRUE(second_differences(std::vector<double>{2, 1}).empty());
}

// Computed outside with numpy 1.24.2.
TEST(BelowChord, OfIris) {
    const IrisCurve curve = iris_curve();
    const std::vector<double> on_W = below_chord(curve.k, curve.W);
    expect_near(
        on_W,
        {0, 0.695896, 0.696901, 0.618775, 0.524112, 0.424299, 0.320422, 0.215884, 0.108133, 0},
        1e-6);
    EXPECT_EQ(curve.k[largest_at(on_W)], 3);
    const std::vector<double> on_ln_W = below_chord(curve.k, curve.ln_W);
    expect_near(
        on_ln_W,
        {0, 0.346637, 0.436784, 0.423617, 0.376299, 0.318271, 0.246731, 0.176649, 0.088852, 0},
        1e-6);
    EXPECT_EQ(curve.k[largest_at(on_ln_W)], 3);
}

// Satopaa, Albrecht, Irwin, Raghavan 2011, figure 2: the knee of y = 5 - 1 / (x + 0.1), which
// rises, lies at x = 0.22. Turned over it falls as an error does.
TEST(BelowChord, TheExampleOfThePaper) {
    std::vector<double> x, y;
    for (int i = 0; i < 10; ++i) {
        x.push_back(i / 9.0);
        y.push_back(-(5 - 1 / (x.back() + 0.1)));
    }
    const std::vector<double> below = below_chord(x, y);
    expect_near(
        below,
        {0, 0.467836, 0.536398, 0.512821, 0.453515, 0.376648, 0.289855, 0.196906, 0.099875, 0},
        1e-6);
    EXPECT_NEAR(x[largest_at(below)], 0.2222, 1e-4);
}

// From a public implementation's package page, which gives x = 4; see SOURCES.md.
TEST(BelowChord, AnExampleOfTwelvePoints) {
    const std::vector<double> x = {1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12};
    const std::vector<double> y = {1,    1,    .894, .864, .859, .856,
                                   .852, .851, .849, .848, .847, .845};
    const std::vector<double> below = below_chord(x, y);
    expect_near(below,
                {0, -0.090909, 0.502053, 0.604692, 0.546041, 0.474487, 0.409384, 0.324927, 0.246921,
                 0.162463, 0.078006, 0},
                1e-6);
    EXPECT_EQ(x[largest_at(below)], 4);
}

TEST(BelowChord, WhereNothingVaries) {
    const std::vector<double> one = {3};
    const std::vector<double> two = {1, 2};
    const std::vector<double> flat = {5, 5, 5};
    EXPECT_TRUE(below_chord({}, {}).empty());
    EXPECT_EQ(below_chord(one, one), (std::vector<double>{0}));
    expect_near(below_chord(two, std::vector<double>{9, 4}), {0, 0}, 1e-15);
    EXPECT_EQ(below_chord(std::vector<double>{1, 2, 3}, flat), (std::vector<double>{0, 0, 0}));
    EXPECT_EQ(below_chord(flat, std::vector<double>{3, 2, 1}), (std::vector<double>{0, 0, 0}));
}

TEST(BelowChord, ScaleAndShiftHaveNoSay) {
    const IrisCurve curve = iris_curve();
    std::vector<double> x, y;
    for (std::size_t i = 0; i < curve.k.size(); ++i) {
        x.push_back(7 * curve.k[i] - 100);
        y.push_back(1e-3 * curve.W[i] + 40);
    }
    expect_near(below_chord(x, y), below_chord(curve.k, curve.W), 1e-9);
}

}  // namespace
}  // namespace tincture
