#include "evidence/flat_areas.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <map>
#include <string>

#include "evidence/smooth.h"
#include "support/parallel.h"
#include "tests/support/pictures.h"

namespace tincture {
namespace {

using test_support::picture_of;
using test_support::Random;
using Counts = std::map<std::uint64_t, std::uint64_t>;

// As flat_areas.cpp has them.
constexpr double smoothing_from = 0.4;
constexpr double first_reach = 3.5;
constexpr double second_reach = 2.2;
constexpr double near_de = 4;
constexpr double near_noise = 0.8;
constexpr double grains = 2;  // a Lab unit

std::int16_t rounded(std::int16_t value) {
    const double grain = lab_band_steps / grains;
    return static_cast<std::int16_t>(std::round(value / grain) * grain);
}

bool is_near(const LabBand& band, std::size_t one, std::size_t two, double reach) {
    const double L = band.L[one] - band.L[two];
    const double a = band.a[one] - band.a[two];
    const double b = band.b[one] - band.b[two];
    return std::lround(L * L + a * a + b * b) <= std::lround(reach * reach);
}

// The whole picture at once, pixel by pixel.
Counts plain_counts(const PixelLab& pixels, double noise, bool few) {
    LabBand band;
    pixels.read(0, pixels.height(), band);
    if (noise >= smoothing_from) {
        LabBand smoothed;
        smooth_band(band, first_reach * noise, smoothed);
        smooth_band(smoothed, second_reach * noise, band);
    }
    if (noise >= smoothing_from || !few) {
        for (std::vector<std::int16_t>* plane : {&band.L, &band.a, &band.b}) {
            for (std::int16_t& value : *plane) value = rounded(value);
        }
    }
    const double reach = std::max(near_de, near_noise * noise) * lab_band_steps;
    Counts counts;
    const std::size_t width = band.width;
    for (std::size_t i = 0; i < band.L.size(); ++i) {
        if (band.L[i] == no_lab) continue;
        int near = 0;
        for (std::size_t j = 0; j < band.L.size(); ++j) {
            if (j + width + 1 < i) j = i - width - 1;
            if (j > i + width + 1) break;
            const auto dx =
                static_cast<std::ptrdiff_t>(i % width) - static_cast<std::ptrdiff_t>(j % width);
            if (j == i || dx < -1 || dx > 1) continue;
            near += is_near(band, i, j, reach) ? 1 : 0;
        }
        if (near >= 6) ++counts[lab_key(band.L[i], band.a[i], band.b[i])];
    }
    return counts;
}

Counts as_map(const std::vector<ColourCount>& colours) {
    Counts counts;
    for (const ColourCount& colour : colours) counts[colour.key] += colour.count;
    EXPECT_EQ(counts.size(), colours.size());
    EXPECT_TRUE(std::is_sorted(
        colours.begin(), colours.end(),
        [](const ColourCount& one, const ColourCount& two) { return one.key < two.key; }));
    return counts;
}

// Flat areas with noise on the lower bits of some of them.
Picture mottled(Random& random, test_support::Size size) {
    Picture picture = test_support::flat_picture(random, ColourModel::rgb, size, 5);
    for (std::size_t i = 0; i < picture.samples8.size(); ++i) {
        const std::size_t grain = 1 + i / 3 % size.width / 8 % 12;
        const std::size_t moved = picture.samples8[i] + random.below(grain);
        picture.samples8[i] = static_cast<std::uint8_t>(std::min<std::size_t>(255, moved));
    }
    return picture;
}

TEST(FlatAreas, AreThoseOfThePlainCount) {
    Random random(51);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    // Bands of 128 rows, and every size at which there is one more.
    for (const test_support::Size size : {test_support::Size{1, 1},
                                          {1, 9},
                                          {2, 40},
                                          {40, 2},
                                          {43, 127},
                                          {43, 128},
                                          {43, 129},
                                          {43, 133},
                                          {43, 257},
                                          {30, 400}}) {
        Picture picture = mottled(random, size);
        for (const bool holes : {false, true}) {
            if (holes) {
                picture.opaque = Samples<std::uint8_t>(picture.pixel_count());
                for (std::size_t i = 0; i < picture.opaque.size(); ++i) {
                    picture.opaque[i] = i / 11 % 5 == 0 ? 0 : 1;
                }
                if (picture.opaque.size() == 1) picture.opaque[0] = 1;
            }
            const ColourTable table = count_colours(picture, space);
            if (table.size() == 0) continue;
            for (const std::uint32_t stride : {1U, 2U}) {
                const PixelLab pixels(picture, table, space, stride);
                for (const double noise : {0.0, 0.39, 0.4, 1.1, 7.0}) {
                    if (pixels.width() == 1 && noise >= smoothing_from) continue;
                    SCOPED_TRACE(testing::Message() << size.width << " x " << size.height << ", "
                                                    << stride << ", " << noise << ", " << holes);
                    for (const bool few : {true, false}) {
                        const FlatColours flat = count_flat_colours(pixels, noise, few);
                        EXPECT_EQ(flat.exact, few && noise < smoothing_from);
                        ASSERT_EQ(as_map(flat.colours), plain_counts(pixels, noise, few));
                    }
                }
            }
        }
    }
}

// Noise throughout, so that every row of context that smoothing needs can be seen.
TEST(FlatAreas, BordersOfBandsHaveNoSay) {
    Random random(54);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    std::vector<std::uint16_t> samples;
    for (std::size_t i = 0; i < 3 * 400 * 270; ++i) {
        samples.push_back(static_cast<std::uint16_t>(std::lround(128 + 14 * random.bell())));
    }
    const Picture picture = picture_of(ColourModel::rgb, 8, 400, 270, samples);
    const ColourTable table = count_colours(picture, space);
    const PixelLab pixels(picture, table, space);
    for (const double noise : {3.5, 5.0}) {
        SCOPED_TRACE(noise);
        const Counts counts = as_map(count_flat_colours(pixels, noise, true).colours);
        EXPECT_GT(counts.size(), 10U);
        EXPECT_EQ(counts, plain_counts(pixels, noise, true));
    }
}

TEST(FlatAreas, ThreadsHaveNoSay) {
    Random random(52);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = mottled(random, {120, 900});
    const ColourTable table = count_colours(picture, space);
    const PixelLab pixels(picture, table, space);
    for (const double noise : {0.0, 1.5}) {
        set_thread_count(1);
        const Counts wanted = as_map(count_flat_colours(pixels, noise, true).colours);
        EXPECT_GT(wanted.size(), 100U);
        for (const int threads : {2, 3, 7}) {
            set_thread_count(threads);
            EXPECT_EQ(as_map(count_flat_colours(pixels, noise, true).colours), wanted);
        }
        set_thread_count(0);
    }
}

// Rows of 0 and 1 as pixels of white, black and, for 2, the grey between.
Counts counts_of_rows(const std::vector<std::string>& rows) {
    std::vector<std::uint16_t> samples;
    for (const std::string& row : rows) {
        for (const char pixel : row) {
            samples.push_back(pixel == '0' ? 255 : pixel == '1' ? 0 : 128);
        }
    }
    const Picture picture =
        picture_of(ColourModel::grey, 8, static_cast<std::uint32_t>(rows.front().size()),
                   static_cast<std::uint32_t>(rows.size()), samples);
    const ColourSpace space = ColourSpace::standard(ColourModel::grey);
    const ColourTable table = count_colours(picture, space);
    const Counts by_key =
        as_map(count_flat_colours(PixelLab(picture, table, space), 0, true).colours);
    Counts by_sample;
    for (std::size_t i = 0; i < table.size(); ++i) {
        const auto found =
            by_key.find(lab_key(lab_step(table.L[i]), lab_step(table.a[i]), lab_step(table.b[i])));
        if (found != by_key.end()) by_sample[table.key[i]] = found->second;
    }
    return by_sample;
}

TEST(FlatAreas, CountInsideAreasAndStrokesOfThree) {
    // Inside the square one; around it what is diagonal to a corner, and what is not beside it.
    EXPECT_EQ(counts_of_rows(
                  {"0000000", "0000000", "0011100", "0011100", "0011100", "0000000", "0000000"}),
              (Counts{{0, 1}, {255, 12}}));
    EXPECT_EQ(counts_of_rows({"0001110", "0001110", "0001110", "0001110"}),
              (Counts{{0, 2}, {255, 2}}));
    EXPECT_EQ(counts_of_rows({"0001100", "0001100", "0001100", "0001100"}), (Counts{{255, 2}}));
}

TEST(FlatAreas, DoNotCountTheBlendAlongAnEdge) {
    const std::string row = "00002111";
    EXPECT_EQ(counts_of_rows({row, row, row, row, row}), (Counts{{0, 3}, {255, 6}}));
}

TEST(LabKey, GoesThereAndBackInOrder) {
    Random random(53);
    const auto any = [&] {
        return static_cast<std::int16_t>(static_cast<int>(random.below(25'601)) - 12'800);
    };
    std::map<std::uint64_t, std::array<std::int16_t, 3>> labs;
    for (int i = 0; i < 2000; ++i) {
        const std::array<std::int16_t, 3> lab = {i % 7 == 0 ? no_lab : any(), any(), any()};
        const std::uint64_t key = lab_key(lab[0], lab[1], lab[2]);
        const LabSteps back = lab_of_key(key);
        EXPECT_EQ((std::array<std::int16_t, 3>{back.L, back.a, back.b}), lab);
        labs[key] = lab;
    }
    for (auto one = labs.begin(), two = std::next(one); two != labs.end(); ++one, ++two) {
        EXPECT_LT(one->second, two->second);
    }
}

}  // namespace
}  // namespace tincture
