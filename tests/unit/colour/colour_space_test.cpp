#include "colour/colour_space.h"

#include <gtest/gtest.h>

#include <cmath>
#include <stdexcept>

#include "support/error.h"
#include "support/parallel.h"
#include "tests/support/profiles.h"
#include "tests/support/published.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Bytes;
using test_support::LcmsLab;
using test_support::Random;

// to_lab() of some device values.
std::vector<Lab> labs_of(const ColourSpace& space, const std::vector<float>& device) {
    const std::size_t n = device.size() / static_cast<std::size_t>(channel_count(space.model()));
    std::vector<float> L(n), a(n), b(n);
    space.to_lab(device.data(), n, {L.data(), a.data(), b.data()});
    std::vector<Lab> labs;
    for (std::size_t i = 0; i < n; ++i) labs.push_back({L[i], a[i], b[i]});
    return labs;
}

Lab lab_of(const ColourSpace& space, const std::vector<float>& device) {
    return labs_of(space, device).front();
}

void expect_near(const Lab& found, const Lab& wanted, double bound) {
    EXPECT_NEAR(found.L, wanted.L, bound);
    EXPECT_NEAR(found.a, wanted.a, bound);
    EXPECT_NEAR(found.b, wanted.b, bound);
}

bool is_stepped(double value) {
    return std::isfinite(value) &&
           value * lab_steps_per_unit == std::floor(value * lab_steps_per_unit);
}

void expect_stepped(const Lab& lab) {
    EXPECT_TRUE(is_stepped(lab.L) && is_stepped(lab.a) && is_stepped(lab.b))
        << lab.L << " " << lab.a << " " << lab.b;
}

// Device values at random against LittleCMS in double precision.
void expect_as_lcms(const ColourSpace& space, const LcmsLab& lcms) {
    Random random(3);
    const auto channels = static_cast<std::size_t>(channel_count(space.model()));
    for (int i = 0; i < 2000; ++i) {
        std::vector<float> device;
        for (std::size_t c = 0; c < channels; ++c) {
            device.push_back(static_cast<float>(random.below(4)) < 1
                                 ? static_cast<float>(random.below(2))
                                 : static_cast<float>(random.unit()));
        }
        const Lab found = lab_of(space, device);
        expect_near(found, lcms({device.begin(), device.end()}), 1e-3);
        expect_stepped(found);
    }
}

Error input_error(const Bytes& icc, ColourModel model) {
    try {
        (void)ColourSpace::from_icc(icc, model, "some picture");
    } catch (const Error& error) {
        return error;
    }
    ADD_FAILURE() << "no error";
    return {ErrorKind::usage, "", ""};
}

// LittleCMS 2.14 by its own command-line program; see SOURCES.md.
TEST(ColourSpace, StandardRgbIsThePublishedLab) {
    const test_support::PublishedTable table =
        test_support::read_published("srgb_lab_reference.csv");
    ASSERT_EQ(table.rows.size(), 36U);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    for (std::size_t i = 0; i < table.rows.size(); ++i) {
        SCOPED_TRACE(table.text(i, "name"));
        const auto level = [&](const char* channel) {
            return static_cast<std::uint8_t>(table.number(i, channel));
        };
        const Rgb8 rgb = {level("R"), level("G"), level("B")};
        const Lab wanted = {table.number(i, "d50_lcms_L"), table.number(i, "d50_lcms_a"),
                            table.number(i, "d50_lcms_b")};
        expect_near(space.lab_of(rgb), wanted, 1e-3);
        expect_near(
            lab_of(space, {static_cast<float>(rgb.r / 255.0), static_cast<float>(rgb.g / 255.0),
                           static_cast<float>(rgb.b / 255.0)}),
            wanted, 1e-3);
    }
}

TEST(ColourSpace, LabOfAColourIsThatOfAPixel) {
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    for (int level = 0; level < 256; ++level) {
        const auto value = static_cast<std::uint8_t>(level);
        // As the pixels of a picture reach to_lab(): divided in double precision.
        const auto device = static_cast<float>(level / 255.0);
        const Lab found = space.lab_of({value, 17, value});
        const Lab wanted = lab_of(space, {device, static_cast<float>(17 / 255.0), device});
        EXPECT_TRUE(found.L == wanted.L && found.a == wanted.a && found.b == wanted.b) << level;
    }
}

TEST(ColourSpace, StandardGreyIsEqualRgb) {
    const ColourSpace grey = ColourSpace::standard(ColourModel::grey);
    const ColourSpace rgb = ColourSpace::standard(ColourModel::rgb);
    for (int level = 0; level <= 65535; level += 51) {
        const auto device = static_cast<float>(level / 65535.0);
        expect_near(lab_of(grey, {device}), lab_of(rgb, {device, device, device}), 1e-3);
    }
    expect_near(lab_of(grey, {1}), {100, 0, 0}, 1e-3);
    expect_near(lab_of(grey, {0}), {0, 0, 0}, 1e-3);
}

TEST(ColourSpace, ThereIsNoStandardCmyk) {
    EXPECT_THROW((void)ColourSpace::standard(ColourModel::cmyk), std::invalid_argument);
}

TEST(ColourSpace, FollowsProfiles) {
    const Bytes wide = test_support::wide_gamut_profile();
    expect_as_lcms(ColourSpace::from_icc(wide, ColourModel::rgb, ""), {wide, ColourModel::rgb});
    const Bytes table = test_support::rgb_table_profile();
    expect_as_lcms(ColourSpace::from_icc(table, ColourModel::rgb, ""), {table, ColourModel::rgb});
    const Bytes cmyk = test_support::cmyk_profile();
    expect_as_lcms(ColourSpace::from_icc(cmyk, ColourModel::cmyk, ""), {cmyk, ColourModel::cmyk});
    const Bytes grey = test_support::grey_profile();
    expect_as_lcms(ColourSpace::from_icc(grey, ColourModel::grey, ""), {grey, ColourModel::grey});
    expect_as_lcms(ColourSpace::standard(ColourModel::rgb), {});
}

TEST(ColourSpace, WideGamutIsWide) {
    const ColourSpace wide =
        ColourSpace::from_icc(test_support::wide_gamut_profile(), ColourModel::rgb, "");
    EXPECT_LT(wide.lab_of({0, 255, 0}).a, -120);
    const ColourSpace paper =
        ColourSpace::from_icc(test_support::cmyk_profile(), ColourModel::cmyk, "");
    EXPECT_GT(lab_of(paper, {0, 0, 0, 0}).L, 90) << "no ink is paper";
    EXPECT_LT(lab_of(paper, {1, 1, 1, 1}).L, 10) << "full ink is dark";
}

TEST(ColourSpace, GreyWithAnRgbProfileIsEqualRgbThere) {
    const Bytes wide = test_support::wide_gamut_profile();
    const ColourSpace grey = ColourSpace::from_icc(wide, ColourModel::grey, "");
    const ColourSpace rgb = ColourSpace::from_icc(wide, ColourModel::rgb, "");
    std::vector<float> levels;
    for (int i = 0; i < 3000; ++i) levels.push_back(static_cast<float>(i) / 2999.0F);
    const std::vector<Lab> found = labs_of(grey, levels);
    for (std::size_t i = 0; i < levels.size(); ++i) {
        expect_near(found[i], lab_of(rgb, {levels[i], levels[i], levels[i]}), 0);
    }
    EXPECT_EQ(grey.model(), ColourModel::grey);
    EXPECT_FALSE(grey.is_writable());
}

TEST(ColourSpace, AnyNumberOfColoursAtOnce) {
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    Random random(4);
    std::vector<float> device(3 * 3000);
    for (float& value : device) value = static_cast<float>(random.unit());
    for (const std::size_t n : {0U, 1U, 1023U, 1024U, 1025U, 2048U, 3000U}) {
        std::vector<float> L(n + 1, -7), a(n + 1, -7), b(n + 1, -7);
        space.to_lab(device.data(), n, {L.data(), a.data(), b.data()});
        EXPECT_TRUE(L[n] == -7 && a[n] == -7 && b[n] == -7) << "written past the end";
        for (std::size_t i = 0; i < n; i += 97) {
            const Lab one = lab_of(space, {device[3 * i], device[3 * i + 1], device[3 * i + 2]});
            expect_near({L[i], a[i], b[i]}, one, 0);
        }
    }
}

TEST(ColourSpace, SeveralThreadsAtOnce) {
    const ColourSpace space =
        ColourSpace::from_icc(test_support::wide_gamut_profile(), ColourModel::rgb, "");
    Random random(5);
    std::vector<float> device(3 * 5000);
    for (float& value : device) value = static_cast<float>(random.unit());
    const std::vector<Lab> wanted = labs_of(space, device);
    set_thread_count(7);
    parallel_for(28, [&](std::size_t) {
        const std::vector<Lab> found = labs_of(space, device);
        for (std::size_t i = 0; i < found.size(); ++i) expect_near(found[i], wanted[i], 0);
    });
    set_thread_count(0);
}

TEST(ColourSpace, WrittenColoursComeBack) {
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    const ColourSpace wide =
        ColourSpace::from_icc(test_support::wide_gamut_profile(), ColourModel::rgb, "");
    Random random(6);
    for (const ColourSpace* space : {&srgb, &wide}) {
        ASSERT_TRUE(space->is_writable());
        for (int i = 0; i < 2000; ++i) {
            const auto level = [&] { return static_cast<std::uint8_t>(random.below(256)); };
            const Rgb8 rgb = {level(), level(), level()};
            EXPECT_EQ(space->to_rgb8(space->lab_of(rgb)), rgb);
        }
        EXPECT_EQ(space->to_rgb8({150, 0, 0}), (Rgb8{255, 255, 255}));
        EXPECT_EQ(space->to_rgb8({-50, 0, 0}), (Rgb8{0, 0, 0}));
    }
    EXPECT_FALSE(ColourSpace::standard(ColourModel::grey).is_writable());
    EXPECT_FALSE(
        ColourSpace::from_icc(test_support::cmyk_profile(), ColourModel::cmyk, "").is_writable());
    EXPECT_FALSE(ColourSpace::from_icc(test_support::rgb_table_profile(), ColourModel::rgb, "")
                     .is_writable());
}

TEST(ColourSpace, KeepsTheProfile) {
    const Bytes wide = test_support::wide_gamut_profile();
    ColourSpace space = ColourSpace::from_icc(wide, ColourModel::rgb, "");
    EXPECT_TRUE(std::equal(wide.begin(), wide.end(), space.icc().begin(), space.icc().end()));
    EXPECT_FALSE(space.is_standard());
    EXPECT_FALSE(space.description().empty());
    space = ColourSpace::standard(ColourModel::grey);
    EXPECT_TRUE(space.is_standard());
    EXPECT_TRUE(space.icc().empty());
    expect_near(lab_of(space, {1}), {100, 0, 0}, 1e-3);
}

TEST(ColourSpace, ProfilesOfTheWrongKindAreRefused) {
    const std::vector<std::pair<Bytes, ColourModel>> wrong = {
        {test_support::wide_gamut_profile(), ColourModel::cmyk},
        {test_support::cmyk_profile(), ColourModel::rgb},
        {test_support::cmyk_profile(), ColourModel::grey},
        {test_support::grey_profile(), ColourModel::rgb},
        {test_support::grey_profile(), ColourModel::cmyk},
        {test_support::lab_profile(), ColourModel::rgb},
        {test_support::link_profile(), ColourModel::rgb},
        {test_support::link_profile(), ColourModel::grey},
    };
    for (const auto& [icc, model] : wrong) {
        const Error error = input_error(icc, model);
        EXPECT_EQ(error.kind(), ErrorKind::input);
        EXPECT_EQ(error.subject(), "some picture");
        EXPECT_NE(std::string(error.what()).find("--profile FILE"), std::string::npos)
            << error.what();
    }
    EXPECT_NE(std::string(input_error(test_support::link_profile(), ColourModel::rgb).what())
                  .find("not a device's"),
              std::string::npos);
}

}  // namespace
}  // namespace tincture
