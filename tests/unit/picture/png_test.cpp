#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <zlib.h>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;
using testing::IsEmpty;

Bytes big_endian(const std::vector<std::uint16_t>& values) {
    Bytes out;
    for (const std::uint16_t value : values) {
        out.push_back(static_cast<std::uint8_t>(value >> 8));
        out.push_back(static_cast<std::uint8_t>(value));
    }
    return out;
}

TEST(Png, RgbOf8Bits) {
    const Bytes pixels = noise(7 * 5 * 3);
    const Picture picture = read_bytes(encode_png({.width = 7, .height = 5}, pixels));
    EXPECT_EQ(picture.width, 7U);
    EXPECT_EQ(picture.height, 5U);
    EXPECT_EQ(picture.model, ColourModel::rgb);
    EXPECT_EQ(samples_of(picture), pixels);
    EXPECT_TRUE(picture.opaque.empty());
    EXPECT_TRUE(picture.icc.empty());
    EXPECT_FALSE(picture.resolution);
}

TEST(Png, RgbAndGreyOf16BitsStay16) {
    const auto rgb = noise16(6 * 4 * 3);
    const Picture colour =
        read_bytes(encode_png({.width = 6, .height = 4, .depth = 16}, big_endian(rgb)));
    EXPECT_EQ(samples16_of(colour), rgb);
    const auto grey = noise16(6 * 4);
    const Picture plain = read_bytes(encode_png(
        {.width = 6, .height = 4, .depth = 16, .type = PNG_COLOR_TYPE_GRAY}, big_endian(grey)));
    EXPECT_EQ(plain.model, ColourModel::grey);
    EXPECT_EQ(samples16_of(plain), grey);
}

TEST(Png, GreyOfFewBitsFillsTheRange) {
    const auto grey = [](int depth, const Bytes& row) {
        return samples_of(
            read_bytes(encode_png({.width = 5, .depth = depth, .type = PNG_COLOR_TYPE_GRAY}, row)));
    };
    EXPECT_EQ(grey(1, {0b10110000}), (Bytes{255, 0, 255, 255, 0}));
    EXPECT_EQ(grey(2, {0b00011011, 0b01000000}), (Bytes{0, 85, 170, 255, 85}));
    EXPECT_EQ(grey(4, {0x0F, 0x12, 0xE0}), (Bytes{0, 255, 17, 34, 238}));
    EXPECT_EQ(grey(8, {0, 1, 2, 254, 255}), (Bytes{0, 1, 2, 254, 255}));
}

TEST(Png, HalfAndMoreAlphaIsOpaque) {
    const Bytes rgba{1, 2, 3, 127, 4, 5, 6, 128, 7, 8, 9, 0, 10, 11, 12, 255};
    const Picture picture =
        read_bytes(encode_png({.width = 4, .type = PNG_COLOR_TYPE_RGB_ALPHA}, rgba));
    EXPECT_EQ(samples_of(picture), (Bytes{1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12}));
    EXPECT_EQ(opaque_of(picture), (Bytes{0, 1, 0, 1}));

    const Picture deep =
        read_bytes(encode_png({.width = 2, .depth = 16, .type = PNG_COLOR_TYPE_GRAY_ALPHA},
                              big_endian({500, 0x7FFF, 600, 0x8000})));
    EXPECT_EQ(samples16_of(deep), (std::vector<std::uint16_t>{500, 600}));
    EXPECT_EQ(opaque_of(deep), (Bytes{0, 1}));
}

TEST(Png, AlphaThatIsOpaqueEverywhereIsNoAlpha) {
    const Bytes grey_alpha{10, 255, 20, 200};
    const Picture picture =
        read_bytes(encode_png({.width = 2, .type = PNG_COLOR_TYPE_GRAY_ALPHA}, grey_alpha));
    EXPECT_EQ(samples_of(picture), (Bytes{10, 20}));
    EXPECT_TRUE(picture.opaque.empty());
}

TEST(Png, KeyColourIsTransparent) {
    const auto rgb_key = [](png_structp png, png_infop info) {
        png_color_16 key{0, 4, 5, 6, 0};
        png_set_tRNS(png, info, nullptr, 0, &key);
    };
    const Picture rgb =
        read_bytes(encode_png({.width = 2, .extras = rgb_key}, Bytes{1, 2, 3, 4, 5, 6}));
    EXPECT_EQ(opaque_of(rgb), (Bytes{1, 0}));

    const auto grey_key = [](png_structp png, png_infop info) {
        png_color_16 key{0, 0, 0, 0, 1};
        png_set_tRNS(png, info, nullptr, 0, &key);
    };
    const Picture grey = read_bytes(encode_png(
        {.width = 2, .depth = 2, .type = PNG_COLOR_TYPE_GRAY, .extras = grey_key}, {0b01100000}));
    EXPECT_EQ(samples_of(grey), (Bytes{85, 170}));
    EXPECT_EQ(opaque_of(grey), (Bytes{0, 1}));
}

// Three colours, the second half transparent.
void set_palette(png_structp png, png_infop info) {
    const png_color colours[] = {{255, 0, 0}, {0, 255, 0}, {1, 2, 3}};
    const png_byte alphas[] = {255, 127};
    png_set_PLTE(png, info, colours, 3);
    png_set_tRNS(png, info, alphas, 2, nullptr);
}

TEST(Png, PaletteBecomesRgb) {
    for (const auto& [depth, row] :
         {std::pair<int, Bytes>{2, {0b00011000}}, {4, {0x01, 0x20}}, {8, {0, 1, 2}}}) {
        const Picture picture = read_bytes(encode_png(
            {.width = 3, .depth = depth, .type = PNG_COLOR_TYPE_PALETTE, .extras = set_palette},
            row));
        EXPECT_EQ(picture.model, ColourModel::rgb);
        EXPECT_EQ(samples_of(picture), (Bytes{255, 0, 0, 0, 255, 0, 1, 2, 3}));
        EXPECT_EQ(opaque_of(picture), (Bytes{1, 0, 1}));
    }
}

TEST(Png, PaletteIndexBeyondThePaletteIsDamage) {
    const auto extras = [](png_structp png, png_infop info) {
        set_palette(png, info);
        png_set_benign_errors(png, 1);  // so that the test's own encoder lets it pass
        png_set_check_for_invalid_index(png, 0);
    };
    const Bytes file = encode_png(
        {.width = 2, .depth = 8, .type = PNG_COLOR_TYPE_PALETTE, .extras = extras}, {0, 3});
    EXPECT_THAT(error_of(file).what(), HasSubstr("damaged"));
}

TEST(Png, InterlacedIsTheSame) {
    const auto rgba = noise16(9 * 11 * 4);
    const PngSpec plain{.width = 9, .height = 11, .depth = 16, .type = PNG_COLOR_TYPE_RGB_ALPHA};
    PngSpec interlaced = plain;
    interlaced.interlace = PNG_INTERLACE_ADAM7;
    const Picture a = read_bytes(encode_png(plain, big_endian(rgba)));
    const Picture b = read_bytes(encode_png(interlaced, big_endian(rgba)));
    EXPECT_EQ(samples16_of(a), samples16_of(b));
    EXPECT_EQ(opaque_of(a), opaque_of(b));
    EXPECT_THAT(opaque_of(a), testing::Contains(0));

    const Bytes rgb = noise(9 * 11 * 3);
    const Bytes file =
        encode_png({.width = 9, .height = 11, .interlace = PNG_INTERLACE_ADAM7}, rgb);
    EXPECT_EQ(samples_of(read_bytes(file)), rgb);
}

TEST(Png, ResolutionInMetres) {
    const auto with = [](png_uint_32 x, png_uint_32 y, int unit) {
        return read_bytes(encode_png({.extras =
                                          [=](png_structp png, png_infop info) {
                                              png_set_pHYs(png, info, x, y, unit);
                                          }},
                                     Bytes(3)))
            .resolution;
    };
    const auto metres = with(11811, 2835, PNG_RESOLUTION_METER);
    ASSERT_TRUE(metres);
    EXPECT_NEAR(metres->x_dpi, 300, 0.001);
    EXPECT_NEAR(metres->y_dpi, 72, 0.01);
    EXPECT_FALSE(with(0, 2835, PNG_RESOLUTION_METER));
    EXPECT_FALSE(with(4, 3, PNG_RESOLUTION_UNKNOWN));
}

TEST(Png, ExifTurnsAndFillsIn) {
    const Bytes pixels{1, 2, 3, 4, 5, 6};
    const PngSpec spec{.width = 2, .raw_chunks = {{"eXIf", exif_block(6, 200, 100)}}};
    const Picture picture = read_bytes(encode_png(spec, pixels));
    EXPECT_EQ(picture.width, 1U);
    EXPECT_EQ(picture.height, 2U);
    ASSERT_TRUE(picture.resolution);
    EXPECT_EQ(picture.resolution->x_dpi, 100);  // the turn swaps them
    EXPECT_EQ(picture.resolution->y_dpi, 200);
}

Bytes profile_chunk(const Bytes& profile) {
    Bytes packed(compressBound(profile.size()));
    uLongf size = packed.size();
    EXPECT_EQ(compress(packed.data(), &size, profile.data(), profile.size()), Z_OK);
    packed.resize(size);
    return joined({text("any name"), Bytes{0, 0}, packed});
}

TEST(Png, ProfileComesAsItIsEvenIfItIsNone) {
    for (const std::size_t size : {std::size_t{1}, std::size_t{5000}, std::size_t{300'000}}) {
        const Bytes profile = noise(size);
        const PngSpec spec{.raw_chunks = {{"iCCP", profile_chunk(profile)}}};
        EXPECT_EQ(read_bytes(encode_png(spec, Bytes(3))).icc, profile);
    }
}

TEST(Png, ProfileThatCannotBeUnpackedIsDamage) {
    Bytes chunk = profile_chunk(noise(1000));
    chunk.resize(chunk.size() / 2);
    const PngSpec spec{.raw_chunks = {{"iCCP", chunk}}};
    EXPECT_THAT(error_of(encode_png(spec, Bytes(3))).what(), HasSubstr("colour profile"));
}

TEST(Png, GammaAndPrimariesOfSrgbNeedNoProfile) {
    const auto icc_with = [](const std::function<void(png_structp, png_infop)>& extras) {
        return read_bytes(encode_png({.extras = extras}, Bytes(3))).icc;
    };
    EXPECT_THAT(icc_with([](png_structp png, png_infop info) {
                    png_set_sRGB_gAMA_and_cHRM(png, info, PNG_sRGB_INTENT_PERCEPTUAL);
                }),
                IsEmpty());
    EXPECT_THAT(icc_with([](png_structp png, png_infop info) { png_set_gAMA(png, info, 0.45455); }),
                IsEmpty());
    const Bytes linear =
        icc_with([](png_structp png, png_infop info) { png_set_gAMA(png, info, 1.0); });
    EXPECT_GT(linear.size(), 128U);
    const Bytes wide = icc_with([](png_structp png, png_infop info) {
        png_set_gAMA(png, info, 0.45455);
        png_set_cHRM(png, info, 0.3127, 0.329, 0.68, 0.32, 0.265, 0.69, 0.15, 0.06);
    });
    EXPECT_GT(wide.size(), 128U);
    EXPECT_NE(wide, linear);
}

TEST(Png, CodesForColoursWinAndHighDynamicRangeIsRefused) {
    const auto file = [](Bytes codes) {
        const PngSpec spec{
            .raw_chunks = {{"iCCP", profile_chunk(text("ignored"))}, {"cICP", std::move(codes)}}};
        return encode_png(spec, Bytes(3));
    };
    EXPECT_THAT(read_bytes(file({1, 13, 0, 1})).icc, IsEmpty());
    EXPECT_GT(read_bytes(file({12, 13, 0, 1})).icc.size(), 128U);
    EXPECT_EQ(read_bytes(file({77, 13, 0, 1})).icc, text("ignored"));
    EXPECT_THAT(error_of(file({9, 16, 0, 1})).what(), HasSubstr("high-dynamic-range"));
}

TEST(Png, WrongChecksumIsDamage) {
    Bytes file = encode_png({.width = 7, .height = 5}, noise(7 * 5 * 3));
    file[29] ^= 1U;  // of the header
    EXPECT_THAT(error_of(file).what(), HasSubstr("is damaged: a PNG"));
}

// All pixels are there, but what turns the picture may have been behind them.
TEST(Png, WithoutItsEndIsCutShort) {
    Bytes file = encode_png({.width = 7, .height = 5}, noise(7 * 5 * 3));
    file.resize(file.size() - 12);
    EXPECT_THAT(error_of(file).what(), HasSubstr("behind its pixels"));
}

TEST(Png, SaysWhereItWasCut) {
    Bytes file = encode_png({.width = 64, .height = 64}, noise(64 * 64 * 3));
    file.resize(file.size() / 2);
    const std::string message = error_of(file).what();
    EXPECT_THAT(message, HasSubstr("is cut short: a PNG that ends after " +
                                   std::to_string(file.size()) + " bytes, at row"));
    EXPECT_THAT(message, HasSubstr("of 64; copy or export it again"));
}

}  // namespace
}  // namespace tincture
