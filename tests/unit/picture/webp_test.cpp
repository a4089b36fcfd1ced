#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <webp/decode.h>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;

constexpr std::uint32_t width = 33;
constexpr std::uint32_t height = 21;
constexpr std::size_t count = std::size_t{width} * height;

Bytes without_alpha(const Bytes& rgba) {
    Bytes out;
    for (std::size_t i = 0; i < rgba.size(); ++i) {
        if (i % 4 != 3) out.push_back(rgba[i]);
    }
    return out;
}

Bytes opacity(const Bytes& rgba) {
    Bytes out;
    for (std::size_t i = 3; i < rgba.size(); i += 4) out.push_back(rgba[i] >= 128 ? 1 : 0);
    return out;
}

TEST(Webp, LosslessIsExact) {
    const Bytes pixels = noise(count * 3);
    const Picture picture = read_bytes(encode_webp(width, height, pixels, false, true));
    EXPECT_EQ(picture.width, width);
    EXPECT_EQ(picture.height, height);
    EXPECT_EQ(samples_of(picture), pixels);
    EXPECT_TRUE(picture.opaque.empty());
}

TEST(Webp, LosslessWithAlpha) {
    const Bytes pixels = noise(count * 4);
    const Picture picture = read_bytes(encode_webp(width, height, pixels, true, true));
    EXPECT_EQ(samples_of(picture), without_alpha(pixels));
    EXPECT_EQ(opaque_of(picture), opacity(pixels));
}

TEST(Webp, LossyIsWhatPlainLibwebpMakesOfIt) {
    const Bytes file = encode_webp(width, height, smooth(width, height, 3), false, false);
    std::uint8_t* plain = WebPDecodeRGB(file.data(), file.size(), nullptr, nullptr);
    ASSERT_NE(plain, nullptr);
    EXPECT_EQ(samples_of(read_bytes(file)), Bytes(plain, plain + count * 3));
    WebPFree(plain);
}

TEST(Webp, LossyWithAlpha) {
    Bytes pixels = smooth(width, height, 4);
    const Bytes file = encode_webp(width, height, pixels, true, false);
    std::uint8_t* plain = WebPDecodeRGBA(file.data(), file.size(), nullptr, nullptr);
    ASSERT_NE(plain, nullptr);
    const Bytes decoded(plain, plain + count * 4);
    WebPFree(plain);
    const Picture picture = read_bytes(file);
    EXPECT_EQ(samples_of(picture), without_alpha(decoded));
    EXPECT_EQ(opaque_of(picture), opacity(pixels));  // alpha itself is lossless by default
}

TEST(Webp, ProfileAndExif) {
    const Bytes pixels = noise(count * 3);
    const Bytes profile = noise(301);
    const Bytes simple = encode_webp(width, height, pixels, false, true);
    const Picture picture =
        read_bytes(wrap_webp(simple, width, height, profile, exif_block(3, 144, 96)));
    EXPECT_EQ(picture.icc, profile);
    ASSERT_TRUE(picture.resolution);
    EXPECT_EQ(picture.resolution->x_dpi, 144);
    EXPECT_EQ(picture.resolution->y_dpi, 96);
    const Bytes samples = samples_of(picture);
    EXPECT_EQ(Bytes(samples.end() - 3, samples.end()), Bytes(pixels.begin(), pixels.begin() + 3));
}

TEST(Webp, AnimatedIsRefused) {
    const Bytes simple = encode_webp(width, height, noise(count * 3), false, true);
    const Bytes pixels(simple.begin() + 12, simple.end());
    const auto chunk = [](const char* name, const Bytes& data) {
        return joined({text(name), little(data.size(), 4), data, Bytes(data.size() % 2)});
    };
    const Bytes frame = joined({little(0, 6), little(width - 1, 3), little(height - 1, 3),
                                little(100, 3), Bytes{0}, pixels});
    const Bytes body =
        joined({text("WEBP"),
                chunk("VP8X", joined({little(2, 4), little(width - 1, 3), little(height - 1, 3)})),
                chunk("ANIM", Bytes(6)), chunk("ANMF", frame), chunk("ANMF", frame)});
    EXPECT_THAT(error_of(joined({text("RIFF"), little(body.size(), 4), body})).what(),
                HasSubstr("animated WebP"));
}

TEST(Webp, SaysHowManyBytesAreMissing) {
    Bytes file = encode_webp(width, height, noise(count * 3), false, true);
    const std::size_t whole = file.size();
    file.resize(whole / 3);
    EXPECT_THAT(error_of(file).what(),
                HasSubstr("is cut short: a WebP that ends after " + std::to_string(whole / 3) +
                          " of " + std::to_string(whole) + " bytes"));
}

// The file is whole, but what it says about its length was mended after the cut.
TEST(Webp, ShortPixelsInAWholeFile) {
    for (const bool lossless : {true, false}) {
        const Bytes file = encode_webp(width, height, noise(count * 3), false, lossless);
        const std::size_t kept = (file.size() - 20) / 2 / 2 * 2;
        const Bytes data(file.begin() + 20, file.begin() + 20 + static_cast<std::ptrdiff_t>(kept));
        const Bytes cut =
            joined({text("RIFF"), little(kept + 12, 4), Bytes(file.begin() + 8, file.begin() + 16),
                    little(kept, 4), data});
        EXPECT_THAT(error_of(cut).what(),
                    testing::AnyOf(HasSubstr("cut short"), HasSubstr("damaged")));
    }
}

}  // namespace
}  // namespace tincture
