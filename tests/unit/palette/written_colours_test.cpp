#include "palette/written_colours.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numeric>
#include <set>

#include "colour/delta_e.h"
#include "tests/support/profiles.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;

ColourSpace srgb() {
    return ColourSpace::standard(ColourModel::rgb);
}
ColourSpace wide() {
    return ColourSpace::from_icc(test_support::wide_gamut_profile(), ColourModel::rgb, "");
}

Rgb8 random_rgb(Random& random) {
    const auto level = [&] { return static_cast<std::uint8_t>(random.below(256)); };
    return {level(), level(), level()};
}

// A colour that lies between written ones.
Lab lab_between(const ColourSpace& space, Random& random) {
    const float device[3] = {static_cast<float>(random.unit()), static_cast<float>(random.unit()),
                             static_cast<float>(random.unit())};
    float L = 0, a = 0, b = 0;
    space.to_lab(device, 1, {&L, &a, &b});
    return {L, a, b};
}

// The smallest distance of `wanted` to any colour within `reach` steps a channel of `around`.
double least_distance(const ColourSpace& space, const Lab& wanted, Rgb8 around, int reach) {
    double least = 1e9;
    for (int r = std::max(0, around.r - reach); r <= std::min(255, around.r + reach); ++r) {
        for (int g = std::max(0, around.g - reach); g <= std::min(255, around.g + reach); ++g) {
            for (int b = std::max(0, around.b - reach); b <= std::min(255, around.b + reach); ++b) {
                const Rgb8 rgb = {static_cast<std::uint8_t>(r), static_cast<std::uint8_t>(g),
                                  static_cast<std::uint8_t>(b)};
                least = std::min(least, delta_e_76(space.lab_of(rgb), wanted));
            }
        }
    }
    return least;
}

void expect_all_different(const std::vector<Rgb8>& colours) {
    EXPECT_EQ(std::set<Rgb8>(colours.begin(), colours.end()).size(), colours.size());
}

TEST(WrittenColours, AreTheNearestOfTheirNeighbourhood) {
    for (const bool in_srgb : {true, false}) {
        const ColourSpace space = in_srgb ? srgb() : wide();
        Random random(1);
        for (int i = 0; i < 400; ++i) {
            const Lab wanted = lab_between(space, random);
            const Rgb8 found = written_colours(std::vector<Lab>{wanted}, space).front();
            EXPECT_EQ(delta_e_76(space.lab_of(found), wanted),
                      least_distance(space, wanted, found, 2))
                << wanted.L << " " << wanted.a << " " << wanted.b;
        }
    }
}

TEST(WrittenColours, ExactColoursComeBack) {
    for (const bool in_srgb : {true, false}) {
        const ColourSpace space = in_srgb ? srgb() : wide();
        Random random(2);
        for (int palette = 0; palette < 60; ++palette) {
            std::set<Rgb8> colours;
            const auto count = 1 + random.below(40);
            while (colours.size() < count) {
                // Some of them neighbours, some at the ends of the space.
                const Rgb8 rgb = random_rgb(random);
                colours.insert(rgb);
                colours.insert({rgb.r, static_cast<std::uint8_t>(rgb.g ^ 1), rgb.b});
                colours.insert({0, rgb.g, 255});
            }
            const std::vector<Rgb8> exact(colours.begin(), colours.end());
            std::vector<Lab> wanted;
            for (const Rgb8 rgb : exact) wanted.push_back(space.lab_of(rgb));
            EXPECT_EQ(written_colours(wanted, space), exact);
        }
    }
}

TEST(WrittenColours, AreNeverTwoTheSame) {
    const std::vector<Lab> wanted = {{0, 0, 0},     {100, 0, 0},      {50, 0, 0},
                                     {33, 17, -20}, {60, 150, -150},  {97.6, -15.7, 93.4},
                                     {-20, 0, 0},   {150, -200, 200}, {2, 3, -4}};
    for (const bool in_srgb : {true, false}) {
        const ColourSpace space = in_srgb ? srgb() : wide();
        for (const Lab& lab : wanted) {
            const std::vector<Rgb8> written = written_colours(std::vector<Lab>(256, lab), space);
            ASSERT_EQ(written.size(), 256U);
            expect_all_different(written);
            // Each is a near one: 256 colours are a ball of four steps, half of it at a wall.
            const Lab first = space.lab_of(written.front());
            for (const Rgb8 rgb : written) EXPECT_LT(delta_e_76(space.lab_of(rgb), first), 40);
        }
    }
}

TEST(WrittenColours, CrowdsStayDifferent) {
    Random random(3);
    const ColourSpace space = srgb();
    for (int trial = 0; trial < 10; ++trial) {
        std::vector<Lab> wanted;
        for (int i = 0; i < 256; ++i) {
            wanted.push_back({40 + 0.5 * random.bell(), 0.5 * random.bell(), 0.5 * random.bell()});
        }
        expect_all_different(written_colours(wanted, space));
    }
}

TEST(WrittenColours, TheFirstOfEqualOnesIsTheNearest) {
    const ColourSpace space = srgb();
    const Rgb8 rgb = {100, 150, 200};
    const Lab lab = space.lab_of(rgb);
    const std::vector<Rgb8> written = written_colours(std::vector<Lab>{lab, lab}, space);
    EXPECT_EQ(written[0], rgb);
    // The second: nearest of all others around.
    double least = 1e9;
    Rgb8 best;
    for (int i = 0; i < 125; ++i) {
        const Rgb8 other = {static_cast<std::uint8_t>(98 + i % 5),
                            static_cast<std::uint8_t>(148 + i / 5 % 5),
                            static_cast<std::uint8_t>(198 + i / 25)};
        const double distance = delta_e_76(space.lab_of(other), lab);
        if (other != rgb && distance < least) {
            least = distance;
            best = other;
        }
    }
    EXPECT_EQ(written[1], best);
}

struct Made {
    std::vector<Rgb8> written;
    std::vector<Lab> lab;
    std::vector<std::uint64_t> pixels;
};

Made made_of(const ColourSpace& space, const std::vector<Rgb8>& written,
             const std::vector<std::uint64_t>& pixels) {
    Made made{written, {}, pixels};
    for (const Rgb8 rgb : written) made.lab.push_back(space.lab_of(rgb));
    return made;
}

TEST(MakePalette, PutsMostPixelsFirst) {
    const ColourSpace space = srgb();
    const Made made = made_of(space, {{9, 9, 9}, {200, 0, 0}, {0, 200, 0}, {0, 0, 200}, {0, 0, 7}},
                              {10, 50, 30, 30, 0});
    const Palette palette = make_palette(made.written, made.lab, made.pixels, 2, space, space);
    EXPECT_EQ(palette.count, 5);
    ASSERT_EQ(palette.swatches.size(), 5U);
    const std::vector<Rgb8> order = {{200, 0, 0}, {0, 0, 200}, {0, 200, 0}, {9, 9, 9}, {0, 0, 7}};
    double share = 0;
    std::set<std::string> names;
    for (std::size_t i = 0; i < 5; ++i) {
        const Swatch& swatch = palette.swatches[i];
        EXPECT_EQ(swatch.written, order[i]);
        EXPECT_EQ(swatch.srgb, order[i]);
        EXPECT_FALSE(swatch.hex_de00);
        EXPECT_EQ(swatch.kept, order[i] == made.written[0] || order[i] == made.written[1]);
        EXPECT_EQ(delta_e_76(swatch.lab, space.lab_of(order[i])), 0);
        EXPECT_DOUBLE_EQ(swatch.share, static_cast<double>(swatch.pixels) / 120);
        share += swatch.share;
        names.insert(swatch.name);
    }
    EXPECT_NEAR(share, 1, 1e-12);
    EXPECT_EQ(names.size(), 5U);
    EXPECT_FALSE(names.contains(""));
}

TEST(MakePalette, SaysHowFarSrgbIsOff) {
    const ColourSpace space = wide();
    const ColourSpace standard = srgb();
    Random random(4);
    int outside = 0;
    for (int i = 0; i < 300; ++i) {
        const Made made = made_of(space, {random_rgb(random)}, {1});
        const Palette palette =
            make_palette(made.written, made.lab, made.pixels, 0, space, standard);
        const Swatch& swatch = palette.swatches.front();
        const double off = delta_e_2000(swatch.lab, standard.lab_of(swatch.srgb));
        if (swatch.hex_de00) {
            ++outside;
            EXPECT_EQ(*swatch.hex_de00, off);
            EXPECT_GT(off, 0.5);
        } else {
            EXPECT_LE(off, 0.5);
        }
    }
    EXPECT_GT(outside, 100);
    EXPECT_LT(outside, 290);
    // The corners of the wide space are far out.
    const Made corner = made_of(space, {{0, 255, 0}}, {1});
    const Palette green =
        make_palette(corner.written, corner.lab, corner.pixels, 0, space, standard);
    ASSERT_TRUE(green.swatches.front().hex_de00);
    EXPECT_GT(*green.swatches.front().hex_de00, 4);
}

// Colours that sRGB holds are off by rounding alone, also where steps are large.
TEST(MakePalette, RoundingIsNotCalledOutside) {
    const ColourSpace space = wide();
    const ColourSpace standard = srgb();
    Random random(5);
    for (int i = 0; i < 400; ++i) {
        const Lab inside = lab_between(standard, random);
        const Rgb8 rgb = {100, 100, 100};
        const Palette palette = make_palette(std::vector<Rgb8>{rgb}, std::vector<Lab>{inside},
                                             std::vector<std::uint64_t>{1}, 0, space, standard);
        EXPECT_FALSE(palette.swatches.front().hex_de00)
            << inside.L << " " << inside.a << " " << inside.b << ": "
            << palette.swatches.front().hex_de00.value_or(0);
    }
}

}  // namespace
}  // namespace tincture
