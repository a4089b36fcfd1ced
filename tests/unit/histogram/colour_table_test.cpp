#include "histogram/colour_table.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <map>

#include "histogram/colour_counts.h"
#include "support/parallel.h"
#include "tests/support/pictures.h"
#include "tests/support/profiles.h"

namespace tincture {
namespace {

using test_support::Random;
using Counts = std::map<std::uint64_t, std::uint64_t>;

// The key as its declaration has it: 16 bits a sample, the first highest.
std::uint64_t plain_key(const Picture& picture, std::size_t pixel) {
    const auto channels = static_cast<std::size_t>(channel_count(picture.model));
    std::uint64_t key = 0;
    for (std::size_t c = 0; c < channels; ++c) {
        key = key * 65536 + test_support::sample_at(picture, pixel * channels + c);
    }
    return key;
}

Counts plain_counts(const Picture& picture) {
    // Sorted first: a map of millions of pixels would take the test's whole time.
    std::vector<std::uint64_t> keys;
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        if (test_support::is_opaque(picture, i)) keys.push_back(plain_key(picture, i));
    }
    std::sort(keys.begin(), keys.end());
    Counts counts;
    for (std::size_t i = 0, end = 0; i < keys.size(); i = end) {
        while (end < keys.size() && keys[end] == keys[i]) ++end;
        counts.emplace_hint(counts.end(), keys[i], end - i);
    }
    return counts;
}

ColourSpace space_of(ColourModel model) {
    return model == ColourModel::cmyk
               ? ColourSpace::from_icc(test_support::cmyk_profile(), model, "")
               : ColourSpace::standard(model);
}

void expect_equal(const ColourTable& one, const ColourTable& two) {
    EXPECT_EQ(one.key, two.key);
    EXPECT_EQ(one.L, two.L);
    EXPECT_EQ(one.a, two.a);
    EXPECT_EQ(one.b, two.b);
    EXPECT_EQ(one.count, two.count);
    EXPECT_EQ(one.opaque_pixels, two.opaque_pixels);
    EXPECT_EQ(one.cell_de, two.cell_de);
    EXPECT_EQ(one.inner_scatter, two.inner_scatter);
}

// Keys ascending, counts as in the oracle.
void expect_counts(const ColourTable& table, const Picture& picture) {
    const Counts wanted = plain_counts(picture);
    ASSERT_EQ(table.size(), wanted.size());
    std::uint64_t pixels = 0;
    std::size_t i = 0;
    for (const auto& [key, count] : wanted) {
        ASSERT_EQ(table.key[i], key);
        ASSERT_EQ(table.count[i], count);
        pixels += count;
        ++i;
    }
    EXPECT_EQ(table.opaque_pixels, pixels);
    EXPECT_EQ(table.cell_de, 0);
    EXPECT_EQ(table.inner_scatter, 0);
}

void expect_labs(const ColourTable& table, const test_support::LcmsLab& lcms, ColourModel model,
                 int bits) {
    const auto channels = static_cast<std::size_t>(channel_count(model));
    for (std::size_t i = 0; i < table.size(); i += 1 + table.size() / 500) {
        std::vector<double> device(channels);
        for (std::size_t c = 0; c < channels; ++c) {
            const std::uint64_t sample = table.key[i] >> (16 * (channels - 1 - c)) & 0xFFFF;
            device[c] = static_cast<double>(sample) / (bits == 16 ? 65535.0 : 255.0);
        }
        const Lab wanted =
            model == ColourModel::grey ? lcms({device[0], device[0], device[0]}) : lcms(device);
        EXPECT_NEAR(static_cast<double>(table.L[i]), wanted.L, 1e-3);
        EXPECT_NEAR(static_cast<double>(table.a[i]), wanted.a, 1e-3);
        EXPECT_NEAR(static_cast<double>(table.b[i]), wanted.b, 1e-3);
    }
}

struct Kind {
    ColourModel model;
    int bits;
};
constexpr Kind kinds[] = {{ColourModel::grey, 8},  {ColourModel::rgb, 8},  {ColourModel::cmyk, 8},
                          {ColourModel::grey, 16}, {ColourModel::rgb, 16}, {ColourModel::cmyk, 16}};

// Every kind of picture of this size, with and without alpha.
void check_every_kind(test_support::Size size, std::size_t levels) {
    Random random(size.width);
    for (const Kind& kind : kinds) {
        SCOPED_TRACE(std::to_string(channel_count(kind.model)) + " channels, " +
                     std::to_string(kind.bits) + " bits");
        const ColourSpace space = space_of(kind.model);
        Picture picture = test_support::noise_picture(random, kind.model, kind.bits, size, levels);
        const ColourTable table = count_colours(picture, space);
        expect_counts(table, picture);
        if (kind.model == ColourModel::cmyk) {
            expect_labs(table, {test_support::cmyk_profile(), kind.model}, kind.model, kind.bits);
        } else {
            expect_labs(table, {}, kind.model, kind.bits);
        }
        test_support::punch_holes(picture, random);
        expect_counts(count_colours(picture, space), picture);
    }
}

TEST(ColourTable, CountsSmallPictures) {
    check_every_kind({1, 1}, 256);
    check_every_kind({61, 47}, 256);
    check_every_kind({61, 47}, 65536);
    check_every_kind({200, 3}, 2);
}

// From 2,000,000 pixels on all but RGB of 8 bits are counted in two parts.
TEST(ColourTable, CountsLargePictures) {
    check_every_kind({2000, 1000}, 23);
}

TEST(ColourTable, CountsTheSameOnBothSidesOfThatSize) {
    Random random(12);
    const Picture large =
        test_support::noise_picture(random, ColourModel::cmyk, 8, {1001, 2000}, 20);
    expect_counts(count_colours(large, space_of(ColourModel::cmyk)), large);
    const Picture small =
        test_support::noise_picture(random, ColourModel::cmyk, 8, {999, 2000}, 20);
    expect_counts(count_colours(small, space_of(ColourModel::cmyk)), small);
}

TEST(ColourTable, EverythingTransparentIsEmpty) {
    for (const test_support::Size size : {test_support::Size{5, 4}, {2000, 1000}}) {
        Picture picture =
            test_support::picture_of(ColourModel::rgb, 8, size.width, size.height,
                                     std::vector<std::uint16_t>(3UL * size.width * size.height, 9),
                                     std::vector<std::uint8_t>(size.width * size.height, 0));
        const ColourTable table = count_colours(picture, space_of(ColourModel::rgb));
        EXPECT_EQ(table.size(), 0U);
        EXPECT_EQ(table.opaque_pixels, 0U);
    }
}

// Its key has all 64 bits set.
TEST(ColourTable, CountsFullInkOfSixteenBits) {
    const ColourSpace space = space_of(ColourModel::cmyk);
    const std::uint16_t full = 65535;
    const std::vector<std::uint16_t> only(4 * 6, full);
    const Picture black = test_support::picture_of(ColourModel::cmyk, 16, 3, 2, only);
    expect_counts(count_colours(black, space), black);

    const Picture mixed = test_support::picture_of(
        ColourModel::cmyk, 16, 5, 1, {full, full, full, full, 0,    0,    0,    0,    full, full,
                                      full, full, full, full, full, full, full, full, full, 0});
    const ColourTable table = count_colours(mixed, space);
    expect_counts(table, mixed);
    EXPECT_EQ(table.opaque_pixels, 5U);
}

TEST(ColourTable, TheOrderOfPixelsHasNoSay) {
    Random random(13);
    for (const Kind& kind : kinds) {
        const ColourSpace space = space_of(kind.model);
        Picture picture = test_support::noise_picture(random, kind.model, kind.bits, {90, 70}, 50);
        test_support::punch_holes(picture, random);
        expect_equal(count_colours(picture, space),
                     count_colours(test_support::shuffled_pixels(picture, random), space));
    }
}

TEST(ColourTable, ThreadsHaveNoSay) {
    Random random(14);
    for (const Kind& kind : {Kind{ColourModel::rgb, 8}, Kind{ColourModel::rgb, 16}}) {
        const Picture picture =
            test_support::noise_picture(random, kind.model, kind.bits, {2000, 1001}, 40);
        const ColourSpace space = space_of(kind.model);
        set_thread_count(1);
        const ColourTable wanted = count_colours(picture, space);
        for (const int threads : {2, 3, 7}) {
            set_thread_count(threads);
            expect_equal(count_colours(picture, space), wanted);
        }
        set_thread_count(0);
    }
}

TEST(ColourTable, IsExactUpToTheLimit) {
    Random random(15);
    for (const test_support::Size size : {test_support::Size{80, 60}, {2000, 1000}}) {
        for (const int bits : {8, 16}) {
            const Picture picture =
                test_support::noise_picture(random, ColourModel::rgb, bits, size, 12);
            const ColourSpace space = space_of(ColourModel::rgb);
            const std::size_t distinct = plain_counts(picture).size();
            EXPECT_EQ(count_colours(picture, space, distinct).cell_de, 0);
            EXPECT_EQ(count_colours(picture, space, distinct).size(), distinct);
            EXPECT_GT(count_colours(picture, space, distinct - 1).cell_de, 0);
        }
    }
}

TEST(KeyCounter, CountsAnyKey) {
    KeyCounter counter;
    Random random(16);
    Counts wanted;
    const auto add = [&](std::uint64_t key, std::uint64_t count) {
        counter.add(key, count);
        wanted[key] += count;
    };
    add(0, 1);
    add(~std::uint64_t{0}, 3);
    add(~std::uint64_t{0}, std::uint64_t{1} << 40);
    for (int i = 0; i < 20'000; ++i) {
        const std::uint64_t key = random.below(9000);
        add(key << (16 * random.below(4)), 1 + random.below(5));  // many share their low bits
    }
    EXPECT_EQ(counter.size(), wanted.size());
    const std::vector<ColourCount> found = counter.sorted();
    ASSERT_EQ(found.size(), wanted.size());
    auto at = wanted.begin();
    for (const ColourCount& colour : found) {
        EXPECT_EQ(colour.key, at->first);
        EXPECT_EQ(colour.count, at->second);
        ++at;
    }
}

TEST(KeyCounter, TakesInAnother) {
    for (const auto& [mine, others] :
         std::vector<std::pair<int, int>>{{0, 9000}, {9000, 0}, {100, 30'000}, {30'000, 100}}) {
        Random random(17);
        Counts wanted;
        KeyCounter one;
        KeyCounter two;
        const auto fill = [&](KeyCounter& counter, int keys) {
            for (int i = 0; i < keys; ++i) {
                const std::uint64_t key = random.below(40'000) * 0x1'0000'0001U;
                counter.add(key, 3);
                wanted[key] += 3;
            }
            counter.add(~std::uint64_t{0}, 2);
            wanted[~std::uint64_t{0}] += 2;
        };
        fill(one, mine);
        fill(two, others);
        one.add(two);
        EXPECT_EQ(one.size(), wanted.size());
        Counts found;
        for (const ColourCount& colour : one.sorted()) found[colour.key] += colour.count;
        EXPECT_EQ(found, wanted);
    }
}

}  // namespace
}  // namespace tincture
