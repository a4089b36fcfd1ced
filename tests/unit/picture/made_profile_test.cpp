#include "picture/made_profile.h"

#include <avif/avif.h>
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <lcms2.h>

#include <cmath>

namespace tincture {
namespace {

using testing::IsEmpty;
using Bytes = std::vector<std::uint8_t>;

// Lab (D50) of a colour through a profile.
cmsCIELab lab_through(const Bytes& icc, cmsUInt32Number format, const std::uint8_t* colour) {
    cmsHPROFILE profile =
        cmsOpenProfileFromMem(icc.data(), static_cast<cmsUInt32Number>(icc.size()));
    EXPECT_NE(profile, nullptr);
    cmsHPROFILE lab = cmsCreateLab4Profile(nullptr);
    cmsHTRANSFORM transform = cmsCreateTransform(profile, format, lab, TYPE_Lab_DBL,
                                                 INTENT_RELATIVE_COLORIMETRIC, cmsFLAGS_NOOPTIMIZE);
    cmsCIELab result{};
    cmsDoTransform(transform, colour, &result, 1);
    cmsDeleteTransform(transform);
    cmsCloseProfile(lab);
    cmsCloseProfile(profile);
    return result;
}

TEST(MadeProfile, SameBytesOnEveryRunAndNoDate) {
    const auto a = profile_of_cicp(ColourModel::rgb, {12, 13});
    const auto b = profile_of_cicp(ColourModel::rgb, {12, 13});
    ASSERT_TRUE(a);
    EXPECT_EQ(a, b);
    ASSERT_GT(a->size(), 128U);
    EXPECT_THAT(Bytes(a->begin() + 24, a->begin() + 36), testing::Each(0));
    EXPECT_THAT(Bytes(a->begin() + 84, a->begin() + 100), testing::Each(0));
}

TEST(MadeProfile, NoneForWhatIsSrgb) {
    for (const int primaries : {1, 2}) {
        for (const int transfer : {1, 2, 6, 13, 14, 15}) {
            const auto profile = profile_of_cicp(ColourModel::rgb, {primaries, transfer});
            ASSERT_TRUE(profile);
            EXPECT_THAT(*profile, IsEmpty());
        }
    }
    EXPECT_FALSE(profile_of_cicp(ColourModel::rgb, {10, 13}));
    EXPECT_FALSE(profile_of_cicp(ColourModel::rgb, {1, 9}));
    EXPECT_TRUE(is_high_dynamic_range({9, 16}));
    EXPECT_TRUE(is_high_dynamic_range({9, 18}));
    EXPECT_FALSE(is_high_dynamic_range({9, 14}));
}

// The primaries against libavif's own table of ITU-T H.273.
TEST(MadeProfile, PrimariesAreThoseOfTheStandard) {
    for (const int code : {5, 6, 7, 9, 11, 12}) {
        const auto profile = profile_of_cicp(ColourModel::rgb, {code, 8});
        ASSERT_TRUE(profile);
        float xy[8];
        avifColorPrimariesGetValues(static_cast<avifColorPrimaries>(code), xy);
        const Chromaticities c{xy[0], xy[1], xy[2], xy[3], xy[4], xy[5], xy[6], xy[7]};
        const Bytes reference = make_profile(ColourModel::rgb, c, {Transfer::Curve::power, 1.0});
        for (int channel = 0; channel < 3; ++channel) {
            std::uint8_t colour[3] = {};
            colour[channel] = 255;
            const cmsCIELab a = lab_through(*profile, TYPE_RGB_8, colour);
            const cmsCIELab b = lab_through(reference, TYPE_RGB_8, colour);
            EXPECT_NEAR(a.L, b.L, 0.01) << code;
            EXPECT_NEAR(a.a, b.a, 0.01) << code;
            EXPECT_NEAR(a.b, b.b, 0.01) << code;
        }
    }
}

// CSS Color 4, color(display-p3 1 0 0) is lab(56.208 94.464 98.891) (from memory).
TEST(MadeProfile, RedOfDisplayP3) {
    const auto profile = profile_of_cicp(ColourModel::rgb, {12, 13});
    const std::uint8_t red[] = {255, 0, 0};
    const cmsCIELab lab = lab_through(*profile, TYPE_RGB_8, red);
    EXPECT_NEAR(lab.L, 56.2, 0.1);
    EXPECT_NEAR(lab.a, 94.5, 0.2);
    EXPECT_NEAR(lab.b, 98.9, 0.2);
    const std::uint8_t white[] = {255, 255, 255};
    EXPECT_NEAR(lab_through(*profile, TYPE_RGB_8, white).L, 100, 0.01);
}

// The curve of IEC 61966-2-1 at the middle: 128 is 21.586 % of the light, L* 53.585.
TEST(MadeProfile, CurvesOfSrgbAndPowers) {
    const std::uint8_t grey[] = {128, 128, 128};
    const auto srgb_curve = profile_of_cicp(ColourModel::rgb, {9, 13});
    EXPECT_NEAR(lab_through(*srgb_curve, TYPE_RGB_8, grey).L, 53.585, 0.02);
    const Bytes linear =
        make_profile(ColourModel::grey, srgb_chromaticities, {Transfer::Curve::power, 1.0});
    const double light = 128.0 / 255;
    EXPECT_NEAR(lab_through(linear, TYPE_GRAY_8, grey).L, 116 * std::cbrt(light) - 16, 0.02);
}

TEST(MadeProfile, ImpossiblePrimariesMakeNone) {
    Chromaticities c = srgb_chromaticities;
    c.green_x = c.red_x;
    c.green_y = c.red_y;
    EXPECT_THAT(make_profile(ColourModel::rgb, c, {}), IsEmpty());
    c = srgb_chromaticities;
    c.white_y = 0;
    EXPECT_THAT(make_profile(ColourModel::rgb, c, {}), IsEmpty());
}

}  // namespace
}  // namespace tincture
