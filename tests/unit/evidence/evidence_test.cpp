#include "evidence/evidence.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "cluster/sweep.h"
#include "support/parallel.h"
#include "tests/corpus/pictures.h"
#include "tests/corpus/wear.h"
#include "tests/support/pictures.h"

namespace tincture {
namespace {

using test_support::Random;

const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);

Evidence evidence_of(const Picture& picture) {
    return weigh_evidence(picture, count_colours(picture, srgb), srgb);
}

void expect_equal(const WeightedPoints& one, const WeightedPoints& two) {
    EXPECT_EQ(one.n, two.n);
    EXPECT_EQ(one.dims, two.dims);
    EXPECT_EQ(one.x, two.x);
    EXPECT_EQ(one.weight, two.weight);
    EXPECT_EQ(one.total_weight, two.total_weight);
    EXPECT_EQ(one.inner_scatter, two.inner_scatter);
}

void expect_equal(const Evidence& one, const Evidence& two) {
    expect_equal(one.points, two.points);
    EXPECT_EQ(one.facts.kind, two.facts.kind);
    EXPECT_EQ(one.facts.flat_share, two.facts.flat_share);
    EXPECT_EQ(one.facts.noise, two.facts.noise);
    EXPECT_EQ(one.facts.inks, two.facts.inks);
}

// The error at the true count is at most this part of that at one less.
void expect_bend(const WeightedPoints& points, int inks, double most) {
    SweepOptions options;
    options.max_count = inks;
    const Sweep sweep = sweep_counts(points, options);
    const auto n = static_cast<std::size_t>(inks);
    ASSERT_EQ(sweep.objective.size(), n);
    EXPECT_LT(sweep.objective[n - 1], most * sweep.objective[n - 2]);
}

// Seeds whose inks are all on more than one percent.
void check_posters(corpus::State state, double most, double most_noise) {
    int checked = 0;
    for (std::uint64_t seed = 1; checked < 6; ++seed) {
        const corpus::Sample sample = corpus::draw_sample(corpus::Kind::poster, seed);
        if (*std::min_element(sample.shares.begin(), sample.shares.end()) < 0.01) continue;
        if (sample.count() < 3) continue;
        ++checked;
        SCOPED_TRACE(testing::Message() << "seed " << seed << ", " << sample.count() << " inks");
        const Picture picture = corpus::worn(sample.picture, state, seed);
        const Evidence evidence = evidence_of(picture);
        EXPECT_EQ(evidence.facts.kind, "flat art");
        EXPECT_EQ(evidence.facts.inks, sample.count());
        EXPECT_GT(evidence.facts.flat_share.value(), 0.6);
        EXPECT_LE(evidence.facts.flat_share.value(), 1);
        EXPECT_LE(evidence.facts.noise.value(), most_noise);
        expect_bend(evidence.points, sample.count(), most);
    }
}

TEST(Evidence, OfCleanPostersNamesTheirInks) {
    check_posters(corpus::State::clean, 0.02, 0);
}

TEST(Evidence, OfNoisyPostersNamesTheirInks) {
    check_posters(corpus::State::noise, 0.2, 8);
}

// Every pixel of a slow fade is near its neighbours, yet no colour of it is an ink.
TEST(Evidence, FindsNoInksInsideAFade) {
    std::vector<std::uint16_t> samples;
    for (std::size_t i = 0; i < 400 * 300; ++i) {
        const std::size_t x = i % 400;
        const std::size_t y = i / 400;
        const auto along = static_cast<std::uint16_t>(x / 2);
        std::vector<std::uint16_t> colour = {255, 255, 255};
        if (y >= 120) colour = {20, 20, 20};
        if (y >= 220) colour = {along, 90, static_cast<std::uint16_t>(220 - along)};
        samples.insert(samples.end(), colour.begin(), colour.end());
    }
    const Evidence evidence =
        evidence_of(test_support::picture_of(ColourModel::rgb, 8, 400, 300, samples));
    EXPECT_EQ(evidence.facts.kind, "flat art");
    EXPECT_EQ(evidence.facts.inks, 2);
}

// Of flat art, every pixel still has a say, so that there is an answer for any count.
TEST(Evidence, HoldsEveryColourOfCleanArt) {
    const corpus::Sample sample = corpus::draw_sample(corpus::Kind::poster, 1);
    const ColourTable table = count_colours(sample.picture, srgb);
    const Evidence evidence = weigh_evidence(sample.picture, table, srgb);
    EXPECT_GE(evidence.points.total_weight, static_cast<double>(table.opaque_pixels));
    EXPECT_LE(evidence.points.total_weight, 4097 * static_cast<double>(table.opaque_pixels));
    EXPECT_GT(evidence.points.n, static_cast<std::size_t>(sample.count()));
    double sum = 0;
    for (const double weight : evidence.points.weight) {
        EXPECT_GE(weight, 1);
        EXPECT_EQ(weight, std::nearbyint(weight));
        sum += weight;
    }
    EXPECT_EQ(sum, evidence.points.total_weight);
    // The very colours of the inks weigh most.
    for (const Rgb8 ink : sample.inks) {
        const Lab lab = srgb.lab_of(ink);
        double weight = 0;
        for (std::size_t i = 0; i < evidence.points.n; ++i) {
            const bool same = static_cast<double>(evidence.points.plane(0)[i]) == lab.L &&
                              static_cast<double>(evidence.points.plane(1)[i]) == lab.a &&
                              static_cast<double>(evidence.points.plane(2)[i]) == lab.b;
            if (same) weight += evidence.points.weight[i];
        }
        EXPECT_GT(weight, 0.0002 * evidence.points.total_weight);
    }
}

TEST(Evidence, OfContinuousToneIsEveryPixel) {
    Random random(101);
    for (const int bits : {8, 16}) {
        const Picture picture = test_support::photograph_like(random, bits, {300, 220});
        const ColourTable table = count_colours(picture, srgb);
        const Evidence evidence = weigh_evidence(picture, table, srgb);
        EXPECT_EQ(evidence.facts.kind, "continuous tone");
        EXPECT_LT(evidence.facts.flat_share.value(), 0.3);
        EXPECT_GT(evidence.facts.noise.value(), 0);
        expect_equal(evidence.points, points_of(table));
    }
}

// The right half is not opaque, whatever its samples are: as if it were cut off.
TEST(Evidence, OfTransparentPixelsIsNone) {
    Random random(102);
    const corpus::Sample sample = corpus::draw_sample(corpus::Kind::poster, 2);
    for (const corpus::State state : {corpus::State::clean, corpus::State::noise}) {
        Picture picture = corpus::worn(sample.picture, state, 2);
        const std::size_t width = picture.width;
        const std::size_t half = width / 2;
        std::vector<std::uint16_t> left;
        picture.opaque = Samples<std::uint8_t>(picture.pixel_count());
        for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
            picture.opaque[i] = i % width < half ? 1 : 0;
            for (std::size_t c = 3 * i; c < 3 * i + 3; ++c) {
                if (i % width < half) {
                    left.push_back(picture.samples8[c]);
                } else {
                    picture.samples8[c] = static_cast<std::uint8_t>(random.below(256));
                }
            }
        }
        const Picture cut = test_support::picture_of(
            ColourModel::rgb, 8, static_cast<std::uint32_t>(half), picture.height, left);
        expect_equal(evidence_of(picture), evidence_of(cut));
    }
}

TEST(Evidence, ThreadsHaveNoSay) {
    for (const corpus::Kind kind : {corpus::Kind::poster, corpus::Kind::photo}) {
        const corpus::Sample sample = corpus::draw_sample(kind, 3);
        for (const corpus::State state : {corpus::State::clean, corpus::State::noise}) {
            const Picture picture = corpus::worn(sample.picture, state, 3);
            set_thread_count(1);
            const Evidence wanted = evidence_of(picture);
            for (const int threads : {2, 3, 7}) {
                set_thread_count(threads);
                expect_equal(evidence_of(picture), wanted);
            }
            set_thread_count(0);
        }
    }
}

// Beside itself as often as is needed to be looked at on a grid.
TEST(Evidence, OfLargePicturesIsThatOfSmallOnes) {
    const corpus::Sample sample = corpus::draw_sample(corpus::Kind::poster, 1);
    const std::size_t width = sample.picture.width;
    const std::size_t height = sample.picture.height;
    const std::size_t times = 1 + 3500 / width;
    std::vector<std::uint16_t> samples;
    for (std::size_t y = 0; y < times * height; ++y) {
        const std::uint8_t* row = sample.picture.samples8.data() + y % height * width * 3;
        for (std::size_t t = 0; t < times; ++t) samples.insert(samples.end(), row, row + 3 * width);
    }
    const Picture large =
        test_support::picture_of(ColourModel::rgb, 8, static_cast<std::uint32_t>(times * width),
                                 static_cast<std::uint32_t>(times * height), samples);
    ASSERT_GT(large.pixel_count(), 9'000'000U);
    const Evidence small = evidence_of(sample.picture);
    const Evidence evidence = evidence_of(large);
    EXPECT_EQ(evidence.facts.kind, "flat art");
    EXPECT_EQ(evidence.facts.inks, sample.count());
    EXPECT_EQ(evidence.facts.noise, 0);
    // Weights are those of all pixels, not of the grid.
    const double ratio = evidence.points.total_weight / small.points.total_weight;
    EXPECT_NEAR(ratio / static_cast<double>(times * times), 1, 0.2);
}

TEST(EqualEvidence, IsEveryPixelAndNothingSaid) {
    Random random(103);
    const Picture picture = test_support::noise_picture(random, ColourModel::rgb, 8, {50, 40}, 9);
    for (const std::size_t limit : {max_exact_colours, std::size_t{20}}) {
        const ColourTable table = count_colours(picture, srgb, limit);
        const Evidence evidence = equal_evidence(table);
        expect_equal(evidence.points, points_of(table));
        EXPECT_EQ(evidence.points.total_weight, 2000);
        EXPECT_FALSE(evidence.facts.kind.has_value());
        EXPECT_FALSE(evidence.facts.flat_share.has_value());
        EXPECT_FALSE(evidence.facts.noise.has_value());
        EXPECT_FALSE(evidence.facts.inks.has_value());
    }
}

}  // namespace
}  // namespace tincture
