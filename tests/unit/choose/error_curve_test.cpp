#include "choose/error_curve.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "colour/delta_e.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;

// By its definition: the smallest value whose weight, with all below it, reaches the share.
float sorted_quantile(const std::vector<float>& values, const std::vector<std::uint64_t>& weights,
                      double share) {
    std::vector<std::pair<float, std::uint64_t>> sorted;
    std::uint64_t total = 0;
    for (std::size_t i = 0; i < values.size(); ++i) {
        sorted.emplace_back(values[i], weights[i]);
        total += weights[i];
    }
    std::sort(sorted.begin(), sorted.end());
    std::uint64_t below = 0;
    for (const auto& [value, weight] : sorted) {
        below += weight;
        if (weight > 0 && static_cast<double>(below) >= share * static_cast<double>(total)) {
            return value;
        }
    }
    return 0;
}

TEST(WeightedQuantile, IsThatOfSortedValues) {
    Random random(1);
    for (int trial = 0; trial < 300; ++trial) {
        const std::size_t n = 1 + random.below(trial % 10 == 0 ? 3000 : 40);
        std::vector<float> values(n);
        std::vector<std::uint64_t> weights(n);
        for (std::size_t i = 0; i < n; ++i) {
            switch (random.below(4)) {
                case 0:
                    values[i] = static_cast<float>(random.below(4));  // ties and zeros
                    break;
                case 1:
                    values[i] = 3.0F + static_cast<float>(random.unit()) * 1e-5F;  // one bin
                    break;
                case 2:
                    values[i] = static_cast<float>(std::pow(10.0, random.between(-40, 30)));
                    break;
                default:
                    values[i] = static_cast<float>(random.between(0, 100));
            }
            weights[i] =
                random.below(3) == 0 ? 0 : 1 + random.below(trial % 2 == 0 ? 5 : 1'000'000);
        }
        weights[random.below(n)] += 1;
        for (const double share : {1e-6, 0.01, 0.5, 0.95, 0.999, 1.0}) {
            EXPECT_EQ(weighted_quantile(values, weights, share),
                      sorted_quantile(values, weights, share))
                << trial << " " << share;
        }
    }
}

TEST(WeightedQuantile, SmallCases) {
    const std::vector<std::uint64_t> twenty = {19, 1};
    EXPECT_EQ(weighted_quantile(std::vector<float>{1, 2}, twenty, 0.95), 1);
    EXPECT_EQ(weighted_quantile(std::vector<float>{2, 1}, twenty, 0.95), 2);
    EXPECT_EQ(weighted_quantile(std::vector<float>{7}, std::vector<std::uint64_t>{5}, 0.95), 7);
    EXPECT_EQ(weighted_quantile({}, {}, 0.95), 0);
    EXPECT_EQ(weighted_quantile(std::vector<float>{7}, std::vector<std::uint64_t>{0}, 0.95), 0);
    // A weight that no float holds.
    const std::vector<std::uint64_t> huge = {std::uint64_t{95} << 40, std::uint64_t{5} << 40};
    EXPECT_EQ(weighted_quantile(std::vector<float>{1, 2}, huge, 0.95), 1);
}

TEST(ClosestPair, IsTheSmallestOfAll) {
    Random random(2);
    EXPECT_FALSE(closest_pair({}));
    EXPECT_FALSE(closest_pair(std::vector<Lab>{{1, 2, 3}}));
    for (std::size_t n = 2; n < 30; ++n) {
        std::vector<Lab> colours(n);
        for (Lab& lab : colours) {
            lab = {random.between(0, 100), random.between(-90, 90), random.between(-90, 90)};
        }
        double least = 1e9;
        for (const Lab& one : colours) {
            for (const Lab& two : colours) {
                if (&one != &two) least = std::min(least, delta_e_2000(one, two));
            }
        }
        EXPECT_EQ(closest_pair(colours), least);
        colours.push_back(colours.front());
        EXPECT_EQ(closest_pair(colours), 0);
    }
}

ColourTable small_table() {
    ColourTable table;
    table.key = {1, 2, 3};
    table.L = {50, 50, 10};
    table.a = {0, 3, 0};
    table.b = {0, 4, 0};
    table.count = {6, 3, 1};
    table.opaque_pixels = 10;
    return table;
}

TEST(MeasureCost, OfAFewColours) {
    const PaletteCost cost = measure_cost(small_table(), std::vector<Lab>{{50, 0, 0}, {10, 0, 0}});
    EXPECT_EQ(cost.pixels, (std::vector<std::uint64_t>{9, 1}));
    EXPECT_NEAR(cost.mse, 3 * 25 / 10.0, 1e-6);
    const double off = delta_e_2000({50, 3, 4}, {50, 0, 0});
    EXPECT_NEAR(cost.mean_de00, 0.3 * off, 1e-4);
    EXPECT_NEAR(cost.p95_de00, off, 1e-4);
    EXPECT_NEAR(cost.max_de00, off, 1e-4);
}

TEST(MeasureCost, OfEveryColourIsNothing) {
    const PaletteCost cost =
        measure_cost(small_table(), std::vector<Lab>{{50, 0, 0}, {10, 0, 0}, {50, 3, 4}});
    EXPECT_EQ(cost.mse, 0);
    EXPECT_EQ(cost.mean_de00, 0);
    EXPECT_EQ(cost.p95_de00, 0);
    EXPECT_EQ(cost.max_de00, 0);
    EXPECT_EQ(cost.pixels, (std::vector<std::uint64_t>{6, 1, 3}));
}

// Pixels are told apart by the labels that are given, and get new ones.
TEST(MeasureCost, TellsWhereTheLabelsOfAnotherPaletteWent) {
    const ColourTable table = small_table();
    const std::vector<Lab> more = {{10, 0, 0}, {50, 3, 4}, {50, 0, 0}};
    const std::vector<Lab> fewer = {{50, 0, 0}, {10, 0, 0}};
    TableLabels labels = nearest_of_table(table, more);
    EXPECT_EQ(labels, (TableLabels{2, 1, 0}));
    const PaletteCost cost = measure_cost(table, fewer, labels, 3);
    EXPECT_EQ(labels, (TableLabels{0, 0, 1}));
    ASSERT_EQ(cost.crossing.costs.size(), 6U);
    EXPECT_EQ(cost.crossing.at(0, 1).pixels, 1U);
    EXPECT_EQ(cost.crossing.at(1, 0).pixels, 3U);
    EXPECT_EQ(cost.crossing.at(2, 0).pixels, 6U);
    EXPECT_EQ(cost.crossing.at(1, 1).pixels, 0U);
    const double off = delta_e_2000({50, 3, 4}, {50, 0, 0});
    EXPECT_NEAR(cost.crossing.at(1, 0).de00, 3 * off, 1e-3);
    EXPECT_NEAR(cost.crossing.at(1, 0).worst, off, 1e-4);
    const std::vector<PixelCost> sums = cost.crossing.sums();
    EXPECT_EQ(sums[0].pixels, 9U);
    EXPECT_EQ(sums[1].pixels, 1U);
    const PaletteCost plain = measure_cost(table, fewer);
    EXPECT_EQ(plain.mse, cost.mse);
    EXPECT_EQ(plain.max_de00, cost.max_de00);
    EXPECT_EQ(plain.pixels, cost.pixels);
}

TEST(MeasureCost, AddsTheScatterOfCells) {
    ColourTable table = small_table();
    table.cell_de = 0.25;
    table.inner_scatter = 2.5;
    const std::vector<Lab> all = {{50, 0, 0}, {10, 0, 0}, {50, 3, 4}};
    EXPECT_DOUBLE_EQ(measure_cost(table, all).mse, 0.25);
}

// The first of equally near ones, as everywhere.
TEST(MeasureCost, TiesGoToTheFirst) {
    const std::vector<Lab> twice = {{40, 0, 0}, {60, 0, 0}, {40, 0, 0}};
    EXPECT_EQ(measure_cost(small_table(), twice).pixels, (std::vector<std::uint64_t>{10, 0, 0}));
}

}  // namespace
}  // namespace tincture
