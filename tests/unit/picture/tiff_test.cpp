#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;

constexpr std::uint32_t width = 19;
constexpr std::uint32_t height = 13;
constexpr std::size_t count = std::size_t{width} * height;

TiffSpec rgb_spec() {
    return {.width = width, .height = height};
}
TiffSpec grey_spec(int bits, int photometric = PHOTOMETRIC_MINISBLACK) {
    return {
        .width = width, .height = height, .bits = bits, .channels = 1, .photometric = photometric};
}

// Samples of one pixel side by side as planes.
template <typename T>
std::vector<T> planes_of(const std::vector<T>& samples, std::size_t channels) {
    std::vector<T> out;
    for (std::size_t c = 0; c < channels; ++c) {
        for (std::size_t i = c; i < samples.size(); i += channels) out.push_back(samples[i]);
    }
    return out;
}

void set_extra(TIFF* tiff, std::uint16_t kind) {
    TIFFSetField(tiff, TIFFTAG_EXTRASAMPLES, 1, &kind);
}

TEST(Tiff, RgbInEveryLosslessCompression) {
    const Bytes pixels = noise(count * 3);
    for (const int compression : {COMPRESSION_NONE, COMPRESSION_LZW, COMPRESSION_ADOBE_DEFLATE,
                                  COMPRESSION_PACKBITS, COMPRESSION_ZSTD, COMPRESSION_LZMA}) {
        TiffSpec spec = rgb_spec();
        spec.compression = compression;
        const Picture picture = read_bytes(encode_tiff(spec, pixels));
        EXPECT_EQ(samples_of(picture), pixels) << compression;
        EXPECT_EQ(picture.model, ColourModel::rgb);
        EXPECT_TRUE(picture.opaque.empty());
        EXPECT_FALSE(picture.resolution);
    }
}

TEST(Tiff, SixteenBitsInBothByteOrdersAndBigTiff) {
    const auto pixels = noise16(count * 3);
    for (const char* mode : {"wl", "wb", "wl8", "wb8"}) {
        TiffSpec spec = rgb_spec();
        spec.bits = 16;
        spec.mode = mode;
        spec.compression = COMPRESSION_LZW;
        spec.tags = [](TIFF* tiff) { TIFFSetField(tiff, TIFFTAG_PREDICTOR, 2); };
        EXPECT_EQ(samples16_of(read_bytes(encode_tiff(spec, bytes_of(pixels)))), pixels) << mode;
    }
    const auto grey = noise16(count);
    EXPECT_EQ(samples16_of(read_bytes(encode_tiff(grey_spec(16), bytes_of(grey)))), grey);
}

TEST(Tiff, GreyOfFewBitsFillsTheRangeInBothDirections) {
    const auto read_row = [](int bits, int photometric, const Bytes& row) {
        TiffSpec spec = grey_spec(bits, photometric);
        spec.width = 5;
        spec.height = 1;
        return samples_of(read_bytes(encode_tiff(spec, row)));
    };
    const int black = PHOTOMETRIC_MINISBLACK;
    const int white = PHOTOMETRIC_MINISWHITE;
    EXPECT_EQ(read_row(1, black, {0b10110000}), (Bytes{255, 0, 255, 255, 0}));
    EXPECT_EQ(read_row(1, white, {0b10110000}), (Bytes{0, 255, 0, 0, 255}));
    EXPECT_EQ(read_row(2, black, {0b00011011, 0b01000000}), (Bytes{0, 85, 170, 255, 85}));
    EXPECT_EQ(read_row(4, white, {0x0F, 0x12, 0xE0}), (Bytes{255, 0, 238, 221, 17}));
    EXPECT_EQ(read_row(8, white, {0, 1, 2, 254, 255}), (Bytes{255, 254, 253, 1, 0}));
    TiffSpec deep = grey_spec(16, white);
    deep.width = 2;
    deep.height = 1;
    EXPECT_EQ(samples16_of(read_bytes(encode_tiff(deep, bytes_of({0, 1000})))),
              (std::vector<std::uint16_t>{65535, 64535}));
}

TEST(Tiff, FaxOfBothKinds) {
    for (const int compression :
         {COMPRESSION_CCITTFAX3, COMPRESSION_CCITTFAX4, COMPRESSION_CCITTRLE}) {
        TiffSpec spec = grey_spec(1, PHOTOMETRIC_MINISWHITE);
        spec.compression = compression;
        const Bytes rows = noise((width + 7) / 8 * height);
        const Bytes samples = samples_of(read_bytes(encode_tiff(spec, rows)));
        for (std::size_t i = 0; i < samples.size(); ++i) {
            const std::size_t x = i % width;
            const bool bit = rows[i / width * ((width + 7) / 8) + x / 8] >> (7 - x % 8) & 1;
            ASSERT_EQ(samples[i], bit ? 0 : 255) << compression << " pixel " << i;
        }
    }
}

TEST(Tiff, PaletteOfEightAndSixteenBits) {
    for (const int scale : {1, 256, 257}) {
        for (const int bits : {4, 8}) {
            TiffSpec spec = grey_spec(bits, PHOTOMETRIC_PALETTE);
            spec.width = 3;
            spec.height = 1;
            spec.tags = [&](TIFF* tiff) {
                std::vector<std::uint16_t> map(std::size_t{1} << bits);
                for (std::size_t i = 0; i < map.size(); ++i) {
                    map[i] =
                        static_cast<std::uint16_t>(i * 15 % 256 * static_cast<unsigned>(scale));
                }
                std::vector<std::uint16_t> none(map.size());
                TIFFSetField(tiff, TIFFTAG_COLORMAP, map.data(), none.data(), map.data());
            };
            const Bytes row = bits == 4 ? Bytes{0x0F, 0x50} : Bytes{0, 15, 5};
            const Picture picture = read_bytes(encode_tiff(spec, row));
            EXPECT_EQ(picture.model, ColourModel::rgb);
            EXPECT_EQ(samples_of(picture), (Bytes{0, 0, 0, 225, 0, 225, 75, 0, 75})) << scale;
        }
    }
}

TEST(Tiff, CmykOf8And16Bits) {
    TiffSpec spec{.width = width, .height = height, .channels = 4};
    spec.photometric = PHOTOMETRIC_SEPARATED;
    const Bytes inks = noise(count * 4);
    const Picture picture = read_bytes(encode_tiff(spec, inks));
    EXPECT_EQ(picture.model, ColourModel::cmyk);
    EXPECT_EQ(samples_of(picture), inks);
    spec.bits = 16;
    const auto deep = noise16(count * 4);
    EXPECT_EQ(samples16_of(read_bytes(encode_tiff(spec, bytes_of(deep)))), deep);
    spec.planes = PLANARCONFIG_SEPARATE;
    EXPECT_EQ(samples16_of(read_bytes(encode_tiff(spec, bytes_of(planes_of(deep, 4))))), deep);
}

TEST(Tiff, AlphaApartAndPremultiplied) {
    TiffSpec spec = rgb_spec();
    spec.width = 4;
    spec.height = 1;
    spec.channels = 4;
    spec.tags = [](TIFF* tiff) { set_extra(tiff, EXTRASAMPLE_UNASSALPHA); };
    const Bytes apart{1, 2, 3, 127, 4, 5, 6, 128, 7, 8, 9, 0, 10, 11, 12, 255};
    const Bytes colours{1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12};
    for (const int planes : {PLANARCONFIG_CONTIG, PLANARCONFIG_SEPARATE}) {
        spec.planes = planes;
        const Picture picture = read_bytes(
            encode_tiff(spec, planes == PLANARCONFIG_SEPARATE ? planes_of(apart, 4) : apart));
        EXPECT_EQ(samples_of(picture), colours);
        EXPECT_EQ(opaque_of(picture), (Bytes{0, 1, 0, 1}));
    }

    spec.tags = [](TIFF* tiff) { set_extra(tiff, EXTRASAMPLE_ASSOCALPHA); };
    // 200 * 51 / 255 = 40; 0 stays 0; what exceeds its alpha is full.
    const Bytes together{40, 0, 51, 51, 100, 150, 200, 255, 9, 9, 9, 0, 64, 128, 200, 128};
    for (const int planes : {PLANARCONFIG_CONTIG, PLANARCONFIG_SEPARATE}) {
        spec.planes = planes;
        const Picture picture = read_bytes(
            encode_tiff(spec, planes == PLANARCONFIG_SEPARATE ? planes_of(together, 4) : together));
        EXPECT_EQ(samples_of(picture), (Bytes{200, 0, 255, 100, 150, 200, 0, 0, 0, 128, 255, 255}));
        EXPECT_EQ(opaque_of(picture), (Bytes{0, 1, 0, 1}));
    }
}

TEST(Tiff, ExtraSampleWithoutMeaningIsLeftOut) {
    TiffSpec spec = rgb_spec();
    spec.channels = 4;
    spec.tags = [](TIFF* tiff) { set_extra(tiff, EXTRASAMPLE_UNSPECIFIED); };
    const Bytes pixels = noise(count * 4);
    Bytes colours;
    for (std::size_t i = 0; i < pixels.size(); ++i) {
        if (i % 4 != 3) colours.push_back(pixels[i]);
    }
    const Picture picture = read_bytes(encode_tiff(spec, pixels));
    EXPECT_EQ(samples_of(picture), colours);
    EXPECT_TRUE(picture.opaque.empty());
}

TEST(Tiff, TilesAreTheSameAsStrips) {
    const Bytes pixels = noise(count * 3);
    constexpr std::uint32_t side = 16;
    for (const int planes : {PLANARCONFIG_CONTIG, PLANARCONFIG_SEPARATE}) {
        const std::size_t channels = planes == PLANARCONFIG_CONTIG ? 3 : 1;
        const Bytes source = channels == 3 ? pixels : planes_of(pixels, 3);
        TiffSpec spec = rgb_spec();
        spec.planes = planes;
        spec.compression = COMPRESSION_ADOBE_DEFLATE;
        spec.tags = [](TIFF* tiff) {
            TIFFSetField(tiff, TIFFTAG_TILEWIDTH, side);
            TIFFSetField(tiff, TIFFTAG_TILELENGTH, side);
        };
        spec.pixels = [&](TIFF* tiff) {
            for (std::size_t plane = 0; plane < 3 / channels; ++plane) {
                for (std::uint32_t tile = 0; tile < 2; ++tile) {
                    Bytes data(side * side * channels);
                    for (std::size_t y = 0; y < height; ++y) {
                        for (std::size_t x = 0; x < side && tile * side + x < width; ++x) {
                            for (std::size_t c = 0; c < channels; ++c) {
                                data[(y * side + x) * channels + c] =
                                    source[plane * count +
                                           (y * width + tile * side + x) * channels + c];
                            }
                        }
                    }
                    TIFFWriteTile(tiff, data.data(), tile * side, 0, 0,
                                  static_cast<std::uint16_t>(plane));
                }
            }
        };
        EXPECT_EQ(samples_of(read_bytes(encode_tiff(spec, {}))), pixels) << planes;
    }
}

TEST(Tiff, JpegInside) {
    for (const int photometric : {PHOTOMETRIC_YCBCR, PHOTOMETRIC_RGB}) {
        TiffSpec spec{.width = 48, .height = 32};
        spec.photometric = photometric;
        spec.compression = COMPRESSION_JPEG;
        spec.tags = [&](TIFF* tiff) {
            TIFFSetField(tiff, TIFFTAG_ROWSPERSTRIP, 16);
            TIFFSetField(tiff, TIFFTAG_JPEGQUALITY, 95);
            if (photometric == PHOTOMETRIC_YCBCR) {
                TIFFSetField(tiff, TIFFTAG_JPEGCOLORMODE, JPEGCOLORMODE_RGB);
            }
        };
        const Bytes pixels = smooth(48, 32, 3);
        const Bytes got = samples_of(read_bytes(encode_tiff(spec, pixels)));
        ASSERT_EQ(got.size(), pixels.size());
        int most = 0;
        for (std::size_t i = 0; i < got.size(); ++i) {
            most = std::max(most, std::abs(got[i] - pixels[i]));
        }
        EXPECT_LE(most, 24) << photometric;
    }
}

TEST(Tiff, ResolutionOrientationAndProfile) {
    const Bytes profile = noise(700);
    const auto read_with = [&](int unit, float x, float y, int orientation) {
        TiffSpec spec = rgb_spec();
        spec.tags = [&](TIFF* tiff) {
            TIFFSetField(tiff, TIFFTAG_RESOLUTIONUNIT, unit);
            TIFFSetField(tiff, TIFFTAG_XRESOLUTION, static_cast<double>(x));
            TIFFSetField(tiff, TIFFTAG_YRESOLUTION, static_cast<double>(y));
            TIFFSetField(tiff, TIFFTAG_ORIENTATION, orientation);
            TIFFSetField(tiff, TIFFTAG_ICCPROFILE, static_cast<std::uint32_t>(profile.size()),
                         profile.data());
        };
        return read_bytes(encode_tiff(spec, noise(count * 3)));
    };
    const Picture turned = read_with(RESUNIT_INCH, 300, 200, ORIENTATION_RIGHTTOP);
    EXPECT_EQ(turned.width, height);
    EXPECT_EQ(turned.height, width);
    EXPECT_EQ(turned.icc, profile);
    ASSERT_TRUE(turned.resolution);
    EXPECT_EQ(turned.resolution->x_dpi, 200);
    EXPECT_EQ(turned.resolution->y_dpi, 300);
    const auto metric = read_with(RESUNIT_CENTIMETER, 100, 50, ORIENTATION_TOPLEFT).resolution;
    ASSERT_TRUE(metric);
    EXPECT_EQ(metric->x_dpi, 254);
    EXPECT_FALSE(read_with(RESUNIT_NONE, 300, 300, ORIENTATION_TOPLEFT).resolution);
    EXPECT_FALSE(read_with(RESUNIT_INCH, 0, 300, ORIENTATION_TOPLEFT).resolution);
}

}  // namespace
}  // namespace tincture
