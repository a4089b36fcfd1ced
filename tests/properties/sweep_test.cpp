// What must hold of any sweep, whatever the picture.
#include "cluster/sweep.h"

#include <gtest/gtest.h>

#include <cmath>

#include "cluster/kmeans.h"
#include "colour/colour_space.h"
#include "support/parallel.h"
#include "tests/support/pictures.h"
#include "tests/support/points.h"

namespace tincture {
namespace {

using test_support::Random;

Sweep sweep_to(const WeightedPoints& points, int count) {
    SweepOptions options;
    options.max_count = count;
    return sweep_counts(points, options);
}

WeightedPoints photograph_points(Random& random, test_support::Size size) {
    return points_of(count_colours(test_support::photograph_like(random, 8, size),
                                   ColourSpace::standard(ColourModel::rgb)));
}

// Few points that are searched as they are, many that are searched in cells, a picture's, other
// dimensions, hardly any spread.
std::vector<WeightedPoints> all_sorts(Random& random) {
    return {test_support::cloud_points(random, {.n = 200, .spread = 25}),
            test_support::cloud_points(random, {.n = 12'000, .groups = 9, .spread = 15}),
            photograph_points(random, {200, 150}),
            test_support::cloud_points(random, {.n = 1500, .dims = 1, .spread = 20}),
            test_support::cloud_points(random, {.n = 1500, .dims = 16, .spread = 20}),
            test_support::cloud_points(random, {.n = 3000, .groups = 3, .spread = 0.01})};
}

WeightedPoints times(WeightedPoints points, double factor) {
    for (double& weight : points.weight) weight *= factor;
    points.total_weight *= factor;
    points.inner_scatter *= factor;
    return points;
}

void expect_same_bits(const Sweep& one, const Sweep& two) {
    ASSERT_EQ(one.centres.size(), two.centres.size());
    for (std::size_t i = 0; i < one.centres.size(); ++i) {
        EXPECT_EQ(one.centres[i].x, two.centres[i].x) << one.centres[i].count;
    }
    EXPECT_EQ(one.objective, two.objective);
}

TEST(SweepProperties, TheObjectiveNeverRises) {
    Random random(91);
    for (int trial = 0; trial < 3; ++trial) {
        for (const WeightedPoints& points : all_sorts(random)) {
            const Sweep sweep = sweep_to(points, 25);
            ASSERT_EQ(sweep.objective.size(), 25U);
            for (std::size_t i = 1; i < sweep.objective.size(); ++i) {
                EXPECT_LE(sweep.objective[i], sweep.objective[i - 1]);
            }
            for (std::size_t i = 0; i < sweep.objective.size(); ++i) {
                EXPECT_EQ(sweep.objective[i], objective(points, sweep.centres[i]));
            }
        }
    }
}

TEST(SweepProperties, DoublingEveryWeightChangesNothing) {
    Random random(92);
    for (const WeightedPoints& points : all_sorts(random)) {
        const Sweep once = sweep_to(points, 16);
        const Sweep twice = sweep_to(times(points, 2), 16);
        ASSERT_EQ(once.centres.size(), twice.centres.size());
        for (std::size_t i = 0; i < once.centres.size(); ++i) {
            EXPECT_EQ(once.centres[i].x, twice.centres[i].x);
            EXPECT_EQ(2 * once.objective[i], twice.objective[i]);
        }
    }
}

TEST(SweepProperties, HugeAndTinyWeights) {
    Random random(93);
    const WeightedPoints points = test_support::cloud_points(random, {.n = 6000, .spread = 20});
    const Sweep plain = sweep_to(points, 12);
    for (const double factor : {1e8, 1e-9, 0x1p40, 0x1p-60}) {
        const Sweep scaled = sweep_to(times(points, factor), 12);
        ASSERT_EQ(scaled.centres.size(), plain.centres.size());
        for (std::size_t i = 0; i < plain.objective.size(); ++i) {
            EXPECT_NEAR(scaled.objective[i] / factor, plain.objective[i],
                        1e-9 * plain.objective[i]);
        }
    }
    // One pixel beside a hundred million.
    WeightedPoints uneven = points;
    for (std::size_t i = 0; i < uneven.n; i += 2) uneven.weight[i] = 1e8;
    const Sweep sweep = sweep_to(uneven, 12);
    for (std::size_t i = 1; i < sweep.objective.size(); ++i) {
        EXPECT_LE(sweep.objective[i], sweep.objective[i - 1]);
    }
}

TEST(SweepProperties, TheOrderOfPointsHasNoSay) {
    Random random(94);
    for (const WeightedPoints& points : all_sorts(random)) {
        const Sweep one = sweep_to(points, 16);
        const Sweep two = sweep_to(test_support::shuffled(points, random), 16);
        ASSERT_EQ(one.objective.size(), two.objective.size());
        for (std::size_t i = 0; i < one.objective.size(); ++i) {
            EXPECT_NEAR(one.objective[i], two.objective[i], 1e-9 * one.objective[i]) << i;
        }
    }
}

// Of a picture not even the last bit changes.
TEST(SweepProperties, TheOrderOfPixelsHasNoSay) {
    Random random(95);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = test_support::photograph_like(random, 8, {160, 120});
    const Picture mixed = test_support::shuffled_pixels(picture, random);
    expect_same_bits(sweep_to(points_of(count_colours(picture, space)), 12),
                     sweep_to(points_of(count_colours(mixed, space)), 12));
}

TEST(SweepProperties, ThreadsHaveNoSay) {
    Random random(96);
    for (const WeightedPoints& points :
         {photograph_points(random, {300, 200}),
          test_support::cloud_points(random, {.n = 900, .dims = 7})}) {
        set_thread_count(1);
        const Sweep wanted = sweep_to(points, 25);
        for (const int threads : {2, 3, 7}) {
            set_thread_count(threads);
            expect_same_bits(sweep_to(points, 25), wanted);
        }
        set_thread_count(0);
    }
}

// Colours found on one half of the pixels serve the other half better, too, the more there are
// (common practice, no source).
TEST(SweepProperties, TheErrorOfHeldOutPixelsFalls) {
    Random random(97);
    for (int trial = 0; trial < 4; ++trial) {
        const Picture picture = test_support::shuffled_pixels(
            test_support::photograph_like(random, 8, {240, 180}), random);
        std::array<std::vector<std::uint16_t>, 2> halves;
        for (std::size_t i = 0; i < picture.samples8.size(); ++i) {
            halves[i * 2 / picture.samples8.size()].push_back(picture.samples8[i]);
        }
        std::array<WeightedPoints, 2> points;
        for (std::size_t h = 0; h < 2; ++h) {
            const Picture half = test_support::picture_of(ColourModel::rgb, 8, 240, 90, halves[h]);
            points[h] = points_of(count_colours(half, ColourSpace::standard(ColourModel::rgb)));
        }
        const Sweep sweep = sweep_to(points[0], 24);
        for (std::size_t i = 2; i < sweep.centres.size(); ++i) {
            EXPECT_LT(objective(points[1], sweep.centres[i]),
                      objective(points[1], sweep.centres[i - 1]))
                << sweep.centres[i].count;
        }
    }
}

TEST(SweepProperties, UpToTheLargestPalette) {
    Random random(98);
    for (const WeightedPoints& points :
         {test_support::cloud_points(random, {.n = 300, .spread = 30}),
          test_support::cloud_points(random, {.n = 9000, .spread = 30})}) {
        const Sweep sweep = sweep_to(points, 257);
        ASSERT_EQ(sweep.centres.size(), 257U);
        EXPECT_EQ(sweep.centres.back().count, 257);
        for (std::size_t i = 1; i < sweep.objective.size(); ++i) {
            EXPECT_LE(sweep.objective[i], sweep.objective[i - 1]) << i;
        }
    }
}

// Against the plain textbook form from ten random starts.
TEST(SweepProperties, IsAsGoodAsManyRandomStarts) {
    Random random(99);
    const WeightedPoints points = photograph_points(random, {120, 90});
    const Sweep sweep = sweep_to(points, 12);
    for (const int count : {2, 4, 8, 12}) {
        double best = 1e300;
        for (int start = 0; start < 10; ++start) {
            test_support::Rows rows =
                test_support::rows_of(test_support::points_as_centres(points, count, random));
            best = std::min(best, test_support::plain_lloyd(points, rows, 60));
        }
        EXPECT_LE(sweep.objective[static_cast<std::size_t>(count - 1)], 1.005 * best) << count;
    }
}

}  // namespace
}  // namespace tincture
