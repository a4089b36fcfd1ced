#include "histogram/pixel_lab.h"

#include <gtest/gtest.h>

#include "support/parallel.h"
#include "tests/support/pictures.h"
#include "tests/support/profiles.h"

namespace tincture {
namespace {

using test_support::Random;

ColourSpace space_of(ColourModel model) {
    return model == ColourModel::cmyk
               ? ColourSpace::from_icc(test_support::cmyk_profile(), model, "")
               : ColourSpace::standard(model);
}

// Pixel by pixel through the profile; L of what is not opaque is no_lab, a and b are not said.
void expect_pixels(const Picture& picture, const ColourSpace& space, const LabBand& band,
                   std::uint32_t stride) {
    const auto channels = static_cast<std::size_t>(channel_count(picture.model));
    ASSERT_EQ(band.width, (picture.width + stride - 1) / stride);
    ASSERT_EQ(band.L.size(), std::size_t{band.width} * band.rows);
    ASSERT_EQ(band.a.size(), band.L.size());
    ASSERT_EQ(band.b.size(), band.L.size());
    for (std::size_t i = 0; i < band.L.size(); ++i) {
        const std::size_t x = i % band.width * stride;
        const std::size_t y = (i / band.width + band.first_row) * stride;
        ASSERT_LT(y, picture.height);
        const std::size_t pixel = y * picture.width + x;
        if (!test_support::is_opaque(picture, pixel)) {
            ASSERT_EQ(band.L[i], no_lab);
            continue;
        }
        std::vector<float> device;
        for (std::size_t c = 0; c < channels; ++c) {
            const std::uint16_t sample = test_support::sample_at(picture, pixel * channels + c);
            device.push_back(static_cast<float>(sample / full_scale(picture.bits)));
        }
        float lab[3];
        space.to_lab(device.data(), 1, {lab, lab + 1, lab + 2});
        ASSERT_EQ(band.L[i], lab_step(lab[0]));
        ASSERT_EQ(band.a[i], lab_step(lab[1]));
        ASSERT_EQ(band.b[i], lab_step(lab[2]));
    }
}

// All rows at once, then some at a time into one band.
void check_reading(const Picture& picture, const ColourTable& table, const ColourSpace& space) {
    for (const std::uint32_t stride : {1U, 2U, 3U}) {
        SCOPED_TRACE(stride);
        const PixelLab pixels(picture, table, space, stride);
        EXPECT_EQ(pixels.width(), (picture.width + stride - 1) / stride);
        EXPECT_EQ(pixels.height(), (picture.height + stride - 1) / stride);
        EXPECT_EQ(&pixels.picture(), &picture);
        LabBand band;
        pixels.read(0, pixels.height(), band);
        EXPECT_EQ(band.rows, pixels.height());
        expect_pixels(picture, space, band, stride);
        for (std::uint32_t first = 0; first < pixels.height(); first += 4) {
            const std::uint32_t rows = std::min(4U, pixels.height() - first);
            pixels.read(first, rows, band);
            EXPECT_EQ(band.first_row, first);
            EXPECT_EQ(band.rows, rows);
            expect_pixels(picture, space, band, stride);
        }
    }
}

TEST(PixelLab, IsLabOfEachPixel) {
    Random random(81);
    for (const ColourModel model : {ColourModel::grey, ColourModel::rgb, ColourModel::cmyk}) {
        const ColourSpace space = space_of(model);
        for (const int bits : {8, 16}) {
            for (const test_support::Size size :
                 {test_support::Size{1, 1}, {2, 1}, {1, 4}, {31, 22}, {30, 21}}) {
                for (const std::size_t levels : {2U, 65536U}) {
                    SCOPED_TRACE(testing::Message()
                                 << channel_count(model) << " channels, " << bits << " bits, "
                                 << size.width << " x " << size.height);
                    Picture picture =
                        test_support::noise_picture(random, model, bits, size, levels);
                    check_reading(picture, count_colours(picture, space), space);
                    if (picture.pixel_count() < 100) continue;
                    test_support::punch_holes(picture, random);
                    check_reading(picture, count_colours(picture, space), space);
                }
            }
        }
    }
}

// Too many colours to list: pixels come through the profile, not from their cells.
TEST(PixelLab, IsLabOfEachPixelWhereThereAreOnlyCells) {
    Random random(82);
    for (const ColourModel model : {ColourModel::grey, ColourModel::rgb, ColourModel::cmyk}) {
        const ColourSpace space = space_of(model);
        for (const int bits : {8, 16}) {
            SCOPED_TRACE(testing::Message() << channel_count(model) << ", " << bits);
            Picture picture = test_support::noise_picture(random, model, bits, {31, 22}, 65536);
            test_support::punch_holes(picture, random);
            const ColourTable table = count_colours(picture, space, 20);
            ASSERT_GT(table.cell_de, 0);
            check_reading(picture, table, space);
        }
    }
}

TEST(PixelLab, IsThatOfOneColour) {
    Random random(83);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = test_support::noise_picture(random, ColourModel::rgb, 8, {40, 1}, 256);
    const ColourTable table = count_colours(picture, space);
    LabBand band;
    PixelLab(picture, table, space).read(0, 1, band);
    for (std::size_t i = 0; i < 40; ++i) {
        const Lab lab = space.lab_of(
            {picture.samples8[3 * i], picture.samples8[3 * i + 1], picture.samples8[3 * i + 2]});
        EXPECT_NEAR(band.L[i], lab.L * lab_band_steps, 0.5);
        EXPECT_NEAR(band.a[i], lab.a * lab_band_steps, 0.5);
        EXPECT_NEAR(band.b[i], lab.b * lab_band_steps, 0.5);
    }
}

// Full ink of 16 bits has the key with all bits set.
TEST(PixelLab, KnowsFullInk) {
    const ColourSpace space = space_of(ColourModel::cmyk);
    const std::uint16_t full = 65535;
    const Picture picture = test_support::picture_of(
        ColourModel::cmyk, 16, 3, 1, {full, full, full, full, 0, 0, 0, 0, full, full, full, full});
    check_reading(picture, count_colours(picture, space), space);
}

TEST(PixelLab, MayBeReadByManyThreads) {
    Random random(84);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const Picture picture = test_support::photograph_like(random, 8, {64, 96});
    for (const std::size_t limit : {max_exact_colours, std::size_t{20}}) {
        const ColourTable table = count_colours(picture, space, limit);
        const PixelLab pixels(picture, table, space);
        LabBand whole;
        pixels.read(0, 96, whole);
        for (const int threads : {1, 2, 3, 7}) {
            set_thread_count(threads);
            std::vector<LabBand> bands(24);
            parallel_for(bands.size(), [&](std::size_t i) {
                pixels.read(static_cast<std::uint32_t>(4 * i), 4, bands[i]);
            });
            std::vector<std::int16_t> L;
            for (const LabBand& band : bands) L.insert(L.end(), band.L.begin(), band.L.end());
            EXPECT_EQ(L, whole.L);
        }
        set_thread_count(0);
    }
}

TEST(LabStep, RoundsAndKeepsWithinBounds) {
    EXPECT_EQ(lab_step(0), 0);
    EXPECT_EQ(lab_step(50), 3200);
    EXPECT_EQ(lab_step(-1.01F), -65);
    EXPECT_EQ(lab_step(1.01F), 65);
    EXPECT_EQ(lab_step(199.9999F), 12'800);
    EXPECT_EQ(lab_step(1e6F), 12'800);
    EXPECT_EQ(lab_step(-1e6F), no_lab);
}

}  // namespace
}  // namespace tincture
