#include "cluster/split.h"

#include <gtest/gtest.h>

#include <cmath>
#include <numeric>

#include "tests/support/points.h"

namespace tincture {
namespace {

using test_support::Random;
using test_support::Rows;

std::vector<std::size_t> all_of(const WeightedPoints& points) {
    std::vector<std::size_t> index(points.n);
    std::iota(index.begin(), index.end(), std::size_t{0});
    return index;
}

TEST(SplitCluster, ItsGainIsWhatTwoCentresSave) {
    Random random(71);
    for (const int dims : {1, 3, 16}) {
        const WeightedPoints points =
            test_support::cloud_points(random, {.n = 400, .dims = dims, .groups = 4});
        const Split split = split_cluster(points, all_of(points).data(), points.n);
        Rows mean = {std::vector<double>(static_cast<std::size_t>(dims), 0.0)};
        const double one = test_support::plain_lloyd(points, mean, 2);
        const Rows halves = {{split.low.begin(), split.low.end()},
                             {split.high.begin(), split.high.end()}};
        const double two = test_support::plain_objective(points, halves);
        EXPECT_GT(split.gain, 0);
        // Each point goes to its nearer half here; the cut of the last round may be a little off.
        EXPECT_LE(two, one - split.gain + 1e-6 * one);
        EXPECT_NEAR(two, one - split.gain, 0.05 * one);
    }
}

TEST(SplitCluster, CutsAcrossTheLongestAxis) {
    Random random(72);
    Rows rows;
    for (int i = 0; i < 300; ++i) {
        const double along = 50 * random.bell();
        rows.push_back({along + random.bell(), along + random.bell(), random.bell()});
    }
    const WeightedPoints points = test_support::points_from(rows, std::vector<double>(300, 1.0));
    const Split split = split_cluster(points, all_of(points).data(), points.n);
    const float dx = split.high[0] - split.low[0];
    EXPECT_NEAR(dx, split.high[1] - split.low[1], 0.1F * std::abs(dx));
    EXPECT_NEAR(split.high[2], split.low[2], 0.1F * std::abs(dx));
}

TEST(SplitCluster, NothingToSplit) {
    const WeightedPoints points =
        test_support::points_from({{1, 2, 3}, {1, 2, 3}, {1, 2, 3}, {5, 2, 3}}, {1, 2, 3, 4});
    const std::vector<std::size_t> index = all_of(points);
    EXPECT_EQ(split_cluster(points, index.data(), 0).gain, 0);
    EXPECT_EQ(split_cluster(points, index.data(), 1).gain, 0);
    EXPECT_EQ(split_cluster(points, index.data(), 3).gain, 0);
    EXPECT_GT(split_cluster(points, index.data(), 4).gain, 0);
}

TEST(SplitCluster, NoPointsOfOnePlaceGainAnything) {
    Random random(73);
    for (int trial = 0; trial < 500; ++trial) {
        const std::vector<double> place = {random.between(0, 100), random.between(-90, 90),
                                           random.between(-90, 90)};
        const std::size_t n = 2 + random.below(6);
        std::vector<double> weights(n);
        for (double& weight : weights) weight = static_cast<double>(1 + random.below(1000));
        const WeightedPoints points = test_support::points_from(Rows(n, place), weights);
        EXPECT_EQ(split_cluster(points, all_of(points).data(), n).gain, 0);
    }
}

TEST(MembersOf, ListsEachPointOnce) {
    Random random(74);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 800, .dims = 5});
    const Centres centres = test_support::points_as_centres(points, 9, random);
    const Members members = members_of(points, centres);
    ASSERT_EQ(members.start.size(), 10U);
    EXPECT_EQ(members.start.front(), 0U);
    EXPECT_EQ(members.start.back(), points.n);
    std::vector<int> seen(points.n, 0);
    for (std::size_t k = 0; k < 9; ++k) {
        double scatter = 0;
        for (std::size_t m = members.start[k]; m < members.start[k + 1]; ++m) {
            ++seen[members.index[m]];
            const auto nearest = test_support::plain_nearest(points, members.index[m], centres);
            EXPECT_EQ(nearest.label, k);
            scatter += points.weight[members.index[m]] * static_cast<double>(nearest.squared);
        }
        EXPECT_NEAR(members.scatter[k], scatter, 1e-9 * scatter);
        // What the objective rises by without this centre.
        Rows others = test_support::rows_of(centres);
        const double with = test_support::plain_objective(points, others);
        others.erase(others.begin() + static_cast<std::ptrdiff_t>(k));
        const double without = test_support::plain_objective(points, others);
        EXPECT_NEAR(members.removal_cost[k], without - with, 1e-5 * without);
    }
    EXPECT_EQ(seen, std::vector<int>(points.n, 1));
}

}  // namespace
}  // namespace tincture
