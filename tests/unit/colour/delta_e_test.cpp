#include "colour/delta_e.h"

#include <gtest/gtest.h>

#include <cmath>
#include <functional>

#include "tests/support/ciede2000_textbook.h"
#include "tests/support/published.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::ciede2000_textbook;
using test_support::hue_gaps;
using test_support::HueGaps;
using test_support::Random;

struct PublishedPair {
    Lab one, two;
    double published, exact;
};

// Table 1 of Sharma, Wu, Dalal 2005.
std::vector<PublishedPair> published_pairs() {
    const test_support::PublishedTable table =
        test_support::read_published("ciede2000_sharma2005.csv");
    std::vector<PublishedPair> pairs;
    for (std::size_t i = 0; i < table.rows.size(); ++i) {
        pairs.push_back({{table.number(i, "L1"), table.number(i, "a1"), table.number(i, "b1")},
                         {table.number(i, "L2"), table.number(i, "a2"), table.number(i, "b2")},
                         table.number(i, "dE00_published"),
                         table.number(i, "dE00_exact")});
    }
    return pairs;
}

TEST(DeltaE2000, PublishedPairs) {
    const std::vector<PublishedPair> pairs = published_pairs();
    ASSERT_EQ(pairs.size(), 34U);
    for (std::size_t i = 0; i < pairs.size(); ++i) {
        const PublishedPair& pair = pairs[i];
        SCOPED_TRACE(i + 1);
        EXPECT_NEAR(delta_e_2000(pair.one, pair.two), pair.published, 1e-4);
        EXPECT_NEAR(delta_e_2000(pair.one, pair.two), pair.exact, delta_e_2000_error);
        EXPECT_EQ(delta_e_2000(pair.one, pair.two), delta_e_2000(pair.two, pair.one));
        // The slow oracle of the other tests stands on the same numbers.
        EXPECT_NEAR(static_cast<double>(ciede2000_textbook(pair.one, pair.two)), pair.exact, 1e-10);
    }
}

struct LabPair {
    Lab one, two;
};

// The largest error against the textbook over `n` pairs, and whether each pair is symmetric.
// Pairs where the formula jumps are left out.
double largest_error(int n, const std::function<LabPair()>& make) {
    double largest = 0;
    int left_out = 0;
    for (int i = 0; i < n; ++i) {
        const auto [one, two] = make();
        const double found = delta_e_2000(one, two);
        EXPECT_EQ(found, delta_e_2000(two, one));
        EXPECT_GE(found, 0);
        const HueGaps gaps = hue_gaps(one, two);
        if (gaps.from_half_turn < 2e-9L || gaps.mean_from_zero < 1e-14L) {
            ++left_out;
            continue;
        }
        const double error = static_cast<double>(
            std::abs(ciede2000_textbook(one, two) - static_cast<long double>(found)));
        largest = std::max(largest, error);
    }
    EXPECT_LT(left_out, n / 2);
    return largest;
}

Lab random_lab(Random& random, double chroma) {
    return {random.between(0, 100), random.between(-chroma, chroma),
            random.between(-chroma, chroma)};
}

Lab polar(double L, double C, double h) {
    return {L, C * std::cos(h), C * std::sin(h)};
}

TEST(DeltaE2000, IsTheTextbooksEverywhere) {
    Random random(2000);
    const auto check = [](const char* what, const std::function<LabPair()>& make) {
        SCOPED_TRACE(what);
        EXPECT_LE(largest_error(40'000, make), delta_e_2000_error);
    };
    check("anywhere", [&] { return LabPair{random_lab(random, 128), random_lab(random, 128)}; });
    check("out of range", [&] {
        const auto far = [&] { return random.between(-200, 200); };
        return LabPair{{far(), far(), far()}, {far(), far(), far()}};
    });
    check("near neutral", [&] {
        return LabPair{random_lab(random, 128), random_lab(random, 0.01)};
    });
    check("one neutral", [&] { return LabPair{random_lab(random, 128), random_lab(random, 0)}; });
    check("blue", [&] {
        const double h = 4.8 + random.between(-0.6, 0.6);
        return LabPair{polar(50, random.between(0, 128), h),
                       polar(52, random.between(0, 128), h + random.between(-0.1, 0.1))};
    });
    check("mean hue near zero", [&] {
        const double h = random.between(0, 3);
        return LabPair{polar(50, 90, h),
                       polar(50, random.between(1, 128), -h + 1e-5 * random.bell())};
    });
    check("nearly opposite", [&] {
        const double h = random.between(0, 6.283);
        const double off = std::pow(10.0, random.between(-8, 0));
        // Equal chroma, so that hues in a' stay as far apart as those in a.
        return LabPair{polar(50, 60, h), polar(60, 60, h + 3.14159265358979 + off)};
    });
}

TEST(DeltaE2000, IsSymmetricWhereHuesAreOpposite) {
    // Both hues just above, both just below the red-green axis.
    for (const double b : {0.0, 1e-9, -1e-9, 1e-300, -1e-300}) {
        const Lab one = {50, 10, b};
        const Lab two = {50, -10, b};
        EXPECT_EQ(delta_e_2000(one, two), delta_e_2000(two, one)) << b;
    }
}

TEST(DeltaE2000, IsZeroOnlyForEqualColours) {
    const Lab colour = {40, 3, -80};
    EXPECT_EQ(delta_e_2000(colour, colour), 0);
    EXPECT_EQ(delta_e_2000({0, 0, 0}, {0, 0, 0}), 0);
    EXPECT_GT(delta_e_2000(colour, {40.0001, 3, -80}), 0);
    // Lightness alone: dL / S_L with S_L = 1 at L = 50.
    EXPECT_NEAR(delta_e_2000({49, 0, 0}, {51, 0, 0}), 2, 1e-12);
}

TEST(DeltaE76, IsTheDistance) {
    EXPECT_EQ(delta_e_76({10, 1, 2}, {12, 4, 8}), 7);
    EXPECT_EQ(delta_e_76({10, 1, 2}, {10, 1, 2}), 0);
}

}  // namespace
}  // namespace tincture
