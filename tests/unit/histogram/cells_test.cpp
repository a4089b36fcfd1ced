#include "histogram/cells.h"

#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <map>

#include "tests/support/points.h"

namespace tincture {
namespace {

using test_support::Clouds;
using test_support::Random;
using test_support::Rows;

struct PlainCell {
    double weight = 0;
    std::array<double, 3> moment{};
};

std::map<std::array<int, 3>, PlainCell> plain_cells(const WeightedPoints& points, double edge) {
    std::map<std::array<int, 3>, PlainCell> cells;
    for (std::size_t i = 0; i < points.n; ++i) {
        std::array<int, 3> at{};
        for (int d = 0; d < 3; ++d) {
            at[static_cast<std::size_t>(d)] =
                static_cast<int>(std::floor(static_cast<double>(points.plane(d)[i]) / edge));
        }
        PlainCell& cell = cells[at];
        cell.weight += points.weight[i];
        for (std::size_t d = 0; d < 3; ++d) {
            cell.moment[d] +=
                points.weight[i] * static_cast<double>(points.plane(static_cast<int>(d))[i]);
        }
    }
    return cells;
}

TEST(MergeIntoCells, KeepsWeightAndMoment) {
    Random random(31);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 6000, .spread = 8});
    for (const double edge : {0.5, 2.0, 4.0, 64.0, 1000.0}) {
        SCOPED_TRACE(edge);
        const WeightedPoints merged = merge_into_cells(points, edge);
        const auto wanted = plain_cells(points, edge);
        ASSERT_EQ(merged.n, wanted.size());
        EXPECT_EQ(merged.total_weight, points.total_weight);
        std::size_t i = 0;
        for (const auto& [at, cell] : wanted) {
            EXPECT_EQ(merged.weight[i], cell.weight);
            for (std::size_t d = 0; d < 3; ++d) {
                EXPECT_EQ(merged.x[d * merged.n + i],
                          static_cast<float>(cell.moment[d] / cell.weight));
            }
            ++i;
        }
    }
}

// About one centre, so that no point is nearer to another than its cell is.
TEST(MergeIntoCells, KeepsTheError) {
    // Cells stand at their mean in single precision, so that a little of the error is lost.
    constexpr double rounding = 5e-8;
    Random random(32);
    WeightedPoints points =
        test_support::cloud_points(random, {.n = 5000, .groups = 8, .spread = 12});
    points.inner_scatter = 1234.5;
    for (const double edge : {1.0, 3.0, 30.0, 1000.0}) {
        WeightedPoints merged = merge_into_cells(points, edge);
        for (int i = 0; i < 5; ++i) {
            const Rows centre = {
                {random.between(-100, 100), random.between(-100, 100), random.between(-100, 100)}};
            const double exact = test_support::plain_objective(points, centre);
            EXPECT_NEAR(test_support::plain_objective(merged, centre), exact, rounding * exact);
        }
        // Merged again it still is.
        merged = merge_into_cells(merged, 4 * edge);
        const Rows middle = {{0, 0, 0}};
        const double exact = test_support::plain_objective(points, middle);
        EXPECT_NEAR(test_support::plain_objective(merged, middle), exact, rounding * exact);
    }
}

TEST(MergeIntoCells, TheOrderOfPointsHasNoSay) {
    Random random(33);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 4000});
    const WeightedPoints merged = merge_into_cells(points, 3);
    const WeightedPoints again = merge_into_cells(test_support::shuffled(points, random), 3);
    EXPECT_EQ(again.x, merged.x);
    EXPECT_EQ(again.weight, merged.weight);
    EXPECT_NEAR(again.inner_scatter, merged.inner_scatter, 1e-12 * merged.inner_scatter);
}

TEST(MergeIntoCells, LeavesOtherDimensionsAlone) {
    Random random(34);
    for (const int dims : {1, 2, 4, 16}) {
        const WeightedPoints points =
            test_support::cloud_points(random, {.n = 50, .dims = dims, .spread = 1});
        const WeightedPoints merged = merge_into_cells(points, 50);
        EXPECT_EQ(merged.x, points.x);
        EXPECT_EQ(merged.weight, points.weight);
        EXPECT_EQ(merged.dims, dims);
    }
}

TEST(MergeIntoCells, FewPoints) {
    EXPECT_EQ(merge_into_cells(WeightedPoints{}, 2).n, 0U);
    const WeightedPoints one = test_support::points_from({{-3.5, 100, 0}}, {7});
    const WeightedPoints merged = merge_into_cells(one, 2);
    ASSERT_EQ(merged.n, 1U);
    EXPECT_EQ(merged.x, one.x);
    EXPECT_EQ(merged.inner_scatter, 0);
    const WeightedPoints equal =
        test_support::points_from({{0.1, 50, -7}, {0.1, 50, -7}, {0.1, 50, -7}}, {1, 2, 3});
    EXPECT_EQ(merge_into_cells(equal, 2).n, 1U);
    EXPECT_EQ(merge_into_cells(equal, 2).weight.front(), 6);
    EXPECT_EQ(merge_into_cells(equal, 2).inner_scatter, 0);
}

TEST(PointsOf, TakesOverTheTable) {
    ColourTable table;
    table.key = {1, 2};
    table.L = {10, 20};
    table.a = {1, 2};
    table.b = {-1, -2};
    table.count = {3, 4'000'000'000};
    table.opaque_pixels = 4'000'000'003;
    table.inner_scatter = 2.5;
    const WeightedPoints points = points_of(table);
    EXPECT_EQ(points.dims, 3);
    EXPECT_EQ(points.n, 2U);
    EXPECT_EQ(points.x, (std::vector<float>{10, 20, 1, 2, -1, -2}));
    EXPECT_EQ(points.weight, (std::vector<double>{3, 4e9}));
    EXPECT_EQ(points.total_weight, 4'000'000'003.0);
    EXPECT_EQ(points.inner_scatter, 2.5);
}

}  // namespace
}  // namespace tincture
