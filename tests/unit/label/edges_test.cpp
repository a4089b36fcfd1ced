#include "label/edges.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <string>
#include <utility>

#include "label/label_map.h"
#include "support/parallel.h"
#include "tests/support/pictures.h"
#include "tests/support/random.h"
#include "tests/unit/label/drawn_scene.h"

namespace tincture {
namespace {

using test_support::DrawnScene;
using test_support::Random;
using Map = std::vector<std::uint8_t>;

enum : std::uint8_t { white, black, grey, red, blue, orange };

// Inks with others between them: grey between white and black, orange between red and yellow-white.
std::vector<Rgb8> scene_inks() {
    return {{255, 255, 255}, {12, 12, 16},  {128, 128, 128},
            {200, 20, 30},   {30, 50, 170}, {235, 150, 90}};
}

// Discs, a ring, boxes, lettering of two pixels and of three, dots, strokes of two pixels aslant.
DrawnScene scene() {
    DrawnScene s(230, scene_inks());
    s.disc(black, 50, 50, 34);
    s.disc(white, 50, 50, 20);
    s.disc(red, 50, 50, 8.4);
    s.box(grey, 130.3, 10.7, 215, 60.2);
    s.disc(blue, 172, 35, 17.6);
    s.box(black, 10, 110, 110, 160);
    s.box(orange, 125, 80.5, 220, 140);
    s.disc(red, 150, 110, 18);
    for (int i = 0; i < 5; ++i) s.disc(black, 15.3 + 14.2 * i, 98.4, 1.9);
    // An angular letter, three times.
    for (const double x : {20.0, 45.0, 70.0}) {
        s.line(white, {{x, 150}, {x + 7, 118}, {x + 14, 150}}, 3);
        s.line(white, {{x + 4, 139}, {x + 10, 139}}, 3);
    }
    s.line(black, {{12.2, 178}, {80.9, 201.5}}, 2, true);
    s.line(blue, {{20, 220.4}, {105.3, 220.4}}, 2, true);
    s.line(red, {{120.6, 160}, {120.6, 218}}, 2, true);
    s.line(grey, {{135, 215}, {165, 165}, {190, 214}}, 2, true);
    s.line(white, {{131, 86}, {212, 133}}, 2, true);
    return s;
}

struct Labels {
    Map nearest;
    Map settled;
};

Labels labels_of(const Picture& picture, const Palette& palette, double noise_de) {
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const ColourTable table = count_colours(picture, space);
    const Samples<std::uint8_t> nearest = label_pixels(picture, table, space, palette);
    const Samples<std::uint8_t> settled =
        settled_edges(nearest, PixelLab(picture, table, space), palette, noise_de);
    return {{nearest.data(), nearest.data() + nearest.size()},
            {settled.data(), settled.data() + settled.size()}};
}

struct Wanted {
    double blur;
    double noise;  // in steps of 255
    double noise_de;
    int least_before;  // halo pixels of the nearest labels: so that there is something to settle
    int most_before;
    int most_after;
    double least_kept;
    double most_kept;  // a bound far below what is reached would hide a loss
    int whole;         // of five strokes
};

void check(const Wanted& wanted) {
    const DrawnScene drawn = scene();
    const Labels labels =
        labels_of(drawn.picture(wanted.blur, wanted.noise), drawn.palette(), wanted.noise_de);
    const int before = drawn.halo_pixels(labels.nearest);
    EXPECT_GE(before, wanted.least_before);
    EXPECT_LE(before, wanted.most_before);
    EXPECT_LE(drawn.halo_pixels(labels.settled), wanted.most_after);
    const DrawnScene::Strokes strokes = drawn.kept_strokes(labels.settled);
    EXPECT_GE(strokes.kept, wanted.least_kept);
    EXPECT_LE(strokes.kept, wanted.most_kept);
    EXPECT_EQ(strokes.all, 5);
    EXPECT_GE(strokes.whole, wanted.whole);
}

TEST(SettledEdges, Clean) {
    check({0, 0, 0, 550, 700, 12, 0.98, 1, 5});
}
TEST(SettledEdges, Noisy) {
    check({0, 5.1, 2.6, 550, 750, 14, 0.98, 1, 5});
}
TEST(SettledEdges, Blurred) {
    check({1, 0, 0, 2200, 2600, 10, 0.91, 0.96, 2});
}
TEST(SettledEdges, BlurredAndNoisy) {
    check({1, 3, 1.5, 2200, 2600, 10, 0.91, 0.96, 2});
}

// Strokes of one pixel to two, nowhere flat: what is sure along them tells about their edges.
DrawnScene fine_strokes() {
    DrawnScene drawn(160, scene_inks());
    drawn.box(black, 0, 80, 160, 160);
    Random random(8);
    for (int i = 0; i < 36; ++i) {
        const double x = 14 + 26 * (i % 6);
        const double y = 12 + 27 * (i / 6);
        const auto end = [&] {
            return std::pair(x + random.between(-11, 11), y + random.between(-11, 11));
        };
        const std::array<std::uint8_t, 3> inks = {static_cast<std::uint8_t>(i < 18 ? black : white),
                                                  blue, orange};
        drawn.line(inks[random.below(3)], {end(), end(), end()}, random.between(1.2, 2), true);
    }
    return drawn;
}

TEST(SettledEdges, FineStrokes) {
    const DrawnScene drawn = fine_strokes();
    for (const double noise : {0.0, 5.1}) {
        const Labels labels = labels_of(drawn.picture(0, noise), drawn.palette(), noise / 2);
        EXPECT_GE(drawn.halo_pixels(labels.nearest), 100);
        EXPECT_LE(drawn.halo_pixels(labels.settled), 1);
        const DrawnScene::Strokes strokes = drawn.kept_strokes(labels.settled);
        EXPECT_GE(strokes.kept, 0.985);
        EXPECT_EQ(strokes.whole, strokes.all);
    }
}

// White, with the pixels of `rows` (a digit for each tenth of black) in the middle.
Picture spotted(const std::vector<std::string>& rows) {
    Picture picture;
    picture.width = picture.height = 40;
    picture.samples8 = Samples<std::uint8_t>(picture.pixel_count() * 3);
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        const std::size_t x = i % 40 - 15;  // wraps round left of the middle
        const std::size_t y = i / 40 - 15;
        const int tenths = y < rows.size() && x < rows[y].size() ? rows[y][x] - '0' : 0;
        for (std::size_t c = 0; c < 3; ++c) {
            picture.samples8[3 * i + c] = static_cast<std::uint8_t>(255 - 243 * tenths / 9);
        }
    }
    return picture;
}

std::vector<std::string> middle_of(const Map& labels, std::size_t rows, std::size_t columns) {
    std::vector<std::string> middle(rows);
    for (std::size_t y = 0; y < rows; ++y) {
        for (std::size_t x = 0; x < columns; ++x) {
            middle[y] += static_cast<char>('0' + labels[(y + 15) * 40 + x + 15]);
        }
    }
    return middle;
}

// So many half covered pixels at the tip that grey fits more of them than black does.
TEST(SettledEdges, SoftTipOfAStroke) {
    Palette palette = DrawnScene(1, {{255, 255, 255}, {12, 12, 12}, {134, 134, 134}}).palette();
    const std::vector<std::string> rows = {"00000", "22222", "55555", "00900", "00900",
                                           "00900", "00900", "00900", "00900"};
    const Labels labels = labels_of(spotted(rows), palette, 0);
    EXPECT_EQ(middle_of(labels.nearest, 4, 5)[2], "22222");
    for (const std::string& row : middle_of(labels.settled, rows.size(), 5)) {
        EXPECT_EQ(row.find('2'), std::string::npos) << row;
    }
    EXPECT_EQ(middle_of(labels.settled, 9, 5)[5], "00100");
}

// A ring of grey, the mixture of what lies on its two sides, is no blend where it is thick.
TEST(SettledEdges, ThickMixturesStand) {
    DrawnScene drawn(120, scene_inks());
    drawn.disc(grey, 60, 60, 40);
    drawn.disc(black, 60, 60, 34);
    for (const double blur : {0.0, 1.0}) {
        const Labels labels = labels_of(drawn.picture(blur), drawn.palette(), 0);
        const Map truth = drawn.truth();
        int ring = 0;
        int kept = 0;
        for (std::size_t i = 0; i < truth.size(); ++i) {
            ring += truth[i] == grey ? 1 : 0;
            kept += truth[i] == grey && labels.settled[i] == grey ? 1 : 0;
        }
        EXPECT_GE(kept, ring * 9 / 10) << blur;
        EXPECT_LE(drawn.halo_pixels(labels.settled), 2) << blur;
    }
}

// Noise leaves wrong labels in flat areas of inks that are near each other.
TEST(SettledEdges, NoPinholesInFlatAreas) {
    const std::vector<Rgb8> inks = {{200, 190, 180}, {178, 168, 160}, {20, 60, 90}};
    DrawnScene drawn(150, inks);
    drawn.disc(1, 75, 75, 40);
    drawn.box(2, 10, 10, 30, 140);
    const Labels labels = labels_of(drawn.picture(0, 6), drawn.palette(), 3);
    EXPECT_GE(drawn.halo_pixels(labels.nearest), 100);
    EXPECT_LE(drawn.halo_pixels(labels.settled), drawn.halo_pixels(labels.nearest) / 20);
}

TEST(SettledEdges, FlatAreasStay) {
    const DrawnScene drawn = scene();
    const Labels labels = labels_of(drawn.picture(), drawn.palette(), 0);
    for (int y = 1; y + 1 < drawn.side(); ++y) {
        for (int x = 1; x + 1 < drawn.side(); ++x) {
            bool flat = true;
            const auto at = [&](int dx, int dy) {
                return static_cast<std::size_t>((y + dy) * drawn.side() + x + dx);
            };
            for (int d = 0; d < 9; ++d) {
                flat &= labels.nearest[at(d % 3 - 1, d / 3 - 1)] == labels.nearest[at(0, 0)];
            }
            if (!flat) continue;
            EXPECT_EQ(labels.settled[at(0, 0)], labels.nearest[at(0, 0)]);
        }
    }
}

TEST(SettledEdges, ThreadsHaveNoSay) {
    const DrawnScene drawn = scene();
    for (const double blur : {0.0, 1.0}) {
        const Picture picture = drawn.picture(blur, 3);
        set_thread_count(1);
        const Labels wanted = labels_of(picture, drawn.palette(), 1.5);
        EXPECT_NE(wanted.settled, wanted.nearest);
        for (const int threads : {2, 3, 7}) {
            set_thread_count(threads);
            EXPECT_EQ(labels_of(picture, drawn.palette(), 1.5).settled, wanted.settled) << threads;
        }
        set_thread_count(0);
    }
}

// Neither changed nor lent to others, whatever colour lies under them.
TEST(SettledEdges, TransparentPixels) {
    const DrawnScene drawn = scene();
    for (const double blur : {0.0, 1.0}) {
        Map first;
        for (const int under : {0, 128, 255}) {
            Picture picture = drawn.picture(blur);
            picture.opaque = Samples<std::uint8_t>(picture.pixel_count());
            for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
                const std::size_t x = i % picture.width;
                const std::size_t y = i / picture.width;
                picture.opaque[i] = (x + 2 * y) % 230 < 60 || (x * y) % 97 == 0 ? 0 : 1;
                if (picture.opaque[i] != 0) continue;
                for (std::size_t c = 0; c < 3; ++c)
                    picture.samples8[3 * i + c] = static_cast<std::uint8_t>(under);
            }
            const Labels labels = labels_of(picture, drawn.palette(), 0);
            for (std::size_t i = 0; i < labels.settled.size(); ++i) {
                EXPECT_EQ(picture.opaque[i] == 0, labels.settled[i] == drawn.inks().size());
            }
            if (first.empty()) first = labels.settled;
            EXPECT_EQ(labels.settled, first);
        }
    }
}

// Beside what is not opaque nothing is known about what the blur mixed in.
TEST(SettledEdges, BesideTransparentPixels) {
    DrawnScene drawn(120, {{12, 12, 12}, {134, 134, 134}, {255, 255, 255}});
    drawn.box(1, 0, 0, 120, 60);
    for (int i = 0; i < 4; ++i) drawn.disc(2, 15.0 + 30 * i, 92, 12);
    Picture picture = drawn.picture(1);
    picture.opaque = Samples<std::uint8_t>(picture.pixel_count());
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        picture.opaque[i] = i / 120 < 40 && i % 120 < 60 ? 0 : 1;
    }
    const Labels labels = labels_of(picture, drawn.palette(), 0);
    for (std::size_t i = 0; i < std::size_t{120} * 50; ++i) {
        EXPECT_EQ(labels.settled[i], picture.opaque[i] != 0 ? 1 : 3) << i % 120 << ' ' << i / 120;
    }
}

// Anything ends with labels of the palette.
TEST(SettledEdges, AnyPictureAndPalette) {
    Random random(31);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    for (const test_support::Size size :
         {test_support::Size{1, 1}, {1, 300}, {300, 1}, {2, 2}, {9, 3}, {130, 210}}) {
        for (const int count : {1, 2, 24, 33, 255, 256}) {
            Picture picture = test_support::photograph_like(random, 8, size);
            Palette palette;
            palette.count = count;
            for (int k = 0; k < count; ++k) {
                palette.swatches.emplace_back();
                palette.swatches.back().lab = {random.between(0, 100), random.between(-60, 60),
                                               random.between(-60, 60)};
            }
            if (count < 256) {
                test_support::punch_holes(picture, random);
                picture.opaque[0] = 1;
            }
            for (const double noise_de : {0.0, 5.0}) {
                const Labels labels = labels_of(picture, palette, noise_de);
                for (std::size_t i = 0; i < labels.settled.size(); ++i) {
                    if (test_support::is_opaque(picture, i)) {
                        EXPECT_LT(labels.settled[i], count);
                    } else {
                        EXPECT_EQ(labels.settled[i], count);
                    }
                }
            }
        }
    }
}

// Blocks of rows meet unseen: what is drawn lies across their borders wherever it is put.
TEST(SettledEdges, PlaceHasNoSay) {
    std::vector<Map> seen;
    for (const int down : {0, 41, 80, 96, 130}) {
        DrawnScene drawn(260, scene_inks());
        drawn.disc(black, 100, 62.3 + down, 30);
        drawn.disc(red, 120.4, 70 + down, 20);
        drawn.line(blue, {{30, 50.5 + down}, {180, 80.5 + down}}, 2);
        const Labels labels = labels_of(drawn.picture(), drawn.palette(), 0);
        const auto start = labels.settled.begin() + (20 + down) * 260;
        seen.emplace_back(start, start + 100 * 260);
        EXPECT_EQ(seen.back(), seen.front()) << down;
    }
}

}  // namespace
}  // namespace tincture
