// ICC profiles for pictures that describe their colours by numbers instead of a profile.
#pragma once

#include <cstdint>
#include <optional>
#include <vector>

#include "picture/picture.h"

namespace tincture {

// CIE 1931 xy of the primaries and of white.
struct Chromaticities {
    double red_x, red_y;
    double green_x, green_y;
    double blue_x, blue_y;
    double white_x, white_y;
};

// IEC 61966-2-1, which are those of ITU-R BT.709 too.
inline constexpr Chromaticities srgb_chromaticities{0.64, 0.33, 0.30,   0.60,
                                                    0.15, 0.06, 0.3127, 0.3290};

// How device values stand to light.
struct Transfer {
    enum class Curve { srgb, power } curve = Curve::srgb;
    double exponent = 1.0;  // of the power: light = value ^ exponent
};

// A matrix profile for RGB, a grey one (of which only the curve matters) for grey; the same bytes
// on every run. Empty where the description is that of sRGB, which needs no profile, and where the
// primaries cannot be (a profile out of them is impossible).
[[nodiscard]] std::vector<std::uint8_t> make_profile(ColourModel model,
                                                     const Chromaticities& chromaticities,
                                                     const Transfer& transfer);

// Code points of ITU-T H.273 (CICP), as AVIF and PNG carry them.
struct Cicp {
    int primaries;
    int transfer;
};

// PQ and HLG: values that stand for light beyond paper white.
[[nodiscard]] bool is_high_dynamic_range(const Cicp& cicp);

// Nothing where a code is not known here. The curves of BT.709, BT.601 and BT.2020 are taken as
// that of sRGB, as still pictures mean it (common practice). Unspecified codes are those of sRGB.
[[nodiscard]] std::optional<std::vector<std::uint8_t>> profile_of_cicp(ColourModel model,
                                                                       const Cicp& cicp);

}  // namespace tincture
