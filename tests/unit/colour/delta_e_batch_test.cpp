#include <gtest/gtest.h>

#include <cmath>
#include <functional>
#include <vector>

#include "colour/delta_e.h"
#include "tests/support/ciede2000_textbook.h"
#include "tests/support/published.h"
#include "tests/support/random.h"
#include "tests/support/targets.h"

namespace tincture {
namespace {

using test_support::hue_gaps;
using test_support::HueGaps;
using test_support::Random;

constexpr double pi = 3.14159265358979323846;

// Pairs side by side, as the batch takes them: colour i against reference i. At most 65,536.
struct Pairs {
    std::vector<float> L1, a1, b1, L2, a2, b2;

    // Lab of pictures comes in steps of 2^-14.
    void add(const Lab& one, const Lab& two) {
        const auto step = [](double x) {
            return static_cast<float>(std::nearbyint(x * 16384) / 16384);
        };
        L1.push_back(step(one.L));
        a1.push_back(step(one.a));
        b1.push_back(step(one.b));
        L2.push_back(step(two.L));
        a2.push_back(step(two.a));
        b2.push_back(step(two.b));
    }
    [[nodiscard]] Lab one(std::size_t i) const { return {L1[i], a1[i], b1[i]}; }
    [[nodiscard]] Lab two(std::size_t i) const { return {L2[i], a2[i], b2[i]}; }
};

std::vector<float> batch(const Pairs& pairs, std::size_t n) {
    std::vector<std::uint16_t> label(n);
    for (std::size_t i = 0; i < n; ++i) label[i] = static_cast<std::uint16_t>(i);
    std::vector<float> out(n + 1, -1.0F);
    delta_e_2000_batch({pairs.L1.data(), pairs.a1.data(), pairs.b1.data(), label.data(), n},
                       {pairs.L2.data(), pairs.a2.data(), pairs.b2.data()}, out.data());
    EXPECT_EQ(out[n], -1.0F) << "written past the end";
    out.pop_back();
    return out;
}

Lab polar(double L, double C, double h) {
    return {L, C * std::cos(h), C * std::sin(h)};
}

struct Kind {
    const char* name;
    std::function<void(Random&, Pairs&)> add;
    bool jumps = false;  // made to lie where the formula jumps
};

Lab anywhere(Random& random, double chroma) {
    return {random.between(0, 100), random.between(-chroma, chroma),
            random.between(-chroma, chroma)};
}

std::vector<Kind> kinds() {
    return {
        {"anywhere", [](Random& r, Pairs& p) { p.add(anywhere(r, 128), anywhere(r, 128)); }},
        {"look-alikes",
         [](Random& r, Pairs& p) {
             const Lab one = anywhere(r, 125);
             p.add(one, {one.L, one.a + r.between(-3, 3), one.b + r.between(-3, 3)});
         }},
        {"near neutral", [](Random& r, Pairs& p) { p.add(anywhere(r, 1), anywhere(r, 1)); }},
        {"one near neutral",
         [](Random& r, Pairs& p) { p.add(anywhere(r, 128), anywhere(r, 0.001)); }},
        {"blue",
         [](Random& r, Pairs& p) {
             const double h = (275 + r.between(-40, 40)) * pi / 180;
             p.add(polar(r.between(0, 100), r.between(0, 128), h),
                   polar(r.between(0, 100), r.between(0, 128), h + r.between(-0.2, 0.2)));
         }},
        {"nearly opposite",
         [](Random& r, Pairs& p) {
             const double h = r.between(0, 2 * pi);
             const double C = r.between(0, 128);
             const double off = std::pow(10.0, r.between(-7, 0)) * (r.below(2) == 0 ? 1 : -1);
             p.add(polar(r.between(0, 100), C, h), polar(r.between(0, 100), C, h + pi + off));
         },
         true},
        {"opposite",
         [](Random& r, Pairs& p) {
             const Lab one = anywhere(r, 128);
             p.add(one, {r.between(0, 100), -one.a, -one.b});
         }},
        {"mean hue near zero",
         [](Random& r, Pairs& p) {
             const double h = r.between(0, pi);
             p.add(polar(r.between(0, 100), r.between(0, 128), h),
                   polar(r.between(0, 100), r.between(0, 128), -h + 1e-4 * r.bell()));
         }},
    };
}

// The largest error against the scalar form; pairs where the formula jumps may differ.
double largest_error(const Pairs& pairs, std::size_t& jumped) {
    const std::vector<float> found = batch(pairs, pairs.L1.size());
    double largest = 0;
    for (std::size_t i = 0; i < found.size(); ++i) {
        const double wanted = delta_e_2000(pairs.one(i), pairs.two(i));
        const double error = std::abs(static_cast<double>(found[i]) - wanted);
        EXPECT_TRUE(std::isfinite(found[i]));
        if (error > delta_e_2000_batch_error) {
            const HueGaps gaps = hue_gaps(pairs.one(i), pairs.two(i));
            if (gaps.from_half_turn < 2e-6L || gaps.mean_from_zero < 2e-6L) {
                ++jumped;
                continue;
            }
        }
        largest = std::max(largest, error);
    }
    return largest;
}

TEST(DeltaE2000Batch, StaysWithinItsError) {
    Random random(1976);
    double largest = 0;
    for (const Kind& kind : kinds()) {
        SCOPED_TRACE(kind.name);
        std::size_t jumped = 0;
        std::size_t all = 0;
        for (int part = 0; part < 4; ++part) {
            Pairs pairs;
            for (int i = 0; i < 65'000; ++i) kind.add(random, pairs);
            all += pairs.L1.size();
            const double error = largest_error(pairs, jumped);
            EXPECT_LE(error, delta_e_2000_batch_error);
            largest = std::max(largest, error);
        }
        EXPECT_LE(jumped, kind.jumps ? all / 3 : all / 1000);
    }
    // A stated error that is far too large says nothing.
    EXPECT_GE(largest, delta_e_2000_batch_error / 20);
}

TEST(DeltaE2000Batch, PublishedPairs) {
    const test_support::PublishedTable table =
        test_support::read_published("ciede2000_sharma2005.csv");
    ASSERT_EQ(table.rows.size(), 34U);
    for (std::size_t i = 0; i < table.rows.size(); ++i) {
        const auto value = [&](const char* column) {
            return static_cast<float>(table.number(i, column));
        };
        const float L1 = value("L1"), a1 = value("a1"), b1 = value("b1");
        const float L2 = value("L2"), a2 = value("a2"), b2 = value("b2");
        const std::uint16_t label = 0;
        float found = 0;
        delta_e_2000_batch({&L1, &a1, &b1, &label, 1}, {&L2, &a2, &b2}, &found);
        EXPECT_NEAR(static_cast<double>(found), table.number(i, "dE00_published"), 1e-4) << i + 1;
        EXPECT_NEAR(static_cast<double>(found), table.number(i, "dE00_exact"),
                    delta_e_2000_batch_error)
            << i + 1;
    }
}

TEST(DeltaE2000Batch, SameBitsForEveryInstructionSet) {
    Random random(7);
    Pairs pairs;
    for (const Kind& kind : kinds()) {
        for (int i = 0; i < 8'000; ++i) kind.add(random, pairs);
    }
    pairs.add({50, 0, 0}, {50, 0, 0});
    const std::size_t all = pairs.L1.size();
    const std::vector<float> wanted = batch(pairs, all);
    const int sets = test_support::for_each_instruction_set([&](const std::string& name) {
        EXPECT_EQ(batch(pairs, all), wanted) << name;
        for (std::size_t n = 0; n < 40; ++n) {
            const std::vector<float> few = batch(pairs, n);
            EXPECT_TRUE(std::equal(few.begin(), few.end(), wanted.begin())) << name << " " << n;
        }
    });
    EXPECT_GE(sets, 2);
}

TEST(DeltaE2000Batch, GoesByTheLabel) {
    const std::vector<float> L = {50, 50, 50};
    const std::vector<float> zero = {0, 0, 0};
    const std::vector<float> reference_L = {51, 50, 10};
    const std::vector<std::uint16_t> label = {1, 0, 1};
    std::vector<float> out(3);
    delta_e_2000_batch({L.data(), zero.data(), zero.data(), label.data(), 3},
                       {reference_L.data(), zero.data(), zero.data()}, out.data());
    EXPECT_EQ(out[0], 0.0F);
    EXPECT_NEAR(out[1], 1, 1e-2);
    EXPECT_EQ(out[2], 0.0F);
}

}  // namespace
}  // namespace tincture
