#include "choose/count_loss.h"

#include <gtest/gtest.h>

#include <algorithm>

#include "choose/measure.h"
#include "cluster/sweep.h"
#include "colour/delta_e.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;

WrittenColours written(std::vector<Rgb8> colours) {
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    WrittenColours result{std::move(colours), {}};
    for (const Rgb8 colour : result.rgb) result.lab.push_back(srgb.lab_of(colour));
    return result;
}

constexpr Rgb8 white{255, 255, 255};
constexpr Rgb8 black{0, 0, 0};
constexpr Rgb8 red{200, 40, 40};
constexpr Rgb8 dull_red{150, 60, 50};
constexpr Rgb8 brown{120, 70, 50};
constexpr Rgb8 between{140, 64, 50};  // dull red and brown

// Pixels by row (the colour they had) and column (the colour they get); each is off by its place.
Crossing crossing_of(const std::vector<std::vector<std::uint64_t>>& pixels) {
    Crossing crossing{pixels.front().size(), {}};
    for (const auto& row : pixels) {
        for (const std::uint64_t n : row) {
            const auto worst = n > 0 ? static_cast<double>(crossing.costs.size()) : 0.0;
            crossing.costs.push_back({n, static_cast<double>(n) * worst, worst});
        }
    }
    return crossing;
}

TEST(LostColour, IsTheOneThatFindsNoPartner) {
    const LostColour lost =
        lost_colour(written({white, dull_red, brown}), written({white, between}),
                    crossing_of({{600, 0}, {0, 32}, {0, 368}}));
    EXPECT_EQ(lost.colour, 1U);
    EXPECT_EQ(lost.into, 1U);
    EXPECT_EQ(lost.into_pixels, 32U);
    EXPECT_EQ(lost.cost.pixels, 32U);
    EXPECT_EQ(lost.cost.worst, 3);
    EXPECT_EQ(lost.cost.de00, 96);
}

TEST(LostColour, GoesWhereMostOfItsPixelsGo) {
    const LostColour lost = lost_colour(written({white, red, black}), written({white, black}),
                                        crossing_of({{500, 0}, {30, 70}, {0, 400}}));
    EXPECT_EQ(lost.colour, 1U);
    EXPECT_EQ(lost.into, 1U);
    EXPECT_EQ(lost.into_pixels, 70U);
    EXPECT_EQ(lost.cost.pixels, 100U);
    EXPECT_EQ(lost.cost.de00, 30 * 2 + 70 * 3);
    EXPECT_EQ(lost.cost.worst, 3);
}

// Brown stays brown, though most of what is brown now was dull red.
TEST(LostColour, AColourThatStaysIsNotLost) {
    const LostColour lost = lost_colour(written({white, dull_red, brown}), written({brown, white}),
                                        crossing_of({{0, 600}, {300, 0}, {100, 0}}));
    EXPECT_EQ(lost.colour, 1U);
    EXPECT_EQ(lost.into, 0U);
}

// Colours that nobody has may be kept; they are partners of the nearest.
TEST(LostColour, WithoutPixels) {
    LostColour lost =
        lost_colour(written({white, dull_red, brown, black}), written({white, between, black}),
                    crossing_of({{9, 0, 0}, {0, 5, 0}, {0, 7, 0}, {0, 0, 0}}));
    EXPECT_EQ(lost.colour, 1U) << "black is in both";
    lost = lost_colour(written({white, brown, {1, 1, 1}, red}), written({white, {2, 2, 2}, brown}),
                       crossing_of({{9, 0, 0}, {0, 0, 5}, {0, 0, 0}, {0, 0, 0}}));
    EXPECT_EQ(lost.colour, 3U);
    EXPECT_EQ(lost.into, 2U) << "the nearest, as no pixel says where";
    EXPECT_EQ(lost.cost.pixels, 0U);
    EXPECT_EQ(lost.into_pixels, 0U);
}

TEST(LostColour, OfEqualOnesTheNearestStays) {
    const Crossing crossing = crossing_of({{10, 0}, {10, 0}, {0, 10}});
    EXPECT_EQ(
        lost_colour(written({white, red, black}), written({dull_red, {9, 9, 9}}), crossing).colour,
        0U);
    EXPECT_EQ(
        lost_colour(written({red, white, black}), written({dull_red, {9, 9, 9}}), crossing).colour,
        1U);
}

// Random colours in an exact table.
ColourTable random_table(Random& random, std::size_t n) {
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    ColourTable table;
    for (std::size_t i = 0; i < n; ++i) {
        const Lab lab = srgb.lab_of({static_cast<std::uint8_t>(random.below(256)),
                                     static_cast<std::uint8_t>(random.below(256)),
                                     static_cast<std::uint8_t>(random.below(256))});
        table.key.push_back(i);
        table.L.push_back(static_cast<float>(lab.L));
        table.a.push_back(static_cast<float>(lab.a));
        table.b.push_back(static_cast<float>(lab.b));
        table.count.push_back(1 + random.below(1000));
        table.opaque_pixels += table.count.back();
    }
    return table;
}

Lab lab_at(const ColourTable& table, std::size_t i) {
    return {table.L[i], table.a[i], table.b[i]};
}

std::size_t slow_nearest(const Lab& lab, const std::vector<Swatch>& swatches) {
    std::size_t best = 0;
    for (std::size_t k = 1; k < swatches.size(); ++k) {
        if (delta_e_76(lab, swatches[k].lab) < delta_e_76(lab, swatches[best].lab)) best = k;
    }
    return best;
}

// The plain way: every pair of places, the most shared pixels first.
std::size_t slow_lost(const Palette& more, const Palette& fewer,
                      std::vector<std::vector<std::uint64_t>> shared) {
    std::vector<bool> had(more.swatches.size());
    std::vector<bool> has(fewer.swatches.size());
    const auto take = [&](std::size_t i, std::size_t j) {
        if (!had[i] && !has[j]) had[i] = has[j] = true;
    };
    for (std::size_t i = 0; i < had.size(); ++i) {
        for (std::size_t j = 0; j < has.size(); ++j) {
            if (more.swatches[i].written == fewer.swatches[j].written) take(i, j);
        }
    }
    while (std::find(has.begin(), has.end(), false) != has.end()) {
        std::uint64_t most = 0;
        std::size_t best_i = 0;
        std::size_t best_j = 0;
        for (std::size_t i = 0; i < had.size(); ++i) {
            for (std::size_t j = 0; j < has.size(); ++j) {
                if (had[i] || has[j] || shared[i][j] <= most) continue;
                most = shared[i][j];
                best_i = i;
                best_j = j;
            }
        }
        if (most == 0) return had.size();  // not in these tests
        take(best_i, best_j);
    }
    return static_cast<std::size_t>(std::find(had.begin(), had.end(), false) - had.begin());
}

TEST(CountLoss, IsWhatThePlainWayFinds) {
    Random random(51);
    const ColourTable table = random_table(random, 5000);
    SweepOptions options;
    options.max_count = 9;
    options.extra_count = 12;
    Study study;
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    measure_curve(study, table, sweep_counts(points_of(table), options), srgb);
    ASSERT_EQ(study.curve.size(), 10U);
    EXPECT_FALSE(study.curve[8].loss) << "ten colours were not measured";
    EXPECT_FALSE(study.curve[9].loss);
    for (const Palette& palette : study.palettes) {
        std::uint64_t pixels = 0;
        for (const Swatch& swatch : palette.swatches) pixels += swatch.pixels;
        EXPECT_EQ(pixels, table.opaque_pixels) << palette.count;
    }
    for (std::size_t at = 0; at < 8; ++at) {
        ASSERT_TRUE(study.curve[at].loss);
        const CountLoss& loss = *study.curve[at].loss;
        const Palette& more = study.palettes[at + 1];
        const Palette& fewer = study.palettes[at];
        std::vector<std::vector<std::uint64_t>> shared(
            more.swatches.size(), std::vector<std::uint64_t>(fewer.swatches.size(), 0));
        for (std::size_t i = 0; i < table.size(); ++i) {
            shared[slow_nearest(lab_at(table, i), more.swatches)]
                  [slow_nearest(lab_at(table, i), fewer.swatches)] += table.count[i];
        }
        ASSERT_EQ(loss.colour, slow_lost(more, fewer, shared)) << at + 1;
        const auto& row = shared[loss.colour];
        EXPECT_EQ(loss.into,
                  static_cast<std::size_t>(std::max_element(row.begin(), row.end()) - row.begin()));
        double sum = 0, worst = 0, sum_before = 0, worst_before = 0;
        std::uint64_t pixels = 0;
        for (std::size_t i = 0; i < table.size(); ++i) {
            const Lab lab = lab_at(table, i);
            if (slow_nearest(lab, more.swatches) != loss.colour) continue;
            const double now =
                delta_e_2000(lab, fewer.swatches[slow_nearest(lab, fewer.swatches)].lab);
            const double before = delta_e_2000(lab, more.swatches[loss.colour].lab);
            const auto weight = static_cast<double>(table.count[i]);
            pixels += table.count[i];
            sum += weight * now;
            sum_before += weight * before;
            worst = std::max(worst, now);
            worst_before = std::max(worst_before, before);
        }
        const auto n = static_cast<double>(pixels);
        EXPECT_EQ(loss.pixels, pixels);
        EXPECT_EQ(loss.pixels, more.swatches[loss.colour].pixels);
        EXPECT_EQ(loss.share, more.swatches[loss.colour].share);
        EXPECT_NEAR(loss.into_share, static_cast<double>(row[loss.into]) / n, 1e-12);
        EXPECT_NEAR(loss.mean_de00, sum / n, 1e-3);
        EXPECT_NEAR(loss.max_de00, worst, 1e-3);
        EXPECT_NEAR(loss.mean_de00_before, sum_before / n, 1e-3);
        EXPECT_NEAR(loss.max_de00_before, worst_before, 1e-3);
    }
}

TEST(CountLoss, OfKeptColoursThatThePictureHasNot) {
    Random random(52);
    const ColourTable table = random_table(random, 300);
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    SweepOptions options;
    options.max_count = 6;
    options.kept.dims = 3;
    for (const Rgb8 colour : {Rgb8{255, 0, 255}, Rgb8{0, 255, 255}}) {
        const Lab lab = srgb.lab_of(colour);
        options.kept.x.insert(
            options.kept.x.end(),
            {static_cast<float>(lab.L), static_cast<float>(lab.a), static_cast<float>(lab.b)});
        ++options.kept.count;
    }
    Study study;
    measure_curve(study, table, sweep_counts(points_of(table), options), srgb);
    ASSERT_EQ(study.curve.front().count, 2);
    for (std::size_t at = 0; at + 1 < study.curve.size(); ++at) {
        ASSERT_TRUE(study.curve[at].loss);
        EXPECT_FALSE(study.palettes[at + 1].swatches[study.curve[at].loss->colour].kept);
    }
}

}  // namespace
}  // namespace tincture
