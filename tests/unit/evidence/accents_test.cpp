#include "evidence/accents.h"

#include <gtest/gtest.h>

#include <algorithm>

#include "tests/support/points.h"

namespace tincture {
namespace {

using test_support::Random;
using test_support::Rows;

// Greens and browns of a landscape, 100,000 in all, and a small thing of another colour.
WeightedPoints landscape(const Rows& things, double weight_each) {
    Random random(71);
    Rows rows;
    std::vector<double> weights;
    for (int i = 0; i < 2000; ++i) {
        rows.push_back({random.between(35, 65), random.between(-20, 0), random.between(5, 25)});
        weights.push_back(50);
    }
    for (const auto& thing : things) {
        for (int i = 0; i < 10; ++i) {
            rows.push_back({thing[0] + random.between(-1, 1), thing[1] + random.between(-1, 1),
                            thing[2] + random.between(-1, 1)});
            weights.push_back(weight_each / 10);
        }
    }
    return test_support::points_from(rows, weights);
}

const Rows red = {{45, 65, 40}};

TEST(Accents, AreSmallAndStandApart) {
    for (const bool certain : {false, true}) {
        const std::vector<Peak> accents = find_accents(landscape(red, 300), 0, certain);
        ASSERT_EQ(accents.size(), 1U);
        EXPECT_NEAR(accents[0].L, 45, 1);
        EXPECT_NEAR(accents[0].a, 65, 1);
        EXPECT_NEAR(accents[0].b, 40, 1);
        EXPECT_TRUE(find_accents(landscape({}, 0), 0, certain).empty());
        EXPECT_TRUE(find_accents(landscape(red, 3000), 0, certain).empty());  // an area
        EXPECT_TRUE(find_accents(landscape(red, 30), 0, certain).empty());    // next to nothing
        EXPECT_TRUE(find_accents(landscape({{50, -10, 16}}, 300), 0, certain).empty());
    }
}

TEST(Accents, AreAtMostThree) {
    const Rows things = {{45, 65, 40}, {30, 60, -90}, {90, 0, 95}, {60, 90, -60}};
    EXPECT_EQ(find_accents(landscape(things, 300), 0, false).size(), 3U);
}

TEST(Accents, AreNotLookedForWhereAreasAreAskedFor) {
    Evidence evidence{landscape(red, 300), {}};
    evidence.facts.kind = "continuous tone";
    EXPECT_TRUE(accents_of(evidence, Emphasis::area).empty());
    EXPECT_EQ(accents_of(evidence, Emphasis::accent).size(), 1U);
    EXPECT_EQ(accents_of(evidence, Emphasis::automatic).size(), 1U);
    evidence.facts.kind = "flat art";
    EXPECT_EQ(accents_of(evidence, Emphasis::accent).size(), 1U);
    EXPECT_TRUE(accents_of(evidence, Emphasis::automatic).empty());
}

TEST(Emphasised, BringsAnAccentToItsShareAndLeavesTheOthers) {
    const WeightedPoints points = landscape(red, 300);
    const WeightedPoints more = emphasised(points, find_accents(points, 0, false));
    ASSERT_EQ(more.n, points.n);
    EXPECT_EQ(more.x, points.x);
    double sum = 0;
    double accent = 0;
    for (std::size_t i = 0; i < points.n; ++i) {
        sum += more.weight[i];
        if (points.plane(1)[i] > 60) {
            accent += more.weight[i];
        } else {
            EXPECT_EQ(more.weight[i], points.weight[i]);
        }
    }
    EXPECT_DOUBLE_EQ(sum, more.total_weight);
    EXPECT_NEAR(accent, accent_share * points.total_weight, 0.02 * accent);
    EXPECT_EQ(emphasised(points, {}).weight, points.weight);
}

}  // namespace
}  // namespace tincture
