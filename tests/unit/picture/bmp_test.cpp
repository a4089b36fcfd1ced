#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;

struct BmpSpec {
    int width = 1;
    int height = 1;  // negative: rows from the top
    unsigned bits = 24;
    unsigned compression = 0;
    unsigned header = 40;
    unsigned x_per_metre = 0;
    unsigned y_per_metre = 0;
    unsigned colours = 0;
    Bytes behind = {};  // the fields at the end of the header, masks or the palette
    Bytes after = {};   // behind the pixels
};

Bytes make_bmp(const BmpSpec& spec, const Bytes& pixels) {
    const auto width = static_cast<std::uint64_t>(spec.width);
    const auto height = static_cast<std::uint64_t>(static_cast<std::uint32_t>(spec.height));
    Bytes header = joined({little(spec.header, 4)});
    if (spec.header == 12) {
        header = joined(
            {header, little(width, 2), little(height, 2), little(1, 2), little(spec.bits, 2)});
    } else {
        header =
            joined({header, little(width, 4), little(height, 4), little(1, 2), little(spec.bits, 2),
                    little(spec.compression, 4), little(0, 4), little(spec.x_per_metre, 4),
                    little(spec.y_per_metre, 4), little(spec.colours, 4), little(0, 4)});
    }
    const std::size_t start = 14 + header.size() + spec.behind.size();
    return joined({text("BM"), little(start + pixels.size(), 4), little(0, 4), little(start, 4),
                   header, spec.behind, pixels, spec.after});
}

TEST(Bmp, TrueColourFromBothEnds) {
    // Two rows of two pixels in blue, green, red order, padded to 8 bytes.
    const Bytes rows{3, 2, 1, 6, 5, 4, 0, 0, 9, 8, 7, 12, 11, 10, 0, 0};
    const Bytes from_top{1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12};
    const Bytes from_bottom{7, 8, 9, 10, 11, 12, 1, 2, 3, 4, 5, 6};
    const Picture picture = read_bytes(make_bmp({.width = 2, .height = 2}, rows));
    EXPECT_EQ(picture.model, ColourModel::rgb);
    EXPECT_EQ(samples_of(picture), from_bottom);
    EXPECT_EQ(samples_of(read_bytes(make_bmp({.width = 2, .height = -2}, rows))), from_top);
    Bytes without_last_padding = rows;
    without_last_padding.resize(14);
    EXPECT_EQ(samples_of(read_bytes(make_bmp({.width = 2, .height = 2}, without_last_padding))),
              from_bottom);
}

TEST(Bmp, PalettesOf1And4And8Bits) {
    const Bytes red_green{0, 0, 255, 0, 0, 255, 0, 0};  // blue, green, red, reserved
    const Bytes expected{255, 0, 0, 0, 255, 0, 0, 255, 0};
    const auto samples = [&](unsigned bits, unsigned colours, const Bytes& row) {
        return samples_of(read_bytes(
            make_bmp({.width = 3, .bits = bits, .colours = colours, .behind = red_green}, row)));
    };
    EXPECT_EQ(samples(1, 0, {0b01100000, 0, 0, 0}), expected);
    EXPECT_EQ(samples(4, 2, {0x01, 0x10, 0, 0}), expected);
    EXPECT_EQ(samples(8, 2, {0, 1, 1, 0}), expected);
    const Bytes old{0, 0, 255, 0, 255, 0};
    EXPECT_EQ(samples_of(read_bytes(
                  make_bmp({.width = 3, .bits = 8, .header = 12, .behind = old}, {0, 1, 1, 0}))),
              expected);
}

TEST(Bmp, IndexBeyondThePaletteIsDamage) {
    const Bytes two(8);
    const Bytes file = make_bmp({.width = 3, .bits = 8, .colours = 2, .behind = two}, {0, 1, 2, 0});
    EXPECT_THAT(error_of(file).what(), HasSubstr("is damaged"));
}

TEST(Bmp, FieldsOf16And32Bits) {
    const Bytes five{0x1F, 0x7C, 0xE0, 0x03};  // red and blue full, then green full
    EXPECT_EQ(samples_of(read_bytes(make_bmp({.width = 2, .bits = 16}, five))),
              (Bytes{255, 0, 255, 0, 255, 0}));
    const Bytes masks565 = joined({little(0xF800, 4), little(0x07E0, 4), little(0x001F, 4)});
    EXPECT_EQ(samples_of(read_bytes(
                  make_bmp({.width = 2, .bits = 16, .compression = 3, .behind = masks565},
                           joined({little(0x8000, 2), little(32 << 5, 2)})))),
              (Bytes{132, 0, 0, 0, 130, 0}));  // 16 of 31 and 32 of 63
    const Bytes masks10 =
        joined({little(0x3FF00000, 4), little(0x000FFC00, 4), little(0x000003FF, 4)});
    EXPECT_EQ(samples_of(
                  read_bytes(make_bmp({.width = 1, .bits = 32, .compression = 3, .behind = masks10},
                                      little(0x3FF00000 | 512 << 10, 4)))),
              (Bytes{255, 128, 0}));
}

TEST(Bmp, AlphaUnlessItIsZeroEverywhere) {
    const auto read_pixels = [](std::uint32_t a, std::uint32_t b) {
        return read_bytes(make_bmp({.width = 2, .bits = 32}, joined({little(a, 4), little(b, 4)})));
    };
    const Picture some = read_pixels(0x80010203, 0x7F040506);
    EXPECT_EQ(samples_of(some), (Bytes{1, 2, 3, 4, 5, 6}));
    EXPECT_EQ(opaque_of(some), (Bytes{1, 0}));
    EXPECT_TRUE(read_pixels(0x00010203, 0x00040506).opaque.empty());
    EXPECT_TRUE(read_pixels(0xFF010203, 0xFF040506).opaque.empty());
}

TEST(Bmp, ResolutionPerMetre) {
    const auto with = [](unsigned x, unsigned y) {
        return read_bytes(make_bmp({.x_per_metre = x, .y_per_metre = y}, Bytes(4))).resolution;
    };
    ASSERT_TRUE(with(11811, 2835));
    EXPECT_NEAR(with(11811, 2835)->x_dpi, 300, 0.001);
    EXPECT_NEAR(with(11811, 2835)->y_dpi, 72, 0.01);
    EXPECT_FALSE(with(0, 0));
    EXPECT_FALSE(with(0xFFFFFFFF, 2835));
}

TEST(Bmp, ProfileInTheLongHeader) {
    const Bytes profile = noise(77);
    Bytes fields(84);
    const auto put = [&](std::size_t at, std::uint64_t value) {
        const Bytes bytes = little(value, 4);
        std::copy(bytes.begin(), bytes.end(), fields.begin() + static_cast<std::ptrdiff_t>(at));
    };
    put(16, 0x4D424544);  // "MBED"
    put(72, 124 + 4);
    put(76, profile.size());
    const Bytes file = make_bmp({.header = 124, .behind = fields, .after = profile}, Bytes(4));
    EXPECT_EQ(read_bytes(file).icc, profile);
    Bytes cut = file;
    cut.pop_back();
    EXPECT_THAT(error_of(cut).what(), HasSubstr("colour profile"));
}

TEST(Bmp, RefusedKinds) {
    const Bytes palette(1024);
    for (const unsigned compression : {1U, 2U}) {
        EXPECT_THAT(error_of(make_bmp({.bits = compression == 1 ? 8U : 4U,
                                       .compression = compression,
                                       .behind = palette},
                                      Bytes(4)))
                        .what(),
                    HasSubstr("run-length coded BMP"));
    }
    EXPECT_THAT(error_of(make_bmp({.bits = 24, .compression = 4}, Bytes(4))).what(),
                HasSubstr("rare compression"));
    EXPECT_THAT(error_of(make_bmp({.bits = 7}, Bytes(4))).what(), HasSubstr("7 bits"));
    EXPECT_THAT(error_of(make_bmp({.width = -1}, Bytes(4))).what(), HasSubstr("negative width"));
    EXPECT_THAT(error_of(make_bmp({.height = 0}, Bytes(4))).what(), HasSubstr("no pixels"));
    const Bytes masks = joined({little(0xF0F, 4), little(0x07E0, 4), little(0x001F, 4)});
    EXPECT_THAT(
        error_of(make_bmp({.bits = 16, .compression = 3, .behind = masks}, Bytes(4))).what(),
        HasSubstr("channels"));
}

TEST(Bmp, SaysHowManyBytesAreMissing) {
    Bytes file = make_bmp({.width = 20, .height = 20}, Bytes(1200));
    file.resize(700);
    EXPECT_THAT(error_of(file).what(),
                HasSubstr("is cut short: a BMP that ends after 700 bytes of 1254"));
    EXPECT_EQ(error_of(make_bmp({.width = 100'000, .height = 100'000}, Bytes(4))).kind(),
              ErrorKind::limit);
}

}  // namespace
}  // namespace tincture
