#include "picture/orientation.h"

#include <gtest/gtest.h>

#include <cstring>
#include <numeric>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;

// The stored picture is 3 x 2:
//   1 2 3
//   4 5 6
// TIFF 6.0, page 36, says where the first row and column of the stored picture belong.
struct Expected {
    int orientation;
    std::uint32_t width;
    Bytes grey;
};
const Expected all_expected[] = {
    {1, 3, {1, 2, 3, 4, 5, 6}},  // row 0 is the top, column 0 the left side
    {2, 3, {3, 2, 1, 6, 5, 4}},  // top, right
    {3, 3, {6, 5, 4, 3, 2, 1}},  // bottom, right
    {4, 3, {4, 5, 6, 1, 2, 3}},  // bottom, left
    {5, 2, {1, 4, 2, 5, 3, 6}},  // row 0 is the left side, column 0 the top
    {6, 2, {4, 1, 5, 2, 6, 3}},  // right, top
    {7, 2, {6, 3, 5, 2, 4, 1}},  // right, bottom
    {8, 2, {3, 6, 2, 5, 1, 4}},  // left, bottom
};

// A picture whose every sample is its pixel number times `channels` plus its channel.
Picture numbered(std::uint32_t width, std::uint32_t height, ColourModel model, int bits) {
    Picture picture;
    picture.width = width;
    picture.height = height;
    picture.model = model;
    picture.bits = bits;
    const std::size_t size = picture.pixel_count() * static_cast<std::size_t>(channel_count(model));
    if (bits == 8) {
        picture.samples8 = Samples<std::uint8_t>(size);
        std::iota(picture.samples8.data(), picture.samples8.data() + size, std::uint8_t{0});
    } else {
        picture.samples16 = Samples<std::uint16_t>(size);
        std::iota(picture.samples16.data(), picture.samples16.data() + size, std::uint16_t{0});
    }
    return picture;
}

TEST(Orientation, AllEightByHand) {
    for (const auto& [orientation, width, grey] : all_expected) {
        Picture picture = numbered(3, 2, ColourModel::grey, 8);
        for (std::size_t i = 0; i < 6; ++i) picture.samples8[i] = static_cast<std::uint8_t>(i + 1);
        picture.opaque = Samples<std::uint8_t>(6);
        std::memset(picture.opaque.data(), 1, 6);
        picture.opaque[0] = 0;
        picture.resolution = Resolution{300, 200};
        apply_orientation(picture, orientation);
        EXPECT_EQ(picture.width, width) << orientation;
        EXPECT_EQ(picture.height, 6 / width) << orientation;
        EXPECT_EQ(samples_of(picture), grey) << orientation;
        const Bytes opaque = opaque_of(picture);
        for (std::size_t i = 0; i < 6; ++i) EXPECT_EQ(opaque[i], grey[i] == 1 ? 0 : 1);
        EXPECT_EQ(picture.resolution->x_dpi, width == 3 ? 300 : 200) << orientation;
        EXPECT_EQ(picture.resolution->y_dpi, width == 3 ? 200 : 300) << orientation;
    }
}

// Every model and depth, and sides that are no multiple of a block, by the 3 x 2 rule of where the
// corner goes: pixel (x, y) of the upright picture, one by one.
TEST(Orientation, EveryModelAndDepthPixelByPixel) {
    constexpr std::uint32_t w = 131;
    constexpr std::uint32_t h = 70;
    for (const ColourModel model : {ColourModel::grey, ColourModel::rgb, ColourModel::cmyk}) {
        for (const int bits : {8, 16}) {
            for (int orientation = 1; orientation <= 8; ++orientation) {
                const Picture stored = numbered(w, h, model, bits);
                Picture picture = numbered(w, h, model, bits);
                apply_orientation(picture, orientation);
                const auto channels = static_cast<std::size_t>(channel_count(model));
                for (std::size_t i = 0; i < std::size_t{w} * h * channels; ++i) {
                    const std::size_t x = i / channels % picture.width;
                    const std::size_t y = i / channels / picture.width;
                    const bool turned = orientation >= 5;
                    std::size_t column = turned ? y : x;
                    std::size_t row = turned ? x : y;
                    if (orientation == 2 || orientation == 3 || orientation == 7 ||
                        orientation == 8) {
                        column = w - 1 - column;
                    }
                    if (orientation == 3 || orientation == 4 || orientation == 6 ||
                        orientation == 7) {
                        row = h - 1 - row;
                    }
                    const std::size_t from = (row * w + column) * channels + i % channels;
                    if (bits == 8) {
                        ASSERT_EQ(picture.samples8[i], stored.samples8[from]) << orientation;
                    } else {
                        ASSERT_EQ(picture.samples16[i], stored.samples16[from]) << orientation;
                    }
                }
            }
        }
    }
}

TEST(Orientation, UprightIsNotCopied) {
    for (const int orientation : {0, 1, 9, -3}) {
        Picture picture = numbered(3, 2, ColourModel::rgb, 8);
        const std::uint8_t* before = picture.samples8.data();
        apply_orientation(picture, orientation);
        EXPECT_EQ(picture.samples8.data(), before);
    }
}

}  // namespace
}  // namespace tincture
