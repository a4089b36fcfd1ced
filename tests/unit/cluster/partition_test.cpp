#include "cluster/partition.h"

#include <gtest/gtest.h>

#include "support/parallel.h"
#include "tests/support/points.h"

namespace tincture {
namespace {

using test_support::Clouds;
using test_support::Random;

// More than one block of points, so that partial sums are added up.
constexpr Clouds several_blocks = {.n = 40'000, .groups = 7, .spread = 20, .heaviest = 1000};

// What the plain loop finds for each cluster.
struct PlainSums {
    std::vector<double> weight;
    std::vector<std::vector<double>> moment;
    double objective = 0;
};

PlainSums plain_sums(const WeightedPoints& points, const Centres& centres) {
    const auto count = static_cast<std::size_t>(centres.count);
    const auto dims = static_cast<std::size_t>(points.dims);
    PlainSums sums{std::vector<double>(count, 0.0),
                   std::vector<std::vector<double>>(count, std::vector<double>(dims, 0.0)), 0};
    for (std::size_t i = 0; i < points.n; ++i) {
        const auto [k, squared] = test_support::plain_nearest(points, i, centres);
        sums.weight[k] += points.weight[i];
        sums.objective += points.weight[i] * static_cast<double>(squared);
        for (std::size_t d = 0; d < dims; ++d) {
            sums.moment[k][d] +=
                points.weight[i] * static_cast<double>(points.plane(static_cast<int>(d))[i]);
        }
    }
    return sums;
}

// Weights and moments are exact, the objective is not.
void expect_sums(const Partition& partition, const WeightedPoints& points, const Centres& centres) {
    const PlainSums wanted = plain_sums(points, centres);
    for (int k = 0; k < centres.count; ++k) {
        const auto at = static_cast<std::size_t>(k);
        EXPECT_EQ(partition.empty(k), wanted.weight[at] <= 0);
        EXPECT_EQ(partition.weight(k), wanted.weight[at]);
        for (int d = 0; d < points.dims; ++d) {
            EXPECT_EQ(partition.moment(k, d), wanted.moment[at][static_cast<std::size_t>(d)]);
        }
    }
    EXPECT_NEAR(partition.objective(), wanted.objective, 1e-12 * wanted.objective);
}

TEST(Partition, IsThatOfAPlainLoop) {
    Random random(61);
    for (const int dims : {1, 3, 16}) {
        Clouds clouds = several_blocks;
        clouds.dims = dims;
        const WeightedPoints points = test_support::cloud_points(random, clouds);
        const Centres centres = test_support::points_as_centres(points, 11, random);
        for (const int threads : {1, 2, 3, 7}) {
            set_thread_count(threads);
            Partition partition(points, 11);
            partition.assign(points, centres);
            expect_sums(partition, points, centres);
        }
        set_thread_count(0);
    }
}

TEST(Partition, IsTheSameAfterAnyOther) {
    Random random(62);
    for (const std::size_t n : {1U, 7U, 16U, 4001U, 40'000U}) {
        Clouds clouds = several_blocks;
        clouds.n = n;
        const WeightedPoints points = test_support::cloud_points(random, clouds);
        Partition partition(points, 6);
        for (int step = 0; step < 5; ++step) {
            Centres centres = test_support::points_as_centres(
                points, std::min<int>(6, static_cast<int>(n)), random);
            while (centres.count < 6) {  // fewer points than clusters: some stay empty
                centres.x.insert(centres.x.end(), {1e6F, 1e6F, 1e6F});
                ++centres.count;
            }
            if (step == 3) centres.row(2)[0] = 5e5F;
            partition.assign(points, centres);
            expect_sums(partition, points, centres);
        }
    }
}

TEST(Partition, ClustersComeAndGo) {
    Random random(63);
    const WeightedPoints points = test_support::cloud_points(random, several_blocks);
    const Centres seven = test_support::points_as_centres(points, 7, random);
    Partition partition(points, 7);
    partition.assign(points, seven);

    Centres eight = seven;
    eight.x.insert(eight.x.end(), {3, -4, 5});
    ++eight.count;
    partition.append();
    EXPECT_TRUE(partition.empty(7));
    partition.assign(points, eight);
    expect_sums(partition, points, eight);

    for (const int gone : {2, 6, 0}) {  // in the middle, the last, the first
        const double moved = partition.weight(eight.count - 1);
        partition.drop(gone);
        if (gone < eight.count - 1) {
            EXPECT_EQ(partition.weight(gone), moved);
        }
        const float* last = eight.row(eight.count - 1);
        std::copy(last, last + 3, eight.row(gone));
        eight.x.resize(eight.x.size() - 3);
        --eight.count;
        partition.assign(points, eight);
        expect_sums(partition, points, eight);
    }
}

// Weights that are no sums of powers of two leave something behind when they are taken out again.
TEST(Partition, AnEmptiedClusterIsEmpty) {
    Random random(64);
    WeightedPoints points = test_support::cloud_points(random, {.n = 300, .spread = 9});
    for (double& weight : points.weight) weight /= 3;
    Centres centres = test_support::points_as_centres(points, 3, random);
    Partition partition(points, 3);
    partition.assign(points, centres);
    ASSERT_FALSE(partition.empty(1));
    for (int d = 0; d < 3; ++d) centres.row(1)[d] = 1e6F;
    partition.assign(points, centres);
    EXPECT_TRUE(partition.empty(1));
    EXPECT_EQ(partition.weight(1), 0);
    EXPECT_EQ(partition.moment(1, 0), 0);
}

}  // namespace
}  // namespace tincture
