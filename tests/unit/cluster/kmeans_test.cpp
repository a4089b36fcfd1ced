#include "cluster/kmeans.h"

#include <gtest/gtest.h>

#include <cmath>

#include "support/parallel.h"
#include "tests/support/points.h"

namespace tincture {
namespace {

using test_support::Clouds;
using test_support::Random;
using test_support::Rows;

constexpr LloydLimits to_the_end = {500, 1e-12};

// More than one block of points, so that partial sums are added up.
constexpr Clouds several_blocks = {.n = 40'000, .groups = 7, .spread = 20, .heaviest = 1000};

TEST(Objective, IsAPlainSum) {
    Random random(62);
    for (const int dims : {1, 3, 16}) {
        Clouds clouds = several_blocks;
        clouds.dims = dims;
        WeightedPoints points = test_support::cloud_points(random, clouds);
        points.inner_scatter = 1e8;
        const Centres centres = test_support::points_as_centres(points, 9, random);
        const double wanted = test_support::plain_objective(points, test_support::rows_of(centres));
        EXPECT_NEAR(objective(points, centres), wanted, 1e-6 * wanted);
        WeightedPoints without = points;
        without.inner_scatter = 0;
        EXPECT_DOUBLE_EQ(objective(points, centres), objective(without, centres) + 1e8);
    }
}

// The plain oracle cannot better what lloyd() ends with.
void expect_local_optimum(const WeightedPoints& points, const Centres& centres, double reached) {
    Rows rows = test_support::rows_of(centres);
    EXPECT_NEAR(reached, test_support::plain_objective(points, rows), 1e-6 * reached);
    const double further = test_support::plain_lloyd(points, rows, 1);
    EXPECT_LT(reached - further, 1e-5 * reached);
}

TEST(Lloyd, EndsInALocalOptimumAsThePlainOneDoes) {
    Random random(63);
    for (const int dims : {3, 16}) {
        for (int trial = 0; trial < 12; ++trial) {
            const WeightedPoints points = test_support::cloud_points(
                random, {.n = 3000, .dims = dims, .groups = 6, .spread = 40});
            const Centres start = test_support::points_as_centres(points, 2 + trial, random);
            const double before = objective(points, start);
            Centres fast = start;
            const double reached = lloyd(points, fast, 0, to_the_end);
            EXPECT_LT(reached, before);
            expect_local_optimum(points, fast, reached);

            Rows slow = test_support::rows_of(start);
            const double plain = test_support::plain_lloyd(points, slow, 500);
            // Both are local optima of the same valley, if not of the same point of it.
            EXPECT_NEAR(reached, plain, 0.05 * plain) << dims << " " << trial;
        }
    }
}

TEST(Lloyd, FindsWellSeparatedClustersAsThePlainOneDoes) {
    Random random(64);
    for (const int dims : {3, 16}) {
        for (int trial = 0; trial < 10; ++trial) {
            // One start in each of four clouds that are far apart.
            const Rows middles = {{-90, -90, -90}, {90, -90, 0}, {0, 90, 90}, {80, 80, -90}};
            Rows rows;
            std::vector<double> weights;
            for (std::size_t i = 0; i < 2000; ++i) {
                std::vector<double> row(static_cast<std::size_t>(dims), 0.0);
                std::copy(middles[i % 4].begin(), middles[i % 4].end(), row.begin());
                for (double& x : row) x += 8 * random.bell();
                rows.push_back(row);
                weights.push_back(static_cast<double>(1 + random.below(9)));
            }
            const WeightedPoints points = test_support::points_from(rows, weights);
            Centres fast{dims, 4, {}};
            for (std::size_t k = 0; k < 4; ++k) {
                for (int d = 0; d < dims; ++d) fast.x.push_back(points.plane(d)[k]);
            }
            Rows slow = test_support::rows_of(fast);
            const double reached = lloyd(points, fast, 0, to_the_end);
            const double plain = test_support::plain_lloyd(points, slow, 500);
            EXPECT_NEAR(reached, plain, 1e-6 * plain);
            for (std::size_t k = 0; k < 4; ++k) {
                for (std::size_t d = 0; d < static_cast<std::size_t>(dims); ++d) {
                    EXPECT_NEAR(static_cast<double>(fast.row(static_cast<int>(k))[d]), slow[k][d],
                                1e-3);
                }
            }
        }
    }
}

TEST(Lloyd, ReturnsTheObjectiveOfItsCentresAndNeverWorsens) {
    Random random(65);
    for (int passes = 0; passes < 12; ++passes) {
        WeightedPoints points = test_support::cloud_points(random, {.n = 700, .spread = 30});
        points.inner_scatter = 3.5;
        const Centres start = test_support::points_as_centres(points, 8, random);
        Centres centres = start;
        const double reached = lloyd(points, centres, 0, {passes, 1e-9});
        EXPECT_EQ(reached, objective(points, centres));
        EXPECT_LE(reached, objective(points, start));
        EXPECT_EQ(centres.x == start.x, passes == 0);
    }
}

TEST(Lloyd, OnePassGoesToTheMeans) {
    Random random(66);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 900, .spread = 30});
    Centres centres = test_support::points_as_centres(points, 6, random);
    Rows slow = test_support::rows_of(centres);
    lloyd(points, centres, 0, {1, 0});
    test_support::plain_lloyd(points, slow, 1);
    for (std::size_t k = 0; k < 6; ++k) {
        for (std::size_t d = 0; d < 3; ++d) {
            EXPECT_FLOAT_EQ(centres.row(static_cast<int>(k))[d], static_cast<float>(slow[k][d]));
        }
    }
}

TEST(Lloyd, FixedCentresStay) {
    Random random(67);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 2000, .spread = 30});
    for (const int fixed : {1, 3, 6}) {
        Centres centres = test_support::points_as_centres(points, 6, random);
        centres.row(0)[0] = 500;  // one that nothing is near
        const Centres start = centres;
        const double reached = lloyd(points, centres, fixed, to_the_end);
        EXPECT_TRUE(std::equal(start.x.begin(), start.x.begin() + 3L * fixed, centres.x.begin()));
        EXPECT_EQ(reached, objective(points, centres));
        EXPECT_EQ(centres.x == start.x, fixed == 6);
    }
}

TEST(Lloyd, FillsEmptyClusters) {
    Random random(68);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 500, .spread = 20});
    for (const int count : {2, 9, 40}) {
        Centres centres{3, count, std::vector<float>(3 * static_cast<std::size_t>(count), 7.0F)};
        centres.row(1)[2] = -4000;
        const double before = objective(points, centres);
        const double reached = lloyd(points, centres, 0, to_the_end);
        EXPECT_LT(reached, before);
        Partition partition(points, count);
        partition.assign(points, centres);
        for (int k = 0; k < count; ++k) EXPECT_FALSE(partition.empty(k));
    }
}

// From whatever partition: the centres of the last result moved a little, or none at all.
TEST(Lloyd, APartitionToStartFromHasNoSay) {
    Random random(70);
    const WeightedPoints points = test_support::cloud_points(random, several_blocks);
    for (int trial = 0; trial < 4; ++trial) {
        Centres centres = test_support::points_as_centres(points, 12, random);
        Partition partition(points, 12);
        partition.assign(points, test_support::points_as_centres(points, 12, random));
        Centres same = centres;
        EXPECT_EQ(lloyd(points, centres, 0, {6, 1e-6}, partition),
                  lloyd(points, same, 0, {6, 1e-6}));
        EXPECT_EQ(centres.x, same.x);
        Partition fresh(points, 12);
        fresh.assign(points, centres);
        EXPECT_EQ(partition.objective(), fresh.objective());
        for (int k = 0; k < 12; ++k) EXPECT_EQ(partition.weight(k), fresh.weight(k));
    }
}

TEST(Lloyd, MoreCentresThanPoints) {
    const WeightedPoints points =
        test_support::points_from({{1, 2, 3}, {4, 5, 6}, {1, 2, 3}}, {1, 2, 3});
    Centres centres{3, 5, std::vector<float>(15, 0.0F)};
    EXPECT_EQ(lloyd(points, centres, 0, to_the_end), 0);
    for (const float x : centres.x) EXPECT_TRUE(std::isfinite(x));
}

TEST(Lloyd, ThreadsHaveNoSay) {
    Random random(69);
    const WeightedPoints points = test_support::cloud_points(random, several_blocks);
    const Centres start = test_support::points_as_centres(points, 15, random);
    set_thread_count(1);
    Centres wanted = start;
    const double reached = lloyd(points, wanted, 0, {40, 1e-7});
    for (const int threads : {2, 3, 7}) {
        set_thread_count(threads);
        Centres centres = start;
        EXPECT_EQ(lloyd(points, centres, 0, {40, 1e-7}), reached);
        EXPECT_EQ(centres.x, wanted.x);
    }
    set_thread_count(0);
}

}  // namespace
}  // namespace tincture
