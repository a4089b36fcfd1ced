// Every format cut at many places and with single wrong bytes: never a crash, never a picture with
// pixels missing, never a word on stdout or stderr.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <random>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;

constexpr std::uint32_t width = 40;
constexpr std::uint32_t height = 32;

Bytes png_plain() {
    return encode_png({.width = width, .height = height}, smooth(width, height, 3));
}

Bytes png_interlaced() {
    return encode_png({.width = width, .height = height, .interlace = PNG_INTERLACE_ADAM7},
                      smooth(width, height, 3));
}

Bytes png_palette() {
    PngSpec spec{.width = width, .height = height, .type = PNG_COLOR_TYPE_PALETTE};
    spec.extras = [](png_structp png, png_infop info) {
        std::vector<png_color> colours(256);
        png_set_PLTE(png, info, colours.data(), 256);
    };
    spec.raw_chunks = {{"eXIf", exif_block(6, 300, 300)}};
    return encode_png(spec, noise(std::size_t{width} * height));
}

Bytes png_deep_alpha() {
    const PngSpec spec{
        .width = width, .height = height, .depth = 16, .type = PNG_COLOR_TYPE_RGB_ALPHA};
    return encode_png(spec, smooth(width, height, 8));
}

Bytes jpeg_plain() {
    return encode_jpeg({.width = width, .height = height}, smooth(width, height, 3));
}

Bytes jpeg_progressive() {
    JpegSpec spec{.width = width, .height = height};
    spec.setup = [](j_compress_ptr jpeg) { jpeg_simple_progression(jpeg); };
    return encode_jpeg(spec, smooth(width, height, 3));
}

Bytes jpeg_restarts() {
    JpegSpec spec{.width = width, .height = height};
    spec.setup = [](j_compress_ptr jpeg) { jpeg->restart_interval = 2; };
    spec.markers = [](j_compress_ptr jpeg) {
        const Bytes exif = joined({text(std::string("Exif\0\0", 6)), exif_block(5, 300, 300)});
        jpeg_write_marker(jpeg, JPEG_APP0 + 1, exif.data(), static_cast<unsigned>(exif.size()));
        const Bytes profile = noise(300);
        jpeg_write_icc_profile(jpeg, profile.data(), static_cast<unsigned>(profile.size()));
    };
    return encode_jpeg(spec, smooth(width, height, 3));
}

Bytes jpeg_cmyk() {
    const JpegSpec spec{.width = width, .height = height, .space = JCS_CMYK, .channels = 4};
    return encode_jpeg(spec, smooth(width, height, 4));
}

template <int compression>
Bytes tiff_rgb() {
    TiffSpec spec{.width = width, .height = height};
    spec.compression = compression;
    spec.mode = compression == COMPRESSION_LZW ? "wb8" : "wl";
    spec.tags = [](TIFF* tiff) {
        const Bytes profile = noise(100);
        TIFFSetField(tiff, TIFFTAG_ICCPROFILE, 100, profile.data());
    };
    return encode_tiff(spec, smooth(width, height, 3));
}

Bytes tiff_jpeg() {
    TiffSpec spec{.width = 48, .height = 32};
    spec.photometric = PHOTOMETRIC_YCBCR;
    spec.compression = COMPRESSION_JPEG;
    spec.tags = [](TIFF* tiff) {
        TIFFSetField(tiff, TIFFTAG_ROWSPERSTRIP, 16);
        TIFFSetField(tiff, TIFFTAG_JPEGCOLORMODE, JPEGCOLORMODE_RGB);
    };
    return encode_tiff(spec, smooth(48, 32, 3));
}

template <int compression>
Bytes tiff_fax() {
    TiffSpec spec{.width = width, .height = height, .bits = 1, .channels = 1};
    spec.photometric = PHOTOMETRIC_MINISWHITE;
    spec.compression = compression;
    return encode_tiff(spec, smooth(width, height, 1));
}

Bytes tiff_planes() {
    TiffSpec spec{.width = width, .height = height, .channels = 4};
    spec.planes = PLANARCONFIG_SEPARATE;
    spec.tags = [](TIFF* tiff) {
        const std::uint16_t kind = EXTRASAMPLE_ASSOCALPHA;
        TIFFSetField(tiff, TIFFTAG_EXTRASAMPLES, 1, &kind);
    };
    return encode_tiff(spec, smooth(width, height, 4));
}

Bytes tiff_tiles() {
    TiffSpec spec{.width = width, .height = height};
    spec.compression = COMPRESSION_LZW;
    spec.tags = [](TIFF* tiff) {
        TIFFSetField(tiff, TIFFTAG_TILEWIDTH, 16);
        TIFFSetField(tiff, TIFFTAG_TILELENGTH, 16);
    };
    spec.pixels = [](TIFF* tiff) {
        for (std::uint32_t tile = 0; tile < 6; ++tile) {
            Bytes data = smooth(16, 16, 3);
            TIFFWriteEncodedTile(tiff, tile, data.data(), static_cast<tmsize_t>(data.size()));
        }
    };
    return encode_tiff(spec, {});
}

Bytes webp_lossless() {
    const Bytes simple = encode_webp(width, height, smooth(width, height, 3), false, true);
    return wrap_webp(simple, width, height, noise(50), exif_block(6, 10, 10));
}

Bytes webp_lossy() {
    return encode_webp(width, height, smooth(width, height, 4), true, false);
}

Bytes avif_subsampled() {
    AvifSpec spec{.width = width, .height = height};
    spec.format = AVIF_PIXEL_FORMAT_YUV420;
    return encode_avif(spec, smooth(width, height, 3));
}

Bytes avif_deep_alpha() {
    AvifSpec spec{.width = width, .height = height, .depth = 10};
    spec.finish = [](avifImage* image) {
        avifImageAllocatePlanes(image, AVIF_PLANES_A);
        std::fill_n(image->alphaPlane, image->alphaRowBytes * height, std::uint8_t{1});
        image->alphaPremultiplied = AVIF_TRUE;
        const Bytes exif = exif_block(6, 300, 300);
        avifImageSetMetadataExif(image, exif.data(), exif.size());
    };
    auto pixels = noise16(std::size_t{width} * height * 3);
    for (auto& value : pixels) value = static_cast<std::uint16_t>(value >> 6);
    return encode_avif(spec, bytes_of(pixels));
}

Bytes bmp(unsigned bits, const Bytes& palette, const Bytes& pixels) {
    return joined({text("BM"), Bytes(8), little(54 + palette.size(), 4), little(40, 4),
                   little(width, 4), little(height, 4), little(1, 2), little(bits, 2), Bytes(24),
                   palette, pixels});
}
Bytes bmp_plain() {
    return bmp(24, {}, smooth(width, height, 3));
}
Bytes bmp_palette() {
    return bmp(8, noise(1024), noise(std::size_t{width} * height));
}

Bytes ppm() {
    return joined({text("P6 40 32 255\n"), smooth(width, height, 3)});
}
Bytes pgm_deep() {
    return joined({text("P5 40 32 999\n"), Bytes(std::size_t{width} * height * 2, 1)});
}
Bytes plain_pbm() {
    return text("P1 9 3 101010101 011011011 000111000");
}

// Made when a test needs it: listing the tests would take seconds otherwise.
struct Sample {
    const char* name;
    Bytes (*make)();
};

const Sample all_samples[] = {
    {"png", png_plain},
    {"png_interlaced", png_interlaced},
    {"png_palette", png_palette},
    {"png_deep_alpha", png_deep_alpha},
    {"jpeg", jpeg_plain},
    {"jpeg_progressive", jpeg_progressive},
    {"jpeg_restarts", jpeg_restarts},
    {"jpeg_cmyk", jpeg_cmyk},
    {"tiff", tiff_rgb<COMPRESSION_NONE>},
    {"tiff_lzw", tiff_rgb<COMPRESSION_LZW>},
    {"tiff_deflate", tiff_rgb<COMPRESSION_ADOBE_DEFLATE>},
    {"tiff_packbits", tiff_rgb<COMPRESSION_PACKBITS>},
    {"tiff_zstd", tiff_rgb<COMPRESSION_ZSTD>},
    {"tiff_lerc", tiff_rgb<COMPRESSION_LERC>},
    {"tiff_webp", tiff_rgb<COMPRESSION_WEBP>},
    {"tiff_jpeg", tiff_jpeg},
    {"tiff_fax3", tiff_fax<COMPRESSION_CCITTFAX3>},
    {"tiff_fax4", tiff_fax<COMPRESSION_CCITTFAX4>},
    {"tiff_planes", tiff_planes},
    {"tiff_tiles", tiff_tiles},
    {"webp_lossless", webp_lossless},
    {"webp_lossy", webp_lossy},
    {"avif", avif_subsampled},
    {"avif_deep_alpha", avif_deep_alpha},
    {"bmp", bmp_plain},
    {"bmp_palette", bmp_palette},
    {"ppm", ppm},
    {"pgm_deep", pgm_deep},
    {"plain_pbm", plain_pbm},
};

class Damage : public testing::TestWithParam<Sample> {
  protected:
    void SetUp() override {
        testing::internal::CaptureStderr();
        testing::internal::CaptureStdout();
    }
    void TearDown() override {
        EXPECT_EQ(testing::internal::GetCapturedStderr(), "");
        EXPECT_EQ(testing::internal::GetCapturedStdout(), "");
    }
    // Far below what a wrong byte can claim, so that the test does not depend on memory.
    ReadOptions options_{.max_pixels = 1'000'000};
};

bool same_pixels(const Picture& a, const Picture& b) {
    if (a.width != b.width || a.height != b.height || a.bits != b.bits) return false;
    return a.bits == 8 ? samples_of(a) == samples_of(b) : samples16_of(a) == samples16_of(b);
}

TEST_P(Damage, NoPictureWithoutAllOfItsPixels) {
    const Bytes original = GetParam().make();
    const Picture whole = read_bytes(original, options_);
    const std::size_t size = original.size();
    std::vector<std::size_t> cuts{size / 3, size * 9 / 10, size - 1, size - 2, size - 3};
    const std::size_t step = std::max<std::size_t>(1, size / 150);
    for (std::size_t at = 1; at < size; at += step) cuts.push_back(at);
    for (const std::size_t cut : cuts) {
        const Bytes file(original.begin(), original.begin() + static_cast<std::ptrdiff_t>(cut));
        try {
            const Picture picture = read_bytes(file, options_);
            EXPECT_TRUE(same_pixels(picture, whole)) << cut << " of " << size;
        } catch (const Error& error) {
            EXPECT_EQ(error.kind(), ErrorKind::input) << error.what();
        }
    }
}

TEST_P(Damage, WrongBytesEndInAPictureOrAnError) {
    const Bytes original = GetParam().make();
    std::mt19937 random(20240607);
    int refused = 0;
    for (int i = 0; i < 300; ++i) {
        Bytes file = original;
        // Half of the wrong bytes in the first kilobyte, where the structure is.
        const std::size_t reach =
            i % 2 == 0 ? std::min<std::size_t>(1024, file.size()) : file.size();
        file[random() % reach] ^= static_cast<std::uint8_t>(1U + random() % 255U);
        try {
            const Picture picture = read_bytes(file, options_);
            EXPECT_EQ(
                picture.samples8.size() + picture.samples16.size(),
                picture.pixel_count() * static_cast<std::size_t>(channel_count(picture.model)));
            EXPECT_TRUE(picture.opaque.empty() || picture.opaque.size() == picture.pixel_count());
        } catch (const Error& error) {
            EXPECT_NE(error.kind(), ErrorKind::usage);
            EXPECT_FALSE(std::string(error.what()).empty());
            ++refused;
        }
    }
    EXPECT_GT(refused, 0);
}

INSTANTIATE_TEST_SUITE_P(Formats, Damage, testing::ValuesIn(all_samples),
                         [](const testing::TestParamInfo<Sample>& sample) {
                             return sample.param.name;
                         });

}  // namespace
}  // namespace tincture
