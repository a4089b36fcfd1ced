// The look that the parts of the curve drawing share: greys and one dark accent.
#pragma once

#include <string_view>

namespace tincture::curve_style {

inline constexpr std::string_view ink = "#1c1c1c";
inline constexpr std::string_view quiet = "#5c5c5c";
inline constexpr std::string_view grid_grey = "#e3e3e3";
inline constexpr std::string_view band_grey = "#f0f0f0";
inline constexpr std::string_view accent = "#173f5f";

inline constexpr double label_size = 13;  // sizes of text
inline constexpr double tick_size = 12;

// Room for a typeface that is wider than the built-in one, where a viewer lacks that.
inline constexpr double wider_font = 1.12;

}  // namespace tincture::curve_style
