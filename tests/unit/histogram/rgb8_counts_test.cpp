#include "histogram/rgb8_counts.h"

#include <gtest/gtest.h>

#include <map>

#include "histogram/colour_table.h"
#include "support/parallel.h"
#include "tests/support/pictures.h"

namespace tincture {
namespace {

using test_support::picture_of;
using test_support::Random;

void expect_counts(const Picture& picture) {
    std::map<std::uint64_t, std::uint64_t> wanted;
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        if (!test_support::is_opaque(picture, i)) continue;
        ++wanted[colour_key(picture.samples8.data() + 3 * i, 3)];
    }
    const std::vector<ColourCount> found = count_rgb8(picture);
    ASSERT_EQ(found.size(), wanted.size());
    auto at = wanted.begin();
    for (const ColourCount& colour : found) {
        ASSERT_EQ(colour.key, at->first);
        ASSERT_EQ(colour.count, at->second);
        ++at;
    }
}

TEST(Rgb8Counts, AreThoseOfAMap) {
    Random random(71);
    for (const test_support::Size size :
         {test_support::Size{1, 1}, {1, 2}, {3, 1}, {1, 5}, {7, 11}, {250, 199}}) {
        for (const std::size_t levels : {2U, 17U, 256U}) {
            SCOPED_TRACE(testing::Message()
                         << size.width << " x " << size.height << ", " << levels);
            Picture picture =
                test_support::noise_picture(random, ColourModel::rgb, 8, size, levels);
            expect_counts(picture);
            test_support::punch_holes(picture, random);
            expect_counts(picture);
        }
    }
}

TEST(Rgb8Counts, OfTransparentPixelsAreNone) {
    const std::vector<std::uint16_t> samples(3 * 20, 77);
    const Picture none =
        picture_of(ColourModel::rgb, 8, 5, 4, samples, std::vector<std::uint8_t>(20, 0));
    EXPECT_TRUE(count_rgb8(none).empty());
}

// Every corner of the cube, and each alone.
TEST(Rgb8Counts, KnowTheCornersOfTheCube) {
    std::vector<std::uint16_t> all;
    for (std::uint16_t corner = 0; corner < 8; ++corner) {
        std::vector<std::uint16_t> one;
        for (int c = 2; c >= 0; --c) one.push_back((corner >> c & 1) != 0 ? 255 : 0);
        expect_counts(picture_of(ColourModel::rgb, 8, 1, 1, one));
        for (int n = 0; n <= corner; ++n) all.insert(all.end(), one.begin(), one.end());
    }
    expect_counts(
        picture_of(ColourModel::rgb, 8, static_cast<std::uint32_t>(all.size() / 3), 1, all));
}

// Every red with every green, so that every bucket has colours; backwards, so that none is sorted.
TEST(Rgb8Counts, FillEveryBucket) {
    std::vector<std::uint16_t> samples;
    for (std::uint16_t r = 256; r-- > 0;) {
        for (std::uint16_t g = 256; g-- > 0;) {
            for (const std::uint16_t b : std::initializer_list<std::uint16_t>{255, 64, 63, 0}) {
                samples.insert(samples.end(), {r, g, b});
            }
        }
    }
    const Picture picture = picture_of(ColourModel::rgb, 8, 512, 512, samples);
    const std::vector<ColourCount> found = count_rgb8(picture);
    ASSERT_EQ(found.size(), 4U * 65536);
    for (std::size_t i = 0; i < found.size(); ++i) {
        constexpr std::uint64_t blues[] = {0, 63, 64, 255};
        const std::uint64_t key =
            std::uint64_t{i >> 10} << 32 | std::uint64_t{i >> 2 & 255} << 16 | blues[i & 3];
        ASSERT_EQ(found[i].key, key);
        ASSERT_EQ(found[i].count, 1U);
    }
}

TEST(Rgb8Counts, ThreadsHaveNoSay) {
    Random random(72);
    Picture picture = test_support::noise_picture(random, ColourModel::rgb, 8, {301, 203}, 40);
    test_support::punch_holes(picture, random);
    for (const int threads : {1, 2, 3, 7}) {
        set_thread_count(threads);
        expect_counts(picture);
    }
    set_thread_count(0);
}

}  // namespace
}  // namespace tincture
