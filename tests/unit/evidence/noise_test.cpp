#include "evidence/noise.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "tests/corpus/pictures.h"
#include "tests/support/pictures.h"

namespace tincture {
namespace {

using test_support::picture_of;
using test_support::Random;
using test_support::Size;

double noise_of(const Picture& picture) {
    const ColourSpace space = ColourSpace::standard(picture.model);
    const ColourTable table = count_colours(picture, space);
    return measure_noise(PixelLab(picture, table, space));
}

// 16-bit RGB: `base` of full scale with normal noise of this deviation in each channel.
Picture noisy(Random& random, Size size, double base, double sigma) {
    std::vector<std::uint16_t> samples(3UL * size.width * size.height);
    for (std::uint16_t& sample : samples) {
        const double value = base + sigma * random.bell();
        sample = static_cast<std::uint16_t>(std::lround(65535 * std::clamp(value, 0.0, 1.0)));
    }
    return picture_of(ColourModel::rgb, 16, size.width, size.height, samples);
}

// How far the pixels lie from their mean: dE76, root mean square.
double scatter_of(const Picture& picture) {
    const ColourTable table = count_colours(picture, ColourSpace::standard(picture.model));
    double squares = 0;
    for (const std::vector<float>* plane : {&table.L, &table.a, &table.b}) {
        double sum = 0;
        double squared = 0;
        for (std::size_t i = 0; i < table.size(); ++i) {
            const auto x = static_cast<double>((*plane)[i]);
            sum += static_cast<double>(table.count[i]) * x;
            squared += static_cast<double>(table.count[i]) * x * x;
        }
        const auto n = static_cast<double>(table.opaque_pixels);
        squares += squared / n - sum / n * (sum / n);
    }
    return std::sqrt(squares);
}

TEST(Noise, IsNoneInCleanArt) {
    for (const std::uint64_t seed : {1U, 2U, 3U}) {
        EXPECT_EQ(noise_of(corpus::draw_sample(corpus::Kind::poster, seed).picture), 0);
    }
    Random random(41);
    EXPECT_EQ(noise_of(test_support::flat_picture(random, ColourModel::rgb, {90, 70}, 4)), 0);
}

// What is over 8 dE76 is taken for an edge, so that strong noise is counted for a little less.
TEST(Noise, IsThatOfTheFlatColour) {
    Random random(42);
    for (const double base : {0.2, 0.5, 0.8}) {
        for (const double sigma : {0.002, 0.005, 0.01, 0.02}) {
            const Picture picture = noisy(random, {200, 150}, base, sigma);
            const double wanted = scatter_of(picture);
            SCOPED_TRACE(testing::Message() << base << ", " << sigma << ": " << wanted);
            EXPECT_GT(noise_of(picture), (wanted < 3 ? 0.95 : 0.85) * wanted);
            EXPECT_LT(noise_of(picture), 1.05 * wanted);
        }
    }
}

// An even ramp of lightness: its second differences are those of rounding.
TEST(Noise, IsNotShading) {
    std::vector<std::uint16_t> samples;
    for (std::size_t i = 0; i < 100 * 80; ++i) {
        samples.push_back(static_cast<std::uint16_t>(20'000 + 200 * (i % 100)));
    }
    EXPECT_LT(noise_of(picture_of(ColourModel::grey, 16, 100, 80, samples)), 0.05);
}

// Squares of 10 pixels in black and white on a noisy ground: a fifth of what is looked at.
TEST(Noise, IsNotMovedByEdges) {
    Random random(43);
    Picture picture = noisy(random, {200, 150}, 0.5, 0.01);
    const double wanted = scatter_of(picture);
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        const std::size_t x = i % 200;
        const std::size_t y = i / 200;
        const double light = (x / 10 + y / 10) % 2 == 0 ? 0.3 : -0.3;
        for (std::size_t c = 0; c < 3; ++c) {
            const double value = picture.samples16[3 * i + c] + light * 65535;
            picture.samples16[3 * i + c] = static_cast<std::uint16_t>(std::lround(value));
        }
    }
    EXPECT_GT(noise_of(picture), 0.7 * wanted);
    EXPECT_LT(noise_of(picture), 1.4 * wanted);
}

// Even blocks beside noisy ones, as JPEG leaves them: that of the noisy ones.
TEST(Noise, OfAFewNoisyBlocksIsTheirs) {
    Random random(44);
    Picture picture = noisy(random, {200, 150}, 0.5, 0.01);
    const double wanted = scatter_of(picture);
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        if (i % 200 < 40) continue;
        for (std::size_t c = 0; c < 3; ++c) picture.samples16[3 * i + c] = 32768;
    }
    EXPECT_GT(noise_of(picture), 0.93 * wanted);
    EXPECT_LT(noise_of(picture), 1.07 * wanted);
    // Less than a twentieth is not spoken of.
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        if (i % 200 < 5) continue;
        for (std::size_t c = 0; c < 3; ++c) picture.samples16[3 * i + c] = 32768;
    }
    EXPECT_EQ(noise_of(picture), 0);
}

TEST(Noise, OfTransparentPixelsIsNone) {
    Random random(45);
    Picture picture = noisy(random, {100, 80}, 0.5, 0.02);
    picture.opaque = Samples<std::uint8_t>(picture.pixel_count());
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        picture.opaque[i] = i % 100 < 50 ? 1 : 0;
        if (picture.opaque[i] == 0) continue;
        for (std::size_t c = 0; c < 3; ++c) picture.samples16[3 * i + c] = 10'000;
    }
    EXPECT_EQ(noise_of(picture), 0);
}

// Strong noise in lightness alone: its median is that of one channel (chi-squared, one degree:
// 0.455), held against 2.366 / 3 of the sum.
TEST(Noise, IsTakenFromTheMedianWhereItIsStrong) {
    Random random(48);
    std::vector<std::uint16_t> samples;
    for (std::size_t i = 0; i < 300 * 200; ++i) {
        const double value = std::clamp(0.5 + 0.12 * random.bell(), 0.0, 1.0);
        samples.push_back(static_cast<std::uint16_t>(std::lround(65535 * value)));
    }
    const Picture picture = picture_of(ColourModel::grey, 16, 300, 200, samples);
    const double wanted = scatter_of(picture) * std::sqrt(0.455 / (2.366 / 3));
    EXPECT_NEAR(noise_of(picture), wanted, 0.04 * wanted);
}

// Transparent pixels are not even ones: the noise of a narrow opaque part is that part's.
TEST(Noise, IsThatOfTheOpaquePart) {
    Random random(49);
    Picture picture = noisy(random, {200, 60}, 0.5, 0.01);
    picture.opaque = Samples<std::uint8_t>(picture.pixel_count());
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        picture.opaque[i] = i % 200 >= 90 && i % 200 < 98 ? 1 : 0;
    }
    const double wanted = scatter_of(picture);
    EXPECT_GT(noise_of(picture), 0.85 * wanted);
    EXPECT_LT(noise_of(picture), 1.15 * wanted);
}

// Twice the picture below itself, few enough rows to look at all of them; and twice the counts of
// its colours.
TEST(Noise, IsTheSameForTwiceThePixels) {
    Random random(46);
    const Picture once = noisy(random, {90, 30}, 0.4, 0.01);
    std::vector<std::uint16_t> samples(once.samples16.data(),
                                       once.samples16.data() + once.samples16.size());
    samples.insert(samples.end(), once.samples16.data(),
                   once.samples16.data() + once.samples16.size());
    EXPECT_EQ(noise_of(picture_of(ColourModel::rgb, 16, 90, 60, samples)), noise_of(once));

    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    ColourTable table = count_colours(once, space);
    for (std::uint64_t& count : table.count) count *= 2;
    EXPECT_EQ(measure_noise(PixelLab(once, table, space)), noise_of(once));
}

TEST(Noise, OfTinyPicturesIsNone) {
    Random random(47);
    for (const Size size : {Size{1, 1}, {2, 50}, {1, 3}}) {
        EXPECT_EQ(noise_of(noisy(random, size, 0.5, 0.05)), 0);
    }
    EXPECT_GT(noise_of(noisy(random, {3, 1}, 0.5, 0.01)), 0);
}

}  // namespace
}  // namespace tincture
