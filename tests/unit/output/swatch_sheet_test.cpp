#include "output/swatch_sheet.h"

#include <gtest/gtest.h>
#include <png.h>

#include <algorithm>
#include <array>
#include <set>

#include "colour/notation.h"
#include "output/small_png.h"
#include "study_fixtures.h"
#include "svg_reading.h"

namespace tincture {
namespace {

struct Decoded {
    std::uint32_t width = 0;
    std::uint32_t height = 0;
    std::vector<Rgb8> pixels;
};

// By libpng, which did not write it.
Decoded decode(const std::vector<std::uint8_t>& bytes) {
    png_image image{};
    image.version = PNG_IMAGE_VERSION;
    EXPECT_TRUE(png_image_begin_read_from_memory(&image, bytes.data(), bytes.size()))
        << image.message;
    image.format = PNG_FORMAT_RGB;
    Decoded decoded{image.width, image.height, {}};
    decoded.pixels.resize(std::size_t{image.width} * image.height);
    EXPECT_TRUE(png_image_finish_read(&image, nullptr, decoded.pixels.data(), 0, nullptr))
        << image.message;
    EXPECT_EQ(image.warning_or_error, 0U) << image.message;
    return decoded;
}

// 200 rows: more than one band.
std::vector<std::uint8_t> noise_png(std::uint32_t colours) {
    constexpr int width = 97;
    constexpr int height = 200;
    std::vector<Rgb8> pixels;
    for (std::uint32_t i = 0; i < width * height; ++i) {
        const std::uint32_t value = (i * 2654435761U >> 7U) % colours;
        pixels.push_back({static_cast<std::uint8_t>(value), static_cast<std::uint8_t>(value >> 8U),
                          static_cast<std::uint8_t>(value * 5)});
    }
    const auto png = draw_png(width, height, 7559, [&](Band& band) {
        for (int y = 0; y < height; ++y) {
            for (int x = 0; x < width; ++x) {
                band.blend(x, y, pixels[static_cast<std::size_t>(y * width + x)], 255);
            }
        }
    });
    EXPECT_EQ(decode(png).pixels, pixels);
    return png;
}

TEST(SmallPng, ComesBackExactly) {
    const std::size_t colour_type = 25;  // its byte in the file
    EXPECT_EQ(noise_png(1)[colour_type], 3);
    EXPECT_EQ(noise_png(256)[colour_type], 3);
    EXPECT_EQ(noise_png(257)[colour_type], 2);
    EXPECT_EQ(noise_png(3000)[colour_type], 2);
}

TEST(SmallPng, SaysThatItIsSrgb) {
    const auto png = draw_png(3, 2, 7559, [](Band&) {});
    const std::array<std::uint8_t, 5> chunk = {'s', 'R', 'G', 'B', 0};
    EXPECT_NE(std::search(png.begin(), png.end(), chunk.begin(), chunk.end()), png.end());
}

TEST(SmallPng, DrawingStaysInTheBand) {
    Band band(4, 10, 13);
    band.fill(-5, -5, 2, 100, {10, 20, 30});
    band.fill(3, 10, 2, 13, {0, 0, 0});
    band.blend(-1, 10, {0, 0, 0}, 255);
    band.blend(4, 12, {0, 0, 0}, 255);
    band.blend(1, 9, {0, 0, 0}, 255);
    band.blend(1, 13, {0, 0, 0}, 255);
    band.blend(3, 12, {55, 155, 255}, 51);
    const Rgb8 filled{10, 20, 30};
    const Rgb8 white{255, 255, 255};
    for (const int y : {10, 11}) {
        const auto row = band.row(y);
        EXPECT_EQ(std::vector<Rgb8>(row.begin(), row.end()),
                  (std::vector<Rgb8>{filled, filled, white, white}));
    }
    EXPECT_EQ(band.row(12)[3], (Rgb8{215, 235, 255}));
    EXPECT_TRUE(band.shows(0, 11));
    EXPECT_TRUE(band.shows(12, 20));
    EXPECT_FALSE(band.shows(0, 10));
    EXPECT_FALSE(band.shows(13, 20));
}

void expect_text_is_free(const std::string& name, const Study& study) {
    const auto drawing = svg_reading::parse(swatches_svg(study));
    const Box page{0, 0, svg_reading::number(drawing[0], "width"),
                   svg_reading::number(drawing[0], "height")};
    std::vector<Box> texts;
    std::vector<Box> fields;
    for (const auto& element : drawing) {
        if (element.name == "text") texts.push_back(svg_reading::text_box(element));
        if (element.name != "rect") continue;
        fields.push_back({svg_reading::number(element, "x"), svg_reading::number(element, "y"),
                          svg_reading::number(element, "width"),
                          svg_reading::number(element, "height")});
        EXPECT_TRUE(contains(page, fields.back())) << name;
    }
    for (std::size_t i = 0; i < texts.size(); ++i) {
        EXPECT_TRUE(contains(page, texts[i])) << name;
        for (std::size_t j = 0; j < i; ++j) EXPECT_FALSE(overlap(texts[i], texts[j])) << name;
        for (std::size_t j = 1; j < fields.size(); ++j) {  // the first is the page
            EXPECT_FALSE(overlap(texts[i], fields[j])) << name;
        }
    }
}

TEST(SwatchSheet, TextStandsBesideTheChipsAndCoversNothing) {
    for (const auto& [name, study] : fixtures::all()) expect_text_is_free(name, study);
    for (const int count : {1, 2, 12, 13, 25, 48, 49, 256}) {
        Study study = fixtures::many();
        study.count = count;
        expect_text_is_free(std::to_string(count), study);
    }
}

TEST(SwatchSheet, ShowsEverySwatchOnceWithItsFigures) {
    for (const int count : {1, 7, 30, 256}) {
        Study study = fixtures::many();
        study.count = count;
        const auto drawing = svg_reading::parse(swatches_svg(study));
        std::multiset<std::string> fills;
        std::multiset<std::string> texts;
        for (const auto& element : drawing) {
            if (element.name == "rect") fills.insert(element.attributes.at("fill"));
            if (element.name == "text") texts.insert(element.text);
        }
        for (const Swatch& swatch : palette_at(study, count).swatches) {
            EXPECT_GE(fills.count(hex(swatch.srgb)), 1U);
            EXPECT_GE(texts.count(hex(swatch.srgb)), 1U);
            EXPECT_EQ(texts.count(swatch.name), 1U) << swatch.name;
        }
        EXPECT_EQ(texts.count("Screen colours are no proof: compare a print or a measured swatch "
                              "before you order ink."),
                  1U);
    }
}

TEST(SwatchSheet, MarksWhatSrgbCannotHold) {
    const std::string svg = swatches_svg(fixtures::wide_gamut());
    EXPECT_NE(svg.find("\u2248\u2009#"), std::string::npos);
    EXPECT_NE(svg.find("sRGB cannot hold"), std::string::npos);
    EXPECT_EQ(swatches_svg(fixtures::photograph()).find("\u2248"), std::string::npos);
}

TEST(SwatchSheet, NearWhiteChipsHaveAnOutline) {
    const auto drawing = svg_reading::parse(swatches_svg(fixtures::poster()));
    for (const auto& element : drawing) {
        if (element.name != "rect") continue;
        if (element.attributes.at("fill") == "#f7f7f3") {
            EXPECT_TRUE(element.attributes.contains("stroke"));
        }
        if (element.attributes.at("fill") == "#1a1a1b") {
            EXPECT_FALSE(element.attributes.contains("stroke"));
        }
    }
}

TEST(SwatchSheet, PngHasTheLayoutOfTheSvg) {
    for (const Study& study : {fixtures::poster(), fixtures::many(), fixtures::hostile()}) {
        const SwatchSheet sheet = lay_out_swatches(study);
        const Decoded png = decode(swatches_png(study));
        ASSERT_EQ(png.width, 2 * sheet.width);
        ASSERT_EQ(png.height, 2 * sheet.height);
        std::size_t fields = 0;
        for (const auto& shape : sheet.shapes) {
            const auto* field = std::get_if<SheetField>(&shape);
            if (field == nullptr || field->box.height < 10) continue;
            ++fields;
            const auto x = static_cast<std::size_t>(2 * field->box.x + field->box.width);
            const auto y = static_cast<std::size_t>(2 * field->box.y + field->box.height);
            EXPECT_EQ(png.pixels[y * png.width + x], field->fill);
        }
        EXPECT_EQ(fields, palette_at(study, study.count).swatches.size());
        EXPECT_EQ(png.pixels[0], (Rgb8{255, 255, 255}));
    }
}

TEST(SwatchSheet, PngShowsText) {
    Study study = fixtures::poster();
    const auto dark_in_head = [](const Study& drawn) {
        const Decoded png = decode(swatches_png(drawn));
        return std::count_if(png.pixels.begin(), png.pixels.begin() + 96 * png.width,
                             [](Rgb8 pixel) { return pixel.g < 128; });
    };
    const auto with_name = dark_in_head(study);
    study.picture.file = "";
    EXPECT_EQ(dark_in_head(study), 0);
    EXPECT_GT(with_name, 1000);
}

}  // namespace
}  // namespace tincture
