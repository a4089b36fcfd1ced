#include "label/label_map.h"

#include <gtest/gtest.h>

#include <limits>

#include "histogram/lab_cells.h"
#include "support/parallel.h"
#include "tests/support/pictures.h"
#include "tests/support/profiles.h"

namespace tincture {
namespace {

using test_support::Random;

// `count` swatches, the Lab of pixels of the picture or near them; every fifth repeats the one
// before, so that there are ties.
Palette palette_for(const Picture& picture, const ColourSpace& space, int count, Random& random) {
    Palette palette;
    palette.count = count;
    for (int k = 0; k < count; ++k) {
        Swatch swatch;
        const std::size_t pixel = random.below(picture.pixel_count());
        float L = 0, a = 0, b = 0;
        picture_to_lab(picture, space, pixel, 1, {&L, &a, &b});
        swatch.lab = {L, a, static_cast<double>(b) + (k % 2 == 0 ? 0.0 : random.bell())};
        if (k % 5 == 4) swatch.lab = palette.swatches.back().lab;
        palette.swatches.push_back(swatch);
    }
    return palette;
}

// The nearest swatch of each opaque pixel, one by one.
std::vector<std::uint8_t> plain_labels(const Picture& picture, const ColourSpace& space,
                                       const Palette& palette) {
    const std::size_t n = picture.pixel_count();
    std::vector<float> L(n), a(n), b(n);
    picture_to_lab(picture, space, 0, n, {L.data(), a.data(), b.data()});
    std::vector<std::uint8_t> labels(n, static_cast<std::uint8_t>(palette.count));
    for (std::size_t i = 0; i < n; ++i) {
        if (!test_support::is_opaque(picture, i)) continue;
        float least = std::numeric_limits<float>::infinity();
        for (std::size_t k = 0; k < palette.swatches.size(); ++k) {
            const Lab& lab = palette.swatches[k].lab;
            const float dL = L[i] - static_cast<float>(lab.L);
            const float da = a[i] - static_cast<float>(lab.a);
            const float db = b[i] - static_cast<float>(lab.b);
            const float squared = dL * dL + da * da + db * db;
            if (squared >= least) continue;
            least = squared;
            labels[i] = static_cast<std::uint8_t>(k);
        }
    }
    return labels;
}

std::vector<std::uint8_t> found_labels(const Picture& picture, const ColourSpace& space,
                                       const Palette& palette, std::size_t exact_limit) {
    const Samples<std::uint8_t> labels =
        label_pixels(picture, count_colours(picture, space, exact_limit), space, palette);
    return {labels.data(), labels.data() + labels.size()};
}

// With and without alpha; `exact_limit` makes the colour table one of cells where it is small.
void check(Picture& picture, const ColourSpace& space, int count,
           std::size_t exact_limit = max_exact_colours) {
    Random random(41);
    const Palette palette = palette_for(picture, space, count, random);
    EXPECT_EQ(found_labels(picture, space, palette, exact_limit),
              plain_labels(picture, space, palette));
    if (count > 255) return;
    test_support::punch_holes(picture, random);
    EXPECT_EQ(found_labels(picture, space, palette, exact_limit),
              plain_labels(picture, space, palette));
}

ColourSpace cmyk_space() {
    return ColourSpace::from_icc(test_support::cmyk_profile(), ColourModel::cmyk, "");
}

TEST(LabelPixels, FewPixelsOfEachKind) {
    Random random(42);
    for (const int bits : {8, 16}) {
        for (const int count : {1, 2, 24, 255, 256}) {
            SCOPED_TRACE(std::to_string(bits) + " bits, " + std::to_string(count) + " colours");
            Picture rgb = test_support::photograph_like(random, bits, {83, 61});
            check(rgb, ColourSpace::standard(ColourModel::rgb), count);
            Picture grey =
                test_support::noise_picture(random, ColourModel::grey, bits, {83, 61}, 65536);
            check(grey, ColourSpace::standard(ColourModel::grey), count);
            Picture cmyk =
                test_support::noise_picture(random, ColourModel::cmyk, bits, {83, 61}, 3);
            check(cmyk, cmyk_space(), count);
        }
    }
}

// From 1,000,000 pixels on RGB of 8 bits goes by a table of all its colours.
TEST(LabelPixels, ManyPixels) {
    Random random(43);
    Picture large = test_support::photograph_like(random, 8, {1000, 1000});
    check(large, ColourSpace::standard(ColourModel::rgb), 12);
    Picture smaller = test_support::photograph_like(random, 8, {999, 1000});
    check(smaller, ColourSpace::standard(ColourModel::rgb), 12);
    Picture deep = test_support::photograph_like(random, 16, {1000, 1001});
    check(deep, ColourSpace::standard(ColourModel::rgb), 12);
}

TEST(LabelPixels, WhereCellsStandForColours) {
    Random random(44);
    Picture picture = test_support::photograph_like(random, 16, {700, 500});
    check(picture, ColourSpace::standard(ColourModel::rgb), 20, 100);
    Picture small = test_support::photograph_like(random, 8, {1, 3});
    check(small, ColourSpace::standard(ColourModel::rgb), 2, 1);
}

// The key of full ink has all 64 bits set.
TEST(LabelPixels, FullInkOfSixteenBits) {
    Random random(45);
    for (int i = 0; i < 8; ++i) {
        Picture picture = test_support::noise_picture(random, ColourModel::cmyk, 16, {9, 9}, 2);
        std::fill_n(picture.samples16.data(), 4, std::uint16_t{65535});
        check(picture, cmyk_space(), 7);
    }
}

TEST(LabelPixels, ThreadsHaveNoSay) {
    Random random(46);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = test_support::photograph_like(random, 8, {1100, 1000});
    const Palette palette = palette_for(picture, space, 30, random);
    for (const std::size_t exact_limit : {max_exact_colours, std::size_t{1000}}) {
        set_thread_count(1);
        const std::vector<std::uint8_t> wanted = found_labels(picture, space, palette, exact_limit);
        for (const int threads : {2, 3, 7}) {
            set_thread_count(threads);
            EXPECT_EQ(found_labels(picture, space, palette, exact_limit), wanted) << threads;
        }
        set_thread_count(0);
    }
}

TEST(CountLabels, CountsThoseBelow) {
    Samples<std::uint8_t> labels(6);
    const std::vector<std::uint8_t> values = {0, 2, 2, 3, 255, 0};
    std::copy(values.begin(), values.end(), labels.data());
    EXPECT_EQ(count_labels(labels, 3), (std::vector<std::uint64_t>{2, 0, 2}));
    EXPECT_EQ(count_labels(labels, 256).at(255), 1U);
    EXPECT_TRUE(count_labels(Samples<std::uint8_t>(), 0).empty());
}

TEST(CountDifferences, CountsPlaces) {
    Samples<std::uint8_t> one(300);
    Samples<std::uint8_t> two(300);
    for (std::size_t i = 0; i < 300; ++i) {
        one[i] = static_cast<std::uint8_t>(i % 7);
        two[i] = static_cast<std::uint8_t>(i % 3 == 0 ? 200 : i % 7);
    }
    EXPECT_EQ(count_differences(one, two), 100U);
    EXPECT_EQ(count_differences(one, one), 0U);
}

}  // namespace
}  // namespace tincture
