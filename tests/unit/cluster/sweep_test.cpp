#include "cluster/sweep.h"

#include <gtest/gtest.h>

#include <stdexcept>

#include "cluster/kmeans.h"
#include "tests/support/points.h"
#include "tests/support/published.h"

namespace tincture {
namespace {

using test_support::Random;
using test_support::Rows;

SweepOptions up_to(int count) {
    SweepOptions options;
    options.max_count = count;
    return options;
}

// Fisher's iris; `mod5` weighs row i (from 0) by 1 + i mod 5.
WeightedPoints iris(const std::string& weighting) {
    const test_support::PublishedTable table = test_support::read_published("iris.csv");
    Rows rows;
    std::vector<double> weights;
    for (std::size_t i = 0; i < table.rows.size(); ++i) {
        std::vector<double> row;
        for (const std::string& column : table.columns) row.push_back(table.number(i, column));
        rows.push_back(row);
        weights.push_back(weighting == "unit" ? 1.0 : static_cast<double>(1 + i % 5));
    }
    return test_support::points_from(rows, weights);
}

// The best known sums of squares; see SOURCES.md.
TEST(Sweep, ComesNearTheBestKnownOnIris) {
    const test_support::PublishedTable table = test_support::read_published("kmeans_reference.csv");
    ASSERT_GE(table.rows.size(), 16U);
    for (const std::string weighting : {"unit", "mod5"}) {
        const Sweep sweep = sweep_counts(iris(weighting), up_to(10));
        ASSERT_EQ(sweep.objective.size(), 10U);
        for (std::size_t i = 0; i < table.rows.size(); ++i) {
            if (table.text(i, "weights") != weighting) continue;
            const auto k = static_cast<std::size_t>(table.number(i, "k"));
            const double best = table.number(i, "wss_R");
            EXPECT_LE(sweep.objective[k - 1], best * 1.005) << weighting << " " << k;
            EXPECT_GE(sweep.objective[k - 1], best * (1 - 1e-6)) << weighting << " " << k;
        }
    }
}

// Counts rise by one, objectives are those of the centres and never rise.
void expect_sound(const Sweep& sweep, const WeightedPoints& points, int first) {
    ASSERT_FALSE(sweep.centres.empty());
    ASSERT_EQ(sweep.centres.size(), sweep.objective.size());
    for (std::size_t i = 0; i < sweep.centres.size(); ++i) {
        const Centres& centres = sweep.centres[i];
        EXPECT_EQ(centres.count, first + static_cast<int>(i));
        EXPECT_EQ(centres.dims, points.dims);
        ASSERT_EQ(centres.x.size(), static_cast<std::size_t>(centres.count * centres.dims));
        EXPECT_EQ(sweep.objective[i], objective(points, centres));
        if (i > 0) {
            EXPECT_LE(sweep.objective[i], sweep.objective[i - 1]);
        }
    }
}

TEST(Sweep, EndsAtTheNumberOfPointsWithoutError) {
    Random random(81);
    for (const std::size_t n : {1U, 2U, 3U, 17U, 60U}) {
        WeightedPoints points = test_support::cloud_points(random, {.n = n, .spread = 30});
        const Sweep sweep = sweep_counts(points, up_to(80));
        expect_sound(sweep, points, 1);
        EXPECT_EQ(sweep.centres.size(), n);
        EXPECT_EQ(sweep.objective.back(), 0);
        points.inner_scatter = 12.25;
        EXPECT_EQ(sweep_counts(points, up_to(80)).objective.back(), 12.25);
    }
}

TEST(Sweep, ManyPointsOfFewColours) {
    Random random(82);
    const WeightedPoints colours = test_support::cloud_points(random, {.n = 12, .spread = 40});
    Rows rows;
    for (std::size_t i = 0; i < 9000; ++i) {
        rows.push_back({});
        for (int d = 0; d < 3; ++d)
            rows.back().push_back(static_cast<double>(colours.plane(d)[i % 12]));
    }
    const WeightedPoints points =
        test_support::points_from(rows, std::vector<double>(rows.size(), 2.0));
    const Sweep sweep = sweep_counts(points, up_to(25));
    expect_sound(sweep, points, 1);
    EXPECT_EQ(sweep.centres.size(), 12U);
    EXPECT_EQ(sweep.objective.back(), 0);
}

TEST(Sweep, AllPointsEqual) {
    const WeightedPoints points =
        test_support::points_from(Rows(6000, {50.25, -3, 0.1}), std::vector<double>(6000, 3.0));
    const Sweep sweep = sweep_counts(points, up_to(25));
    ASSERT_EQ(sweep.centres.size(), 1U);
    EXPECT_EQ(sweep.objective.front(), 0);
    EXPECT_EQ(sweep.centres.front().x, (std::vector<float>{50.25F, -3, 0.1F}));
}

TEST(Sweep, TwoPoints) {
    const WeightedPoints points = test_support::points_from({{0, 0, 0}, {100, 0, 0}}, {1, 3});
    const Sweep sweep = sweep_counts(points, up_to(25));
    ASSERT_EQ(sweep.centres.size(), 2U);
    EXPECT_EQ(sweep.centres[0].x, (std::vector<float>{75, 0, 0}));
    EXPECT_NEAR(sweep.objective[0], 3 * 25 * 25 + 75 * 75, 1e-9);
    EXPECT_EQ(sweep.objective[1], 0);
    EXPECT_EQ(sweep_counts(points, up_to(1)).centres.size(), 1U);
}

TEST(Sweep, NoPoints) {
    EXPECT_THROW((void)sweep_counts(WeightedPoints{}, up_to(5)), std::invalid_argument);
}

TEST(Sweep, ReachesTheExtraCount) {
    Random random(83);
    for (const std::size_t n : {300U, 9000U}) {
        const WeightedPoints points = test_support::cloud_points(random, {.n = n, .spread = 30});
        SweepOptions options = up_to(12);
        options.extra_count = 100;
        const Sweep sweep = sweep_counts(points, options);
        ASSERT_EQ(sweep.centres.size(), 13U);
        EXPECT_EQ(sweep.centres.back().count, 100);
        EXPECT_EQ(sweep.centres[11].count, 12);
        EXPECT_LT(sweep.objective.back(), sweep.objective[11]);
        EXPECT_EQ(sweep.objective.back(), objective(points, sweep.centres.back()));
    }
    // There are fewer points than asked for, within the sweep or beyond it.
    for (const std::size_t n : {7U, 40U}) {
        SweepOptions options = up_to(12);
        options.extra_count = 100;
        const WeightedPoints points = test_support::cloud_points(random, {.n = n, .spread = 30});
        const Sweep sweep = sweep_counts(points, options);
        EXPECT_EQ(sweep.centres.back().count, static_cast<int>(n));
        EXPECT_EQ(sweep.objective.back(), 0);
        EXPECT_EQ(sweep.centres.size(), n == 7 ? 7U : 13U);
    }
}

TEST(Sweep, ReportsItsProgress) {
    Random random(84);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 8000, .spread = 30});
    SweepOptions options = up_to(10);
    double last = 0;
    options.progress = [&](double part) {
        EXPECT_GE(part, last);
        EXPECT_LE(part, 1);
        last = part;
    };
    (void)sweep_counts(points, options);
    EXPECT_EQ(last, 1);
}

Centres kept_colours(int count) {
    // Far from any point, near some, and twice in the midst.
    const std::vector<float> x = {-500, 0, 0, 10, 10, 10, -40, 0, 60, 10.5F, 10, 10};
    return {3, count, {x.begin(), x.begin() + 3L * count}};
}

TEST(Sweep, KeptCentresStayAndComeFirst) {
    Random random(85);
    for (const std::size_t n : {5U, 40U, 7000U}) {
        const WeightedPoints points = test_support::cloud_points(random, {.n = n, .spread = 30});
        for (const int kept : {1, 2, 3, 4}) {
            SweepOptions options = up_to(15);
            options.kept = kept_colours(kept);
            const Sweep sweep = sweep_counts(points, options);
            EXPECT_EQ(sweep.kept, kept);
            expect_sound(sweep, points, kept);
            for (const Centres& centres : sweep.centres) {
                EXPECT_TRUE(
                    std::equal(options.kept.x.begin(), options.kept.x.end(), centres.x.begin()));
            }
            if (n > 100) {
                EXPECT_EQ(sweep.centres.back().count, 15);
            }
        }
    }
}

// Colours that are none of the points' leave room for every point of its own.
TEST(Sweep, KeptCentresDoNotTakeAPointsPlace) {
    Random random(86);
    for (const std::size_t n : {1U, 2U, 6U}) {
        const WeightedPoints points = test_support::cloud_points(random, {.n = n, .spread = 30});
        SweepOptions options = up_to(25);
        options.kept = kept_colours(3);
        const Sweep sweep = sweep_counts(points, options);
        EXPECT_EQ(sweep.centres.back().count, static_cast<int>(n) + 3);
        EXPECT_EQ(sweep.objective.back(), 0);
        expect_sound(sweep, points, 3);
    }
    // One that is a point's own takes it.
    const WeightedPoints points =
        test_support::points_from({{10, 10, 10}, {90, 0, 0}, {30, 50, 0}}, {1, 1, 1});
    SweepOptions options = up_to(25);
    options.kept = {3, 1, {10, 10, 10}};
    EXPECT_EQ(sweep_counts(points, options).centres.back().count, 3);
    EXPECT_EQ(sweep_counts(points, options).objective.back(), 0);
}

TEST(Sweep, MoreKeptThanCountsAsked) {
    Random random(87);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 100, .spread = 30});
    SweepOptions options = up_to(2);
    options.kept = kept_colours(4);
    const Sweep sweep = sweep_counts(points, options);
    ASSERT_EQ(sweep.centres.size(), 1U);
    EXPECT_EQ(sweep.centres.front().x, options.kept.x);
    EXPECT_EQ(sweep.objective.front(), objective(points, options.kept));
}

}  // namespace
}  // namespace tincture
