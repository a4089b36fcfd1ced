#include "evidence/peaks.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <cmath>

#include "tests/support/points.h"

namespace tincture {
namespace {

using test_support::Random;
using test_support::Rows;
using Place = std::array<double, 3>;

double distance(const Peak& peak, const Place& place) {
    return std::sqrt(std::pow(peak.L - place[0], 2) + std::pow(peak.a - place[1], 2) +
                     std::pow(peak.b - place[2], 2));
}

const std::vector<Place> places = {{20, 5, -30}, {50, 40, 10}, {70, -35, 25}, {92, 1, 3}};

// Points around each place, all within `spread` of it; the k-th has (k + 1) * 1000 in all.
WeightedPoints clouds_around(Random& random, double spread) {
    Rows rows;
    std::vector<double> weights;
    for (std::size_t k = 0; k < places.size(); ++k) {
        for (int i = 0; i < 100; ++i) {
            const double side = spread / std::sqrt(3.0);
            rows.push_back({places[k][0] + random.between(-side, side),
                            places[k][1] + random.between(-side, side),
                            places[k][2] + random.between(-side, side)});
            weights.push_back(10.0 * static_cast<double>(k + 1));
        }
    }
    return test_support::points_from(rows, weights);
}

TEST(Peaks, AreTheTightClouds) {
    Random random(91);
    for (const double radius : {2.0, 5.0}) {
        const WeightedPoints points = clouds_around(random, 0.45 * radius);
        std::vector<Peak> peaks = find_peaks(points, radius, 1, 64);
        ASSERT_EQ(peaks.size(), places.size());
        std::sort(peaks.begin(), peaks.end(),
                  [](const Peak& one, const Peak& two) { return one.weight < two.weight; });
        for (std::size_t k = 0; k < places.size(); ++k) {
            EXPECT_LT(distance(peaks[k], places[k]), 0.1 * radius);
            EXPECT_DOUBLE_EQ(peaks[k].weight, 1000.0 * static_cast<double>(k + 1));
            EXPECT_DOUBLE_EQ(peaks[k].prominence, 1);
        }
    }
}

TEST(Peaks, StandAtTheMeanOfTheirPoints) {
    const WeightedPoints points = test_support::points_from(
        {{50, 0, 0}, {51, 0, 0}, {50, 1, 0}, {50, 0, -1}, {90, 0, 0}}, {4, 3, 2, 1, 7});
    const std::vector<Peak> peaks = find_peaks(points, 2, 1, 64);
    ASSERT_EQ(peaks.size(), 2U);
    EXPECT_DOUBLE_EQ(peaks[0].L, 90);
    EXPECT_DOUBLE_EQ(peaks[1].L, 50.3);
    EXPECT_DOUBLE_EQ(peaks[1].a, 0.2);
    EXPECT_DOUBLE_EQ(peaks[1].b, -0.1);
    EXPECT_DOUBLE_EQ(peaks[1].weight, 10);
}

// A fade: colours that go on evenly, in all directions but one empty.
TEST(Peaks, AlongAnEvenLineStandOutByHalf) {
    Rows rows;
    for (int i = 0; i <= 2000; ++i) rows.push_back({10 + 0.04 * i, 0, 0});
    const std::vector<Peak> peaks =
        find_peaks(test_support::points_from(rows, std::vector<double>(rows.size(), 1)), 4, 1, 64);
    ASSERT_GE(peaks.size(), 8U);
    const auto inside = std::count_if(peaks.begin(), peaks.end(), [](const Peak& peak) {
        return peak.L > 18 && peak.L < 82 && peak.prominence > 0.45;
    });
    EXPECT_GE(inside, 3);
    for (const Peak& peak : peaks) {
        const bool at_an_end = peak.L <= 18 || peak.L >= 82;
        EXPECT_LT(peak.prominence, at_an_end ? 0.72 : 0.55) << peak.L;
    }
}

// A ball of even density has an eighth of twice its size.
TEST(Peaks, WithinAnEvenBodyHardlyStandOut) {
    Rows rows;
    for (int L = -12; L <= 12; ++L) {
        for (int a = -12; a <= 12; ++a) {
            for (int b = -12; b <= 12; ++b) rows.push_back({50.0 + L, 1.0 * a, 1.0 * b});
        }
    }
    std::vector<double> weights(rows.size(), 1);
    weights[rows.size() / 2] = 2;
    const std::vector<Peak> peaks = find_peaks(test_support::points_from(rows, weights), 5, 1, 1);
    ASSERT_EQ(peaks.size(), 1U);
    EXPECT_NEAR(peaks[0].prominence, 0.125, 0.01);
}

// A cloud with half of its weight again between one and two radii away.
TEST(Peaks, StandOutByThePartThatLiesWithin) {
    const WeightedPoints points = test_support::points_from(
        {{50, 0, 0}, {50, 6, 0}, {50, -6, 0}, {50, 0, 11}}, {100, 25, 25, 9});
    const std::vector<Peak> peaks = find_peaks(points, 5, 60, 64);
    ASSERT_EQ(peaks.size(), 1U);
    EXPECT_DOUBLE_EQ(peaks[0].weight, 100);
    EXPECT_DOUBLE_EQ(peaks[0].prominence, 100.0 / 150);
}

TEST(Peaks, LighterThanTheLeastAreLeftOut) {
    Random random(92);
    const WeightedPoints points = clouds_around(random, 1);
    for (const auto& [least, wanted] : std::vector<std::pair<double, std::size_t>>{
             {1000, 4}, {1001, 3}, {3000, 2}, {4000, 1}, {4001, 0}}) {
        EXPECT_EQ(find_peaks(points, 2, least, 64).size(), wanted) << least;
    }
}

TEST(Peaks, AreAtMostSoManyAndTheHeaviestFirst) {
    Rows rows;
    std::vector<double> weights;
    for (int i = 0; i < 30; ++i) {
        rows.push_back({3.0 * i, 0, 0});
        weights.push_back(i + 1);
    }
    const WeightedPoints points = test_support::points_from(rows, weights);
    EXPECT_EQ(find_peaks(points, 1, 0, 64).size(), 30U);
    const std::vector<Peak> peaks = find_peaks(points, 1, 0, 5);
    ASSERT_EQ(peaks.size(), 5U);
    for (std::size_t k = 0; k < 5; ++k) {
        EXPECT_DOUBLE_EQ(peaks[k].weight, 30 - static_cast<double>(k));
    }
    // Ten tries at most, of which the heaviest five are heavy enough.
    EXPECT_EQ(find_peaks(points, 1, 26, 5).size(), 5U);
    EXPECT_TRUE(find_peaks(points, 1, 26, 0).empty());
    EXPECT_TRUE(find_peaks(WeightedPoints{}, 1, 0, 5).empty());
}

TEST(Peaks, OfPointsInAnotherOrderAreTheSame) {
    Random random(93);
    const WeightedPoints points = clouds_around(random, 1);
    std::vector<Peak> one = find_peaks(points, 2, 1, 64);
    std::vector<Peak> two = find_peaks(test_support::shuffled(points, random), 2, 1, 64);
    ASSERT_EQ(one.size(), two.size());
    for (std::size_t k = 0; k < one.size(); ++k) {
        EXPECT_DOUBLE_EQ(one[k].weight, two[k].weight);
        EXPECT_NEAR(one[k].L, two[k].L, 1e-9);
    }
}

}  // namespace
}  // namespace tincture
