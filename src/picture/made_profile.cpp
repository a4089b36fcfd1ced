#include "picture/made_profile.h"

#include <lcms2.h>

#include <algorithm>
#include <cmath>
#include <memory>

namespace tincture {
namespace {

struct CloseContext {
    void operator()(cmsContext context) const { cmsDeleteContext(context); }
};
struct CloseProfile {
    void operator()(cmsHPROFILE profile) const { cmsCloseProfile(profile); }
};
struct FreeCurve {
    void operator()(cmsToneCurve* curve) const { cmsFreeToneCurve(curve); }
};
using Context = std::unique_ptr<std::remove_pointer_t<cmsContext>, CloseContext>;
using Profile = std::unique_ptr<std::remove_pointer_t<cmsHPROFILE>, CloseProfile>;
using Curve = std::unique_ptr<cmsToneCurve, FreeCurve>;

// Differences that rounding in a file or another wording of the same standard makes.
constexpr double same_xy = 0.005;
constexpr double same_exponent = 0.05;  // relative

bool near(double a, double b) {
    return std::abs(a - b) <= same_xy;
}

bool is_srgb(const Chromaticities& c) {
    const Chromaticities& s = srgb_chromaticities;
    return near(c.red_x, s.red_x) && near(c.red_y, s.red_y) && near(c.green_x, s.green_x) &&
           near(c.green_y, s.green_y) && near(c.blue_x, s.blue_x) && near(c.blue_y, s.blue_y) &&
           near(c.white_x, s.white_x) && near(c.white_y, s.white_y);
}

// A power of 2.2 is how files say sRGB in one number (common practice, as in the PNG
// specification).
bool is_srgb(const Transfer& t) {
    return t.curve == Transfer::Curve::srgb || std::abs(t.exponent / 2.2 - 1.0) <= same_exponent;
}

Curve make_curve(cmsContext context, const Transfer& transfer) {
    if (transfer.curve == Transfer::Curve::power) {
        return Curve(cmsBuildGamma(context, transfer.exponent));
    }
    // IEC 61966-2-1: value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ^ 2.4
    const double parameters[] = {2.4, 1 / 1.055, 0.055 / 1.055, 1 / 12.92, 0.04045};
    return Curve(cmsBuildParametricToneCurve(context, 4, parameters));
}

std::vector<std::uint8_t> bytes_of(cmsHPROFILE profile) {
    cmsUInt32Number size = 0;
    if (!cmsSaveProfileToMem(profile, nullptr, &size)) return {};
    std::vector<std::uint8_t> bytes(size);
    if (!cmsSaveProfileToMem(profile, bytes.data(), &size)) return {};
    bytes.resize(size);
    // ICC.1:2010, 7.2: the date of creation and the profile ID, which differ from run to run.
    if (bytes.size() >= 128) {
        std::fill(bytes.begin() + 24, bytes.begin() + 36, std::uint8_t{0});
        std::fill(bytes.begin() + 84, bytes.begin() + 100, std::uint8_t{0});
    }
    return bytes;
}

bool is_possible(const Chromaticities& c) {
    const auto is_colour = [](double x, double y) { return x >= 0 && y > 0 && x + y <= 1.0; };
    const double area =
        (c.green_x - c.red_x) * (c.blue_y - c.red_y) - (c.blue_x - c.red_x) * (c.green_y - c.red_y);
    // The blue of BT.2020-like spaces lies at y = 0.046, that of the widest in use at y = 0.0001.
    return is_colour(c.red_x, c.red_y) && is_colour(c.green_x, c.green_y) &&
           is_colour(c.blue_x, c.blue_y) && is_colour(c.white_x, c.white_y) &&
           std::abs(area) > 1e-3;
}

// ITU-T H.273, table 2.
std::optional<Chromaticities> primaries_of_cicp(int code) {
    switch (code) {
        case 1:
        case 2:
            return srgb_chromaticities;
        case 5:
            return Chromaticities{0.64, 0.33, 0.29, 0.60, 0.15, 0.06, 0.3127, 0.3290};
        case 6:
        case 7:
            return Chromaticities{0.630, 0.340, 0.310, 0.595, 0.155, 0.070, 0.3127, 0.3290};
        case 9:
            return Chromaticities{0.708, 0.292, 0.170, 0.797, 0.131, 0.046, 0.3127, 0.3290};
        case 11:
            return Chromaticities{0.680, 0.320, 0.265, 0.690, 0.150, 0.060, 0.314, 0.351};
        case 12:
            return Chromaticities{0.680, 0.320, 0.265, 0.690, 0.150, 0.060, 0.3127, 0.3290};
        default:
            return {};
    }
}

// ITU-T H.273, table 3.
std::optional<Transfer> transfer_of_cicp(int code) {
    switch (code) {
        case 1:
        case 2:
        case 6:
        case 13:
        case 14:
        case 15:
            return Transfer{};
        case 4:
            return Transfer{Transfer::Curve::power, 2.2};
        case 5:
            return Transfer{Transfer::Curve::power, 2.8};
        case 8:
            return Transfer{Transfer::Curve::power, 1.0};
        default:
            return {};
    }
}

}  // namespace

std::vector<std::uint8_t> make_profile(ColourModel model, const Chromaticities& chromaticities,
                                       const Transfer& transfer) {
    const bool grey = model == ColourModel::grey;
    if ((grey || is_srgb(chromaticities)) && is_srgb(transfer)) return {};
    if (!grey && !is_possible(chromaticities)) return {};

    const Chromaticities& c = chromaticities;
    const Context context(cmsCreateContext(nullptr, nullptr));
    const Curve curve = make_curve(context.get(), transfer);
    Profile profile;
    if (grey) {
        profile.reset(cmsCreateGrayProfileTHR(context.get(), cmsD50_xyY(), curve.get()));
    } else {
        const cmsCIExyY white{c.white_x, c.white_y, 1.0};
        const cmsCIExyYTRIPLE primaries{
            {c.red_x, c.red_y, 1.0}, {c.green_x, c.green_y, 1.0}, {c.blue_x, c.blue_y, 1.0}};
        cmsToneCurve* const curves[] = {curve.get(), curve.get(), curve.get()};
        profile.reset(cmsCreateRGBProfileTHR(context.get(), &white, &primaries, curves));
    }
    return profile == nullptr ? std::vector<std::uint8_t>{} : bytes_of(profile.get());
}

bool is_high_dynamic_range(const Cicp& cicp) {
    return cicp.transfer == 16 || cicp.transfer == 18;
}

std::optional<std::vector<std::uint8_t>> profile_of_cicp(ColourModel model, const Cicp& cicp) {
    const std::optional<Chromaticities> primaries = primaries_of_cicp(cicp.primaries);
    const std::optional<Transfer> transfer = transfer_of_cicp(cicp.transfer);
    if (!primaries || !transfer) return {};
    return make_profile(model, *primaries, *transfer);
}

}  // namespace tincture
