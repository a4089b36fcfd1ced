#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cstring>

#include "made_files.h"
#include "picture/made_profile.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;
using testing::IsEmpty;

constexpr std::uint32_t width = 18;
constexpr std::uint32_t height = 14;
constexpr std::size_t count = std::size_t{width} * height;

AvifSpec spec_of(std::uint32_t depth = 8, avifPixelFormat format = AVIF_PIXEL_FORMAT_YUV444) {
    AvifSpec spec{.width = width, .height = height};
    spec.depth = depth;
    spec.format = format;
    return spec;
}

std::vector<std::uint16_t> noise_of_depth(std::size_t size, std::uint32_t depth) {
    auto out = noise16(size);
    for (auto& value : out) value = static_cast<std::uint16_t>(value >> (16 - depth));
    return out;
}

// In whole numbers, to the nearest.
std::uint16_t widened(std::uint16_t value, std::uint32_t depth) {
    const std::uint64_t maximum = (1U << depth) - 1;
    return static_cast<std::uint16_t>((2 * value * std::uint64_t{65535} + maximum) / (2 * maximum));
}

TEST(Avif, LosslessRgbIsExact) {
    const Bytes pixels = noise(count * 3);
    const Picture picture = read_bytes(encode_avif(spec_of(), pixels));
    EXPECT_EQ(picture.width, width);
    EXPECT_EQ(picture.height, height);
    EXPECT_EQ(picture.model, ColourModel::rgb);
    EXPECT_EQ(samples_of(picture), pixels);
    EXPECT_TRUE(picture.opaque.empty());
    EXPECT_THAT(picture.icc, IsEmpty());
}

TEST(Avif, TenAndTwelveBitsBecomeSixteenExactly) {
    for (const std::uint32_t depth : {10U, 12U}) {
        auto pixels = noise_of_depth(count * 3, depth);
        const Picture picture = read_bytes(encode_avif(spec_of(depth), bytes_of(pixels)));
        for (auto& value : pixels) value = widened(value, depth);
        EXPECT_EQ(samples16_of(picture), pixels) << depth;
    }
}

TEST(Avif, GreyOfFullAndLimitedRange) {
    const Bytes grey = noise(count);
    const Picture picture = read_bytes(encode_avif(spec_of(8, AVIF_PIXEL_FORMAT_YUV400), grey));
    EXPECT_EQ(picture.model, ColourModel::grey);
    EXPECT_EQ(samples_of(picture), grey);

    AvifSpec limited = spec_of(10, AVIF_PIXEL_FORMAT_YUV400);
    limited.setup = [](avifImage* image) { image->yuvRange = AVIF_RANGE_LIMITED; };
    std::vector<std::uint16_t> values(count, 64);
    values[1] = 940;
    values[2] = 502;
    values[3] = 10;    // below black
    values[4] = 1000;  // above white
    const auto samples = samples16_of(read_bytes(encode_avif(limited, bytes_of(values))));
    EXPECT_EQ(samples[0], 0);
    EXPECT_EQ(samples[1], 65535);
    EXPECT_EQ(samples[2], 32768);  // 438 of 876
    EXPECT_EQ(samples[3], 0);
    EXPECT_EQ(samples[4], 65535);
}

TEST(Avif, SubsampledColoursAreNear) {
    for (const auto format : {AVIF_PIXEL_FORMAT_YUV420, AVIF_PIXEL_FORMAT_YUV422}) {
        const Bytes pixels = smooth(width, height, 3);
        const Bytes got = samples_of(read_bytes(encode_avif(spec_of(8, format), pixels)));
        ASSERT_EQ(got.size(), pixels.size());
        int most = 0;
        for (std::size_t i = 0; i < got.size(); ++i) {
            most = std::max(most, std::abs(got[i] - pixels[i]));
        }
        EXPECT_LE(most, 40);
        EXPECT_GE(most, 1);
    }
}

// Alpha from `alpha`, of the depth of the image.
std::function<void(avifImage*)> with_alpha(const std::vector<std::uint16_t>& alpha) {
    return [alpha](avifImage* image) {
        ASSERT_EQ(avifImageAllocatePlanes(image, AVIF_PLANES_A), AVIF_RESULT_OK);
        for (std::size_t i = 0; i < alpha.size(); ++i) {
            std::uint8_t* row = image->alphaPlane + i / width * image->alphaRowBytes;
            if (image->depth == 8) {
                row[i % width] = static_cast<std::uint8_t>(alpha[i]);
            } else {
                std::memcpy(row + i % width * 2, &alpha[i], 2);
            }
        }
    };
}

TEST(Avif, HalfAndMoreAlphaIsOpaque) {
    AvifSpec spec = spec_of();
    std::vector<std::uint16_t> alpha(count, 255);
    alpha[0] = 127;
    alpha[1] = 128;
    alpha[2] = 0;
    spec.finish = with_alpha(alpha);
    const Bytes pixels = noise(count * 3);
    const Picture picture = read_bytes(encode_avif(spec, pixels));
    EXPECT_EQ(samples_of(picture), pixels);
    const Bytes opaque = opaque_of(picture);
    EXPECT_EQ(Bytes(opaque.begin(), opaque.begin() + 4), (Bytes{0, 1, 0, 1}));

    AvifSpec deep = spec_of(10);
    alpha.assign(count, 1023);
    alpha[0] = 511;
    alpha[1] = 512;
    deep.finish = with_alpha(alpha);
    const auto deep_pixels = noise_of_depth(count * 3, 10);
    const Bytes deep_opaque = opaque_of(read_bytes(encode_avif(deep, bytes_of(deep_pixels))));
    EXPECT_EQ(Bytes(deep_opaque.begin(), deep_opaque.begin() + 3), (Bytes{0, 1, 1}));
}

TEST(Avif, PremultipliedIsUndone) {
    AvifSpec spec = spec_of();
    spec.finish = [](avifImage* image) {
        with_alpha(std::vector<std::uint16_t>(count, 51))(image);
        image->alphaPremultiplied = AVIF_TRUE;
    };
    Bytes pixels(count * 3, 40);
    pixels[1] = 0;
    pixels[2] = 51;
    const Bytes samples = samples_of(read_bytes(encode_avif(spec, pixels)));
    EXPECT_EQ(Bytes(samples.begin(), samples.begin() + 4), (Bytes{200, 0, 255, 200}));
}

// libavif translates an EXIF orientation to turns and mirrors when it encodes.
TEST(Avif, TurnsAndMirrorsAreThoseOfExif) {
    const Bytes pixels = noise(count * 3);
    for (int orientation = 1; orientation <= 8; ++orientation) {
        AvifSpec spec = spec_of();
        spec.setup = [&](avifImage* image) {
            const Bytes exif = exif_block(orientation, 250, 125);
            avifImageSetMetadataExif(image, exif.data(), exif.size());
        };
        const Picture picture = read_bytes(encode_avif(spec, pixels));
        PngSpec png{.width = width, .height = height};
        png.raw_chunks = {{"eXIf", exif_block(orientation, 250, 125)}};
        const Picture reference = read_bytes(encode_png(png, pixels));
        EXPECT_EQ(picture.width, reference.width) << orientation;
        EXPECT_EQ(samples_of(picture), samples_of(reference)) << orientation;
        ASSERT_TRUE(picture.resolution);
        EXPECT_EQ(picture.resolution->x_dpi, reference.resolution->x_dpi);
    }
}

// Turn first, then mirror: the two do not commute.
TEST(Avif, MirrorAfterTurn) {
    AvifSpec spec{.width = 3, .height = 2};
    spec.setup = [](avifImage* image) {
        image->transformFlags = AVIF_TRANSFORM_IROT | AVIF_TRANSFORM_IMIR;
        image->irot.angle = 1;  // against the clock
        image->imir.mode = 1;   // left and right
    };
    // A B C    C F    F C
    // D E F -> B E -> E B
    //          A D    D A
    const Bytes pixels{1, 1, 1, 2, 2, 2, 3, 3, 3, 4, 4, 4, 5, 5, 5, 6, 6, 6};
    const Bytes expected{6, 6, 6, 3, 3, 3, 5, 5, 5, 2, 2, 2, 4, 4, 4, 1, 1, 1};
    EXPECT_EQ(samples_of(read_bytes(encode_avif(spec, pixels))), expected);
}

TEST(Avif, CleanApertureIsCutOut) {
    AvifSpec spec = spec_of();
    spec.setup = [](avifImage* image) {
        const avifCropRect rect{2, 3, 7, 5};
        avifDiagnostics why;
        ASSERT_TRUE(avifCleanApertureBoxConvertCropRect(&image->clap, &rect, width, height,
                                                        image->yuvFormat, &why));
        image->transformFlags = AVIF_TRANSFORM_CLAP;
    };
    const Bytes pixels = noise(count * 3);
    const Picture picture = read_bytes(encode_avif(spec, pixels));
    EXPECT_EQ(picture.width, 7U);
    EXPECT_EQ(picture.height, 5U);
    const Bytes samples = samples_of(picture);
    for (std::size_t i = 0; i < samples.size(); ++i) {
        const std::size_t x = i / 3 % 7 + 2;
        const std::size_t y = i / 21 + 3;
        ASSERT_EQ(samples[i], pixels[(y * width + x) * 3 + i % 3]);
    }
}

Picture with_codes(avifColorPrimaries primaries, avifTransferCharacteristics transfer) {
    AvifSpec spec = spec_of();
    spec.setup = [=](avifImage* image) {
        image->colorPrimaries = primaries;
        image->transferCharacteristics = transfer;
    };
    return read_bytes(encode_avif(spec, noise(count * 3)));
}

TEST(Avif, ColoursByCodeOrProfile) {
    EXPECT_THAT(with_codes(1, 13).icc, IsEmpty());
    EXPECT_THAT(with_codes(1, 1).icc, IsEmpty());
    EXPECT_EQ(with_codes(12, 13).icc, profile_of_cicp(ColourModel::rgb, {12, 13}));
    EXPECT_GT(with_codes(12, 13).icc.size(), 128U);

    AvifSpec spec = spec_of();
    const Bytes profile = noise(500);
    spec.setup = [&](avifImage* image) {
        avifImageSetProfileICC(image, profile.data(), profile.size());
    };
    EXPECT_EQ(read_bytes(encode_avif(spec, noise(count * 3))).icc, profile);

    for (const int transfer : {16, 18}) {
        spec.setup = [=](avifImage* image) {
            image->colorPrimaries = 9;
            image->transferCharacteristics = static_cast<avifTransferCharacteristics>(transfer);
        };
        EXPECT_THAT(error_of(encode_avif(spec, noise(count * 3))).what(),
                    HasSubstr("high-dynamic-range"));
    }
    spec.setup = [](avifImage* image) { image->colorPrimaries = AVIF_COLOR_PRIMARIES_XYZ; };
    EXPECT_THAT(error_of(encode_avif(spec, noise(count * 3))).what(), HasSubstr("CICP 10/2"));
}

// The stream inside claims more than the file outside: refused before it is decoded.
TEST(Avif, StreamLargerThanItsFileIsALimit) {
    for (const bool alpha : {false, true}) {
        AvifSpec spec = spec_of();
        if (alpha) spec.finish = with_alpha(std::vector<std::uint16_t>(count, 7));
        Bytes file = encode_avif(spec, noise(count * 3));
        const std::string name = "ispe";
        const Bytes sides = joined({big(4, 4), big(4, 4)});
        for (auto at = file.begin();;) {
            at = std::search(at, file.end(), name.begin(), name.end());
            if (at == file.end()) break;
            std::copy(sides.begin(), sides.end(), at + 8);
            at += 8;
        }
        const Error error = error_of(file, {.max_pixels = 100});
        EXPECT_EQ(error.kind(), ErrorKind::limit);
        EXPECT_THAT(error.what(), HasSubstr("18 x 14 pixels"));
    }
}

TEST(Avif, HugeSidesAreALimit) {
    Bytes file = encode_avif(spec_of(), noise(count * 3));
    const std::string name = "ispe";
    const auto at = std::search(file.begin(), file.end(), name.begin(), name.end());
    ASSERT_NE(at, file.end());
    const Bytes sides = joined({big(100'000, 4), big(100'000, 4)});
    std::copy(sides.begin(), sides.end(), at + 8);
    const Error error = error_of(file);
    EXPECT_EQ(error.kind(), ErrorKind::limit);
    EXPECT_THAT(error.what(), HasSubstr("100000 x 100000"));
}

TEST(Avif, AnimatedIsRefused) {
    avifImage* image = avifImageCreate(16, 16, 8, AVIF_PIXEL_FORMAT_YUV420);
    ASSERT_EQ(avifImageAllocatePlanes(image, AVIF_PLANES_YUV), AVIF_RESULT_OK);
    for (int plane = 0; plane < 3; ++plane) {
        std::memset(image->yuvPlanes[plane], 90, image->yuvRowBytes[plane] * (plane ? 8U : 16U));
    }
    avifEncoder* encoder = avifEncoderCreate();
    encoder->speed = AVIF_SPEED_FASTEST;
    for (int i = 0; i < 2; ++i) {
        ASSERT_EQ(avifEncoderAddImage(encoder, image, 1, AVIF_ADD_IMAGE_FLAG_NONE), AVIF_RESULT_OK);
    }
    avifRWData data = AVIF_DATA_EMPTY;
    ASSERT_EQ(avifEncoderFinish(encoder, &data), AVIF_RESULT_OK);
    const Bytes file(data.data, data.data + data.size);
    avifRWDataFree(&data);
    avifEncoderDestroy(encoder);
    avifImageDestroy(image);
    EXPECT_THAT(error_of(file).what(), HasSubstr("animated AVIF"));
}

}  // namespace
}  // namespace tincture
