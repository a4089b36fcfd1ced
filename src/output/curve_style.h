// The look that the parts of the curve drawing share: greys and one dark accent.
#pragma once

#include <string_view>

namespace tincture::curve_style {

inline constexpr std::string_view kInk = "#1c1c1c";
inline constexpr std::string_view kQuiet = "#5c5c5c";
inline constexpr std::string_view kGrid = "#e3e3e3";
inline constexpr std::string_view kBand = "#f0f0f0";
inline constexpr std::string_view kAccent = "#173f5f";

inline constexpr double kLabel = 13;  // sizes of text
inline constexpr double kTick = 12;

// Room for a typeface that is wider than the built-in one, where a viewer lacks that.
inline constexpr double kWiderFont = 1.12;

}  // namespace tincture::curve_style
