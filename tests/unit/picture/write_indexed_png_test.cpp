#include "picture/write_indexed_png.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <stdlib.h>
#include <zlib.h>

#include <cstring>
#include <filesystem>
#include <fstream>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;
namespace fs = std::filesystem;

class WriteIndexedPng : public testing::Test {
  protected:
    WriteIndexedPng() {
        std::string name = testing::TempDir() + "tincture-XXXXXX";
        folder_ = ::mkdtemp(name.data());
    }
    ~WriteIndexedPng() override { fs::remove_all(folder_); }

    Bytes written(const IndexedPicture& picture) {
        const fs::path path = folder_ / "out.png";
        write_indexed_png(path, picture);
        std::ifstream file(path, std::ios::binary);
        return {std::istreambuf_iterator<char>(file), {}};
    }

    fs::path folder_;
};

std::vector<Rgb8> colours_of(std::size_t count) {
    const Bytes values = noise(count * 3, 7);
    std::vector<Rgb8> out;
    for (std::size_t i = 0; i < count; ++i) {
        out.push_back({values[i * 3], values[i * 3 + 1], values[i * 3 + 2]});
    }
    return out;
}

Bytes labels_of(std::size_t size, std::size_t colours) {
    Bytes out = noise(size, 3);
    for (auto& label : out) label = static_cast<std::uint8_t>(label % colours);
    return out;
}

std::vector<std::string> chunk_names(const Bytes& png) {
    std::vector<std::string> names;
    for (std::size_t at = 8; at + 12 <= png.size();) {
        names.emplace_back(png.begin() + static_cast<std::ptrdiff_t>(at) + 4,
                           png.begin() + static_cast<std::ptrdiff_t>(at) + 8);
        at += 12 + (std::size_t{png[at]} << 24 | std::size_t{png[at + 1]} << 16 |
                    std::size_t{png[at + 2]} << 8 | png[at + 3]);
    }
    return names;
}

// What plain libpng finds in a file.
struct Found {
    int depth = 0;
    int type = 0;
    int intent = -1;
    std::vector<Rgb8> palette;
    Bytes alphas;
    Bytes profile;
    png_uint_32 x = 0;
    png_uint_32 y = 0;
    Bytes labels;
};

Found plain_read(const fs::path& path) {
    Found found;
    std::FILE* file = std::fopen(path.c_str(), "rb");
    png_structp png = png_create_read_struct(PNG_LIBPNG_VER_STRING, nullptr, nullptr, nullptr);
    png_infop info = png_create_info_struct(png);
    png_init_io(png, file);
    png_read_info(png, info);
    found.depth = png_get_bit_depth(png, info);
    found.type = png_get_color_type(png, info);
    png_get_sRGB(png, info, &found.intent);
    png_colorp colours = nullptr;
    int count = 0;
    png_get_PLTE(png, info, &colours, &count);
    for (int i = 0; i < count; ++i) {
        found.palette.push_back({colours[i].red, colours[i].green, colours[i].blue});
    }
    png_bytep alphas = nullptr;
    if (png_get_tRNS(png, info, &alphas, &count, nullptr) != 0) {
        found.alphas.assign(alphas, alphas + count);
    }
    png_charp name = nullptr;
    png_bytep profile = nullptr;
    png_uint_32 size = 0;
    int method = 0;
    if (png_get_iCCP(png, info, &name, &method, &profile, &size) != 0) {
        found.profile.assign(profile, profile + size);
    }
    int unit = 0;
    png_get_pHYs(png, info, &found.x, &found.y, &unit);
    png_set_packing(png);
    png_read_update_info(png, info);
    const std::size_t width = png_get_image_width(png, info);
    for (std::size_t y = 0; y < png_get_image_height(png, info); ++y) {
        Bytes row(width);
        png_read_row(png, row.data(), nullptr);
        found.labels.insert(found.labels.end(), row.begin(), row.end());
    }
    png_read_end(png, info);
    png_destroy_read_struct(&png, &info, nullptr);
    std::fclose(file);
    return found;
}

TEST_F(WriteIndexedPng, EveryDepthComesBackAndEveryWidthIsPacked) {
    for (const auto& [count, depth] : {std::pair<std::size_t, int>{1, 1},
                                       {2, 1},
                                       {3, 2},
                                       {4, 2},
                                       {5, 4},
                                       {16, 4},
                                       {17, 8},
                                       {256, 8}}) {
        for (std::uint32_t width = 1; width <= 17; ++width) {
            const auto palette = colours_of(count);
            const Bytes labels = labels_of(std::size_t{width} * 3, count);
            (void)written({width, 3, labels.data(), palette, {}, {}, {}});
            const Found found = plain_read(folder_ / "out.png");
            EXPECT_EQ(found.depth, depth);
            EXPECT_EQ(found.type, PNG_COLOR_TYPE_PALETTE);
            EXPECT_EQ(found.palette, palette);
            EXPECT_EQ(found.labels, labels) << width;
            EXPECT_THAT(found.alphas, testing::IsEmpty());
            EXPECT_EQ(found.intent, PNG_sRGB_INTENT_RELATIVE);
        }
    }
}

TEST_F(WriteIndexedPng, AllChunksTwiceTheSameBytes) {
    // A profile that libpng accepts: a made one from a PNG with its own primaries.
    const Bytes wide = encode_png({.extras =
                                       [](png_structp png, png_infop info) {
                                           png_set_gAMA(png, info, 0.45455);
                                           png_set_cHRM(png, info, 0.3127, 0.329, 0.68, 0.32, 0.265,
                                                        0.69, 0.15, 0.06);
                                       }},
                                  Bytes(3));
    const Bytes profile = read_bytes(wide).icc;
    ASSERT_GT(profile.size(), 128U);
    const auto palette = colours_of(6);
    const Bytes labels = labels_of(std::size_t{31} * 40, 6);
    const IndexedPicture picture{31, 40, labels.data(), palette, 4, profile, Resolution{300, 150}};
    const Bytes first = written(picture);
    EXPECT_EQ(written(picture), first);
    EXPECT_THAT(chunk_names(first),
                testing::ElementsAre("IHDR", "iCCP", "PLTE", "tRNS", "pHYs", "IDAT", "IEND"));

    const Found found = plain_read(folder_ / "out.png");
    EXPECT_EQ(found.labels, labels);
    EXPECT_EQ(found.profile, profile);
    EXPECT_EQ(found.alphas, (Bytes{255, 255, 255, 255, 0}));
    EXPECT_EQ(found.x, 11811U);
    EXPECT_EQ(found.y, 5906U);
    EXPECT_EQ(found.intent, -1);

    const Picture read = read_picture(folder_ / "out.png");
    EXPECT_EQ(read.icc, profile);
    const Bytes opaque = opaque_of(read);
    for (std::size_t i = 0; i < labels.size(); ++i) {
        EXPECT_EQ(opaque[i], labels[i] == 4 ? 0 : 1);
        EXPECT_EQ(read.samples8[i * 3], palette[labels[i]].r);
    }
}

TEST_F(WriteIndexedPng, ProfileThatLibpngRejectsIsWrittenSilently) {
    const Bytes profile = noise(1000);
    const auto palette = colours_of(2);
    const Bytes labels{0, 1};
    testing::internal::CaptureStderr();
    (void)written({2, 1, labels.data(), palette, {}, profile, {}});
    EXPECT_EQ(testing::internal::GetCapturedStderr(), "");
    EXPECT_EQ(read_picture(folder_ / "out.png").icc, profile);
}

TEST_F(WriteIndexedPng, ManyRowsSpanSeveralChunks) {
    const auto palette = colours_of(200);
    const Bytes labels = labels_of(std::size_t{1500} * 1500, 200);
    const Bytes file = written({1500, 1500, labels.data(), palette, {}, {}, {}});
    EXPECT_GT(file.size(), std::size_t{1} << 20);
    EXPECT_EQ(plain_read(folder_ / "out.png").labels, labels);
}

TEST_F(WriteIndexedPng, FullDiskAndMissingFolderAreErrors) {
    const auto palette = colours_of(200);
    const auto message = [&](const fs::path& path, const Bytes& labels, std::uint32_t side) {
        try {
            write_indexed_png(path, {side, side, labels.data(), palette, {}, {}, {}});
        } catch (const Error& error) {
            EXPECT_EQ(error.kind(), ErrorKind::output);
            EXPECT_EQ(error.subject(), path.native());
            return std::string(error.what());
        }
        return std::string("was written");
    };
    const Bytes small = labels_of(1, 200);
    const Bytes large = labels_of(std::size_t{1500} * 1500, 200);
    EXPECT_THAT(message(folder_ / "none" / "out.png", small, 1), HasSubstr("No such file"));
    EXPECT_THAT(message("/dev/full", large, 1500), HasSubstr("No space left"));
    EXPECT_THAT(message("/dev/full", small, 1), HasSubstr("No space left"));
}

}  // namespace
}  // namespace tincture
