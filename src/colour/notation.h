// Colours as people write them on a command line.
#pragma once

#include <string>
#include <string_view>
#include <variant>

#include "colour/lab.h"
#include "colour/rgb.h"

namespace tincture {

// sRGB, 8 bits a channel, or CIELAB (D50).
using ColourText = std::variant<Rgb8, Lab>;

// Reads one of three notations of CSS Color Module Level 4, in capitals or not:
//   #rrggbb or #rgb
//   lab(L a b), D50, with white space between the numbers: L from 0 to 100, with a percent sign or
//       without; a and b from -200 to 200, without. No commas, no alpha, no `none`.
//   one of its 148 named colours; not transparent and not currentcolor.
// Nothing may stand before or after. Throws Error(usage) without a subject; the message quotes
// `text` and names the three notations. Independent of the locale.
[[nodiscard]] ColourText parse_colour(std::string_view text);

// "#rrggbb", in small letters.
[[nodiscard]] std::string hex(Rgb8 colour);

}  // namespace tincture
