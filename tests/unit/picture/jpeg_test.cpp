#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;

constexpr std::uint32_t width = 45;
constexpr std::uint32_t height = 37;

JpegSpec grey_spec() {
    return {.width = width, .height = height, .space = JCS_GRAYSCALE, .channels = 1};
}
JpegSpec rgb_spec() {
    return {.width = width, .height = height};
}

// Largest difference of two pictures in one sample.
int difference(const Bytes& a, const Bytes& b) {
    EXPECT_EQ(a.size(), b.size());
    int most = 0;
    for (std::size_t i = 0; i < std::min(a.size(), b.size()); ++i) {
        most = std::max(most, std::abs(a[i] - b[i]));
    }
    return most;
}

TEST(Jpeg, YCbCrIsWhatPlainLibjpegMakesOfIt) {
    const Bytes pixels = smooth(width, height, 3);
    const Bytes file = encode_jpeg(rgb_spec(), pixels);
    const Picture picture = read_bytes(file);
    EXPECT_EQ(picture.width, width);
    EXPECT_EQ(picture.height, height);
    EXPECT_EQ(picture.model, ColourModel::rgb);
    EXPECT_EQ(samples_of(picture), plain_jpeg_decode(file, JCS_RGB));
    EXPECT_LE(difference(samples_of(picture), pixels), 24);
    EXPECT_TRUE(picture.opaque.empty());
}

TEST(Jpeg, GreyAndUnconvertedRgb) {
    const Bytes grey = smooth(width, height, 1);
    const Picture plain = read_bytes(encode_jpeg(grey_spec(), grey));
    EXPECT_EQ(plain.model, ColourModel::grey);
    EXPECT_LE(difference(samples_of(plain), grey), 6);

    JpegSpec spec = rgb_spec();
    spec.setup = [](j_compress_ptr jpeg) { jpeg_set_colorspace(jpeg, JCS_RGB); };
    const Bytes pixels = smooth(width, height, 3);
    const Picture rgb = read_bytes(encode_jpeg(spec, pixels));
    EXPECT_LE(difference(samples_of(rgb), pixels), 6);
}

TEST(Jpeg, ProgressiveAndArithmeticAreTheSame) {
    const Bytes pixels = smooth(width, height, 3);
    const Bytes baseline = samples_of(read_bytes(encode_jpeg(rgb_spec(), pixels)));
    JpegSpec progressive = rgb_spec();
    progressive.setup = [](j_compress_ptr jpeg) { jpeg_simple_progression(jpeg); };
    EXPECT_EQ(samples_of(read_bytes(encode_jpeg(progressive, pixels))), baseline);
    JpegSpec arithmetic = rgb_spec();
    arithmetic.setup = [](j_compress_ptr jpeg) { jpeg->arith_code = TRUE; };
    EXPECT_EQ(samples_of(read_bytes(encode_jpeg(arithmetic, pixels))), baseline);
}

// libjpeg writes the Adobe marker with both, and Adobe's inks are inverted.
TEST(Jpeg, AdobeCmykAndYcckHave0ForNoInk) {
    const Bytes inks = smooth(width, height, 4);
    Bytes inverted = inks;
    for (auto& value : inverted) value = static_cast<std::uint8_t>(255 - value);
    for (const J_COLOR_SPACE stored : {JCS_CMYK, JCS_YCCK}) {
        JpegSpec spec{.width = width, .height = height, .space = JCS_CMYK, .channels = 4};
        spec.setup = [stored](j_compress_ptr jpeg) { jpeg_set_colorspace(jpeg, stored); };
        const Picture picture = read_bytes(encode_jpeg(spec, inverted));
        EXPECT_EQ(picture.model, ColourModel::cmyk);
        EXPECT_LE(difference(samples_of(picture), inks), 24);
    }
}

TEST(Jpeg, CmykWithoutAdobeMarkerIsTakenAsItIs) {
    const Bytes inks = smooth(width, height, 4);
    JpegSpec spec{.width = width, .height = height, .space = JCS_CMYK, .channels = 4};
    spec.setup = [](j_compress_ptr jpeg) {
        jpeg_set_colorspace(jpeg, JCS_CMYK);
        jpeg->write_Adobe_marker = FALSE;
    };
    EXPECT_LE(difference(samples_of(read_bytes(encode_jpeg(spec, inks))), inks), 6);
}

TEST(Jpeg, DensityPerInchAndPerCentimetre) {
    const auto with = [](int unit, unsigned x, unsigned y) {
        JpegSpec spec = grey_spec();
        spec.setup = [=](j_compress_ptr jpeg) {
            jpeg->density_unit = static_cast<UINT8>(unit);
            jpeg->X_density = static_cast<UINT16>(x);
            jpeg->Y_density = static_cast<UINT16>(y);
        };
        return read_bytes(encode_jpeg(spec, smooth(width, height, 1))).resolution;
    };
    ASSERT_TRUE(with(1, 300, 150));
    EXPECT_EQ(with(1, 300, 150)->x_dpi, 300);
    EXPECT_EQ(with(1, 300, 150)->y_dpi, 150);
    ASSERT_TRUE(with(2, 100, 50));
    EXPECT_EQ(with(2, 100, 50)->x_dpi, 254);
    EXPECT_EQ(with(2, 100, 50)->y_dpi, 127);
    EXPECT_FALSE(with(0, 4, 3));
    EXPECT_FALSE(with(1, 0, 72));
}

void write_exif(j_compress_ptr jpeg, const Bytes& block) {
    const Bytes data = joined({text(std::string("Exif\0\0", 6)), block});
    jpeg_write_marker(jpeg, JPEG_APP0 + 1, data.data(), static_cast<unsigned>(data.size()));
}

TEST(Jpeg, ExifTurnsAndFillsIn) {
    JpegSpec spec = grey_spec();
    spec.markers = [](j_compress_ptr jpeg) { write_exif(jpeg, exif_block(8, 240, 120)); };
    const Bytes file = encode_jpeg(spec, smooth(width, height, 1));
    const Picture picture = read_bytes(file);
    EXPECT_EQ(picture.width, height);
    EXPECT_EQ(picture.height, width);
    ASSERT_TRUE(picture.resolution);
    EXPECT_EQ(picture.resolution->x_dpi, 120);
    EXPECT_EQ(picture.resolution->y_dpi, 240);
    const Bytes stored = plain_jpeg_decode(file, JCS_GRAYSCALE);
    EXPECT_EQ(picture.samples8[0],
              stored[width - 1]);  // the top right corner comes to the top left
}

TEST(Jpeg, JfifDensityComesBeforeExif) {
    JpegSpec spec = grey_spec();
    spec.setup = [](j_compress_ptr jpeg) {
        jpeg->density_unit = 1;
        jpeg->X_density = jpeg->Y_density = 72;
    };
    spec.markers = [](j_compress_ptr jpeg) { write_exif(jpeg, exif_block(1, 240, 120)); };
    const Picture picture = read_bytes(encode_jpeg(spec, smooth(width, height, 1)));
    ASSERT_TRUE(picture.resolution);
    EXPECT_EQ(picture.resolution->x_dpi, 72);
}

TEST(Jpeg, ProfileOfManySegments) {
    const Bytes profile = noise(150'000);
    JpegSpec spec = grey_spec();
    spec.markers = [&](j_compress_ptr jpeg) {
        jpeg_write_icc_profile(jpeg, profile.data(), static_cast<unsigned>(profile.size()));
    };
    EXPECT_EQ(read_bytes(encode_jpeg(spec, smooth(width, height, 1))).icc, profile);
}

TEST(Jpeg, ProfileWithALostSegmentIsDamage) {
    JpegSpec spec = grey_spec();
    spec.markers = [](j_compress_ptr jpeg) {
        // The first of two segments, without the second.
        const Bytes data = joined({text(std::string("ICC_PROFILE\0\1\2", 14)), noise(100)});
        jpeg_write_marker(jpeg, JPEG_APP0 + 2, data.data(), static_cast<unsigned>(data.size()));
    };
    EXPECT_THAT(error_of(encode_jpeg(spec, smooth(width, height, 1))).what(),
                HasSubstr("colour profile of which parts are missing"));
}

std::size_t start_of_frame(const Bytes& file) {
    for (std::size_t at = 2; at + 4 < file.size();) {
        if (file[at + 1] == 0xC0 || file[at + 1] == 0xC2) return at;
        at += 2 + static_cast<std::size_t>(file[at + 2] << 8 | file[at + 3]);
    }
    return 0;
}

TEST(Jpeg, KindsThatAreNotRead) {
    const Bytes good = encode_jpeg(grey_spec(), smooth(width, height, 1));
    const std::size_t frame = start_of_frame(good);
    ASSERT_NE(frame, 0U);
    Bytes twelve_bits = good;
    twelve_bits[frame + 4] = 12;
    EXPECT_THAT(error_of(twelve_bits).what(), HasSubstr("JPEG of 12 bits"));
    Bytes lossless = good;
    lossless[frame + 1] = 0xC3;
    EXPECT_THAT(error_of(lossless).what(), HasSubstr("lossless or hierarchical"));
    Bytes empty = good;
    empty[frame + 5] = empty[frame + 6] = 0;
    EXPECT_THAT(error_of(empty).what(), HasSubstr("no pixels"));
    Bytes huge = good;
    for (std::size_t i = 5; i < 9; ++i) huge[frame + i] = i % 2 == 1 ? 0xFF : 0;
    const Error error = error_of(huge);
    EXPECT_EQ(error.kind(), ErrorKind::limit);
    EXPECT_THAT(error.what(), HasSubstr("65280 x 65280"));
}

TEST(Jpeg, BytesBetweenMarkersAreHarmlessOnlyWhereNoPixelIsLost) {
    const Bytes good = encode_jpeg(grey_spec(), smooth(width, height, 1));
    const Bytes pixels = samples_of(read_bytes(good));
    const std::size_t frame = start_of_frame(good);
    const auto with = [&](std::size_t at, const Bytes& more) {
        Bytes file = good;
        file.insert(file.begin() + static_cast<std::ptrdiff_t>(at), more.begin(), more.end());
        return file;
    };
    EXPECT_EQ(samples_of(read_bytes(with(frame, Bytes(9, 0x5A)))), pixels);
    EXPECT_EQ(samples_of(read_bytes(with(good.size() - 2, Bytes(9)))), pixels);
    EXPECT_EQ(samples_of(read_bytes(with(good.size(), noise(900)))), pixels);
    EXPECT_THAT(error_of(with(good.size() - 2, Bytes(9, 0x5A))).what(), HasSubstr("is damaged"));
}

TEST(Jpeg, SaysWhereItWasCut) {
    Bytes file = encode_jpeg(rgb_spec(), smooth(width, height, 3));
    file.resize(file.size() * 9 / 10);
    EXPECT_THAT(error_of(file).what(), HasSubstr("is cut short: a JPEG that ends after " +
                                                 std::to_string(file.size()) + " bytes, at row"));
}

TEST(Jpeg, ProgressiveThatLostPassesAndWasClosedIsCutShort) {
    JpegSpec spec = rgb_spec();
    spec.setup = [](j_compress_ptr jpeg) { jpeg_simple_progression(jpeg); };
    const Bytes file = encode_jpeg(spec, smooth(width, height, 3));
    std::vector<std::size_t> scans;
    for (std::size_t at = 0; at + 1 < file.size(); ++at) {
        if (file[at] == 0xFF && file[at + 1] == 0xDA) scans.push_back(at);
    }
    ASSERT_GT(scans.size(), 5U);
    for (std::size_t i = 1; i < scans.size(); ++i) {
        Bytes cut(file.begin(), file.begin() + static_cast<std::ptrdiff_t>(scans[i]));
        cut.insert(cut.end(), {0xFF, 0xD9});
        EXPECT_THAT(error_of(cut).what(), HasSubstr("last passes")) << "before scan " << i;
    }
}

TEST(Jpeg, EndlessPassesAreRefused) {
    JpegSpec spec = grey_spec();
    std::vector<jpeg_scan_info> script{{1, {0}, 0, 0, 0, 0}, {1, {0}, 1, 63, 0, 0}};
    spec.setup = [&](j_compress_ptr jpeg) {
        jpeg->scan_info = script.data();
        jpeg->num_scans = static_cast<int>(script.size());
    };
    Bytes file = encode_jpeg(spec, smooth(width, height, 1));
    std::vector<std::size_t> scans;
    for (std::size_t at = 0; at + 1 < file.size(); ++at) {
        if (file[at] == 0xFF && file[at + 1] == 0xDA) scans.push_back(at);
    }
    ASSERT_EQ(scans.size(), 2U);
    const Bytes last(file.begin() + static_cast<std::ptrdiff_t>(scans[1]), file.end() - 2);
    file.resize(file.size() - 2);
    for (int i = 0; i < 600; ++i) file.insert(file.end(), last.begin(), last.end());
    file.insert(file.end(), {0xFF, 0xD9});
    EXPECT_THAT(error_of(file).what(), HasSubstr("is damaged"));
}

}  // namespace
}  // namespace tincture
