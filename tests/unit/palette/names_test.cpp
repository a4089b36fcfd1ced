#include "palette/names.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cctype>
#include <cmath>
#include <random>
#include <set>

namespace tincture {
namespace {

double draw(std::mt19937& random, double low, double high) {
    return low + (high - low) * static_cast<double>(random()) / 4294967296.0;
}

std::vector<Lab> random_labs(unsigned seed, std::size_t count, double spread) {
    std::mt19937 random(seed);
    std::vector<Lab> labs;
    for (std::size_t i = 0; i < count; ++i) {
        labs.push_back({50 + draw(random, -spread, spread) / 2, draw(random, -spread, spread),
                        draw(random, -spread, spread)});
    }
    return labs;
}

bool has_letter_behind_digit(const std::string& name) {
    const auto found =
        std::adjacent_find(name.begin(), name.end(), [](unsigned char one, unsigned char other) {
            return std::isdigit(one) != 0 && std::isalpha(other) != 0;
        });
    return found != name.end();
}

std::string name_of(const Lab& lab) {
    return name_colours(std::vector<Lab>{lab})[0];
}

// CIELAB D50 of sRGB colours as CSS Color 4 gives them (from memory), in the words that people use.
TEST(Names, SpeakOfWellKnownColours) {
    EXPECT_EQ(name_of({100, 0, 0}), "white");
    EXPECT_EQ(name_of({0, 0, 0}), "black");
    EXPECT_EQ(name_of({53.6, 0, 0}), "mid grey");
    EXPECT_EQ(name_of({80, 1, -2}), "pale grey");
    EXPECT_EQ(name_of({25, -1, 1}), "deep grey");
    EXPECT_EQ(name_of({54.29, 80.8, 69.89}), "mid strong red");
    EXPECT_EQ(name_of({87.82, -79.27, 80.99}), "pale strong green");
    EXPECT_EQ(name_of({29.57, 68.3, -112.03}), "deep strong blue");
    EXPECT_EQ(name_of({97.61, -15.75, 93.39}), "pale strong yellow");
    EXPECT_EQ(name_of({90.67, -50.67, -14.96}), "pale strong teal");
    EXPECT_EQ(name_of({60.17, 93.55, -60.5}), "mid strong purple");
    EXPECT_EQ(name_of({75.6, 27.5, 79.1}), "pale strong orange");
    EXPECT_EQ(name_of({37.5, 26.4, 41.0}), "deep strong brown");
    EXPECT_EQ(name_of({84.0, 24.1, 3.3}), "pale soft pink");
    EXPECT_EQ(name_of({52.0, -22.8, 20.1}), "mid soft green");
    EXPECT_EQ(name_of({52.0, -3.9, -8.4}), "mid greyish blue");
}

TEST(Names, HueTurnsTheWholeCircleInOrder) {
    std::vector<std::string> hues;
    for (int degree = 0; degree < 360; ++degree) {
        const double angle = degree * 3.14159265358979 / 180;
        const std::string name = name_of({60, 50 * std::cos(angle), 50 * std::sin(angle)});
        const std::string hue = name.substr(name.rfind(' ') + 1);
        if (hues.empty() || hues.back() != hue) hues.push_back(hue);
    }
    EXPECT_EQ(hues, (std::vector<std::string>{"pink", "red", "orange", "yellow", "olive", "green",
                                              "teal", "blue", "violet", "purple", "pink"}));
}

TEST(Names, NamesakesGetFiguresAndOnlyThey) {
    const std::vector<Lab> labs = {{52, -23.7, 19.9}, {97, 0, 0}, {55, -20, 25}};
    const auto names = name_colours(labs);
    EXPECT_EQ(names[0], "mid soft green 52 31 140");
    EXPECT_EQ(names[1], "white");
    EXPECT_EQ(names[2], "mid soft green 55 32 129");
}

TEST(Names, FiguresGetDecimalsOnlyWhereNeeded) {
    const std::vector<Lab> labs = {{52.01, -20, 20}, {52.04, -20, 20}, {60, -20, 20}};
    const auto names = name_colours(labs);
    EXPECT_EQ(names[0], "mid soft green 52.01 28.28 135.00");
    EXPECT_EQ(names[1], "mid soft green 52.04 28.28 135.00");
    EXPECT_EQ(names[2], "mid soft green 60 28 135");
}

// Rounding must not lead two colours from different whole figures to the same decimal.
TEST(Names, FiguresOfDifferentLengthDoNotMeet) {
    std::vector<Lab> labs;
    for (const double lightness : {50.46, 50.47, 50.53, 50.54, 50.49, 50.51}) {
        labs.push_back({lightness, 20, 20});
    }
    const auto names = name_colours(labs);
    EXPECT_EQ(std::set<std::string>(names.begin(), names.end()).size(), labs.size());
}

// Against the C library's atan2, which agrees far better than to six decimals.
TEST(Names, HueAngleIsExactAllRound) {
    for (int degree = 0; degree < 360; degree += 3) {
        const double angle = (degree + 0.123457) * 3.14159265358979324 / 180;
        const double a = 50 * std::cos(angle);
        const double b = 50 * std::sin(angle);
        const std::vector<Lab> labs = {{60.000001, a, b}, {60.000002, a, b}};
        const std::string name = name_colours(labs)[0];
        EXPECT_NEAR(std::stod(name.substr(name.rfind(' '))), degree + 0.123457, 1.1e-6) << name;
    }
}

TEST(Names, HueFigureNeverSays360) {
    const std::vector<Lab> labs = {{70, 30, -0.1}, {60, 30, 0}};
    EXPECT_EQ(name_colours(labs)[0], "mid soft pink 70 30 0");
}

TEST(Names, EqualColoursStillDiffer) {
    const std::vector<Lab> labs(4, Lab{40, 10, 10});
    const auto names = name_colours(labs);
    EXPECT_EQ(std::set<std::string>(names.begin(), names.end()).size(), 4U);
    EXPECT_EQ(names[3], names[0] + " again again again");
}

TEST(Names, AreUniqueAndWellFormedFor256RandomColours) {
    for (unsigned seed = 0; seed < 40; ++seed) {
        const double spread = seed % 4 == 0 ? 0.5 : seed % 4 == 1 ? 8 : 80;
        const auto names = name_colours(random_labs(seed, 256, spread));
        EXPECT_EQ(std::set<std::string>(names.begin(), names.end()).size(), 256U) << seed;
        for (const std::string& name : names) {
            EXPECT_FALSE(has_letter_behind_digit(name)) << name;
        }
    }
}

TEST(Names, StayWhenAColourIsAddedElsewhereOrTheOrderChanges) {
    const std::vector<Lab> labs = random_labs(3, 60, 60);
    const auto names = name_colours(labs);
    std::vector<Lab> more = labs;
    more.insert(more.begin(), {50, 0, 140});  // no random colour is as vivid: no namesake
    ASSERT_EQ(name_of(more[0]), "mid strong olive");
    std::vector<Lab> backwards(labs.rbegin(), labs.rend());
    const auto with_more = name_colours(more);
    auto turned = name_colours(backwards);
    std::reverse(turned.begin(), turned.end());
    EXPECT_EQ(turned, names);
    for (std::size_t i = 0; i < names.size(); ++i) {
        if (names[i].find("mid strong olive") == 0) continue;
        EXPECT_EQ(with_more[i + 1], names[i]);
    }
}

}  // namespace
}  // namespace tincture
