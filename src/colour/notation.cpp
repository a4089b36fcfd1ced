#include "colour/notation.h"

#include <algorithm>
#include <array>
#include <charconv>
#include <cstddef>
#include <cstdint>
#include <optional>

#include "support/error.h"
#include "support/text.h"

namespace tincture {
namespace {

struct NamedColour {
    std::string_view name;
    std::uint32_t rgb;
};

// CSS Color Module Level 4, section "Named Colors", column "Hex rgb".
constexpr std::array<NamedColour, 148> named_colours{{
    {"aliceblue", 0xF0F8FF},
    {"antiquewhite", 0xFAEBD7},
    {"aqua", 0x00FFFF},
    {"aquamarine", 0x7FFFD4},
    {"azure", 0xF0FFFF},
    {"beige", 0xF5F5DC},
    {"bisque", 0xFFE4C4},
    {"black", 0x000000},
    {"blanchedalmond", 0xFFEBCD},
    {"blue", 0x0000FF},
    {"blueviolet", 0x8A2BE2},
    {"brown", 0xA52A2A},
    {"burlywood", 0xDEB887},
    {"cadetblue", 0x5F9EA0},
    {"chartreuse", 0x7FFF00},
    {"chocolate", 0xD2691E},
    {"coral", 0xFF7F50},
    {"cornflowerblue", 0x6495ED},
    {"cornsilk", 0xFFF8DC},
    {"crimson", 0xDC143C},
    {"cyan", 0x00FFFF},
    {"darkblue", 0x00008B},
    {"darkcyan", 0x008B8B},
    {"darkgoldenrod", 0xB8860B},
    {"darkgray", 0xA9A9A9},
    {"darkgreen", 0x006400},
    {"darkgrey", 0xA9A9A9},
    {"darkkhaki", 0xBDB76B},
    {"darkmagenta", 0x8B008B},
    {"darkolivegreen", 0x556B2F},
    {"darkorange", 0xFF8C00},
    {"darkorchid", 0x9932CC},
    {"darkred", 0x8B0000},
    {"darksalmon", 0xE9967A},
    {"darkseagreen", 0x8FBC8F},
    {"darkslateblue", 0x483D8B},
    {"darkslategray", 0x2F4F4F},
    {"darkslategrey", 0x2F4F4F},
    {"darkturquoise", 0x00CED1},
    {"darkviolet", 0x9400D3},
    {"deeppink", 0xFF1493},
    {"deepskyblue", 0x00BFFF},
    {"dimgray", 0x696969},
    {"dimgrey", 0x696969},
    {"dodgerblue", 0x1E90FF},
    {"firebrick", 0xB22222},
    {"floralwhite", 0xFFFAF0},
    {"forestgreen", 0x228B22},
    {"fuchsia", 0xFF00FF},
    {"gainsboro", 0xDCDCDC},
    {"ghostwhite", 0xF8F8FF},
    {"gold", 0xFFD700},
    {"goldenrod", 0xDAA520},
    {"gray", 0x808080},
    {"green", 0x008000},
    {"greenyellow", 0xADFF2F},
    {"grey", 0x808080},
    {"honeydew", 0xF0FFF0},
    {"hotpink", 0xFF69B4},
    {"indianred", 0xCD5C5C},
    {"indigo", 0x4B0082},
    {"ivory", 0xFFFFF0},
    {"khaki", 0xF0E68C},
    {"lavender", 0xE6E6FA},
    {"lavenderblush", 0xFFF0F5},
    {"lawngreen", 0x7CFC00},
    {"lemonchiffon", 0xFFFACD},
    {"lightblue", 0xADD8E6},
    {"lightcoral", 0xF08080},
    {"lightcyan", 0xE0FFFF},
    {"lightgoldenrodyellow", 0xFAFAD2},
    {"lightgray", 0xD3D3D3},
    {"lightgreen", 0x90EE90},
    {"lightgrey", 0xD3D3D3},
    {"lightpink", 0xFFB6C1},
    {"lightsalmon", 0xFFA07A},
    {"lightseagreen", 0x20B2AA},
    {"lightskyblue", 0x87CEFA},
    {"lightslategray", 0x778899},
    {"lightslategrey", 0x778899},
    {"lightsteelblue", 0xB0C4DE},
    {"lightyellow", 0xFFFFE0},
    {"lime", 0x00FF00},
    {"limegreen", 0x32CD32},
    {"linen", 0xFAF0E6},
    {"magenta", 0xFF00FF},
    {"maroon", 0x800000},
    {"mediumaquamarine", 0x66CDAA},
    {"mediumblue", 0x0000CD},
    {"mediumorchid", 0xBA55D3},
    {"mediumpurple", 0x9370DB},
    {"mediumseagreen", 0x3CB371},
    {"mediumslateblue", 0x7B68EE},
    {"mediumspringgreen", 0x00FA9A},
    {"mediumturquoise", 0x48D1CC},
    {"mediumvioletred", 0xC71585},
    {"midnightblue", 0x191970},
    {"mintcream", 0xF5FFFA},
    {"mistyrose", 0xFFE4E1},
    {"moccasin", 0xFFE4B5},
    {"navajowhite", 0xFFDEAD},
    {"navy", 0x000080},
    {"oldlace", 0xFDF5E6},
    {"olive", 0x808000},
    {"olivedrab", 0x6B8E23},
    {"orange", 0xFFA500},
    {"orangered", 0xFF4500},
    {"orchid", 0xDA70D6},
    {"palegoldenrod", 0xEEE8AA},
    {"palegreen", 0x98FB98},
    {"paleturquoise", 0xAFEEEE},
    {"palevioletred", 0xDB7093},
    {"papayawhip", 0xFFEFD5},
    {"peachpuff", 0xFFDAB9},
    {"peru", 0xCD853F},
    {"pink", 0xFFC0CB},
    {"plum", 0xDDA0DD},
    {"powderblue", 0xB0E0E6},
    {"purple", 0x800080},
    {"rebeccapurple", 0x663399},
    {"red", 0xFF0000},
    {"rosybrown", 0xBC8F8F},
    {"royalblue", 0x4169E1},
    {"saddlebrown", 0x8B4513},
    {"salmon", 0xFA8072},
    {"sandybrown", 0xF4A460},
    {"seagreen", 0x2E8B57},
    {"seashell", 0xFFF5EE},
    {"sienna", 0xA0522D},
    {"silver", 0xC0C0C0},
    {"skyblue", 0x87CEEB},
    {"slateblue", 0x6A5ACD},
    {"slategray", 0x708090},
    {"slategrey", 0x708090},
    {"snow", 0xFFFAFA},
    {"springgreen", 0x00FF7F},
    {"steelblue", 0x4682B4},
    {"tan", 0xD2B48C},
    {"teal", 0x008080},
    {"thistle", 0xD8BFD8},
    {"tomato", 0xFF6347},
    {"turquoise", 0x40E0D0},
    {"violet", 0xEE82EE},
    {"wheat", 0xF5DEB3},
    {"white", 0xFFFFFF},
    {"whitesmoke", 0xF5F5F5},
    {"yellow", 0xFFFF00},
    {"yellowgreen", 0x9ACD32},
}};
static_assert(std::is_sorted(named_colours.begin(), named_colours.end(),
                             [](const NamedColour& a, const NamedColour& b) {
                                 return a.name < b.name;
                             }),
              "searched by halves");

constexpr std::string_view forms = "give #rrggbb, lab(L a b) or a CSS colour name";

[[noreturn]] void refuse(std::string_view text, std::string_view reason) {
    throw Error(ErrorKind::usage, "",
                shown(text) + " " + std::string(reason) + "; " + std::string(forms));
}

// CSS is case-insensitive in ASCII only, whatever the locale.
std::string lower(std::string_view text) {
    std::string result(text);
    for (char& c : result) {
        if (c >= 'A' && c <= 'Z') c = static_cast<char>(c - 'A' + 'a');
    }
    return result;
}

bool is_digit(char c) {
    return c >= '0' && c <= '9';
}

bool is_white(char c) {
    return c == ' ' || c == '\t' || c == '\n' || c == '\r' || c == '\f';
}

Rgb8 from_packed(std::uint32_t rgb) {
    return {static_cast<std::uint8_t>(rgb >> 16U), static_cast<std::uint8_t>(rgb >> 8U),
            static_cast<std::uint8_t>(rgb)};
}

std::optional<Rgb8> parse_hex(std::string_view digits) {
    if (digits.size() != 3 && digits.size() != 6) return std::nullopt;
    std::string six;
    for (const char digit : digits) six.append(digits.size() == 3 ? 2 : 1, digit);
    std::uint32_t rgb = 0;
    const char* const end = six.data() + six.size();
    const auto [stop, error] = std::from_chars(six.data(), end, rgb, 16);
    if (error != std::errc() || stop != end) return std::nullopt;
    return from_packed(rgb);
}

std::optional<Rgb8> find_name(std::string_view name) {
    const auto* const found = std::lower_bound(
        named_colours.begin(), named_colours.end(), name,
        [](const NamedColour& colour, std::string_view wanted) { return colour.name < wanted; });
    if (found == named_colours.end() || found->name != name) return std::nullopt;
    return from_packed(found->rgb);
}

std::string_view take_digits(std::string_view& text) {
    const auto* const end = std::find_if_not(text.begin(), text.end(), is_digit);
    const std::string_view digits = text.substr(0, static_cast<std::size_t>(end - text.begin()));
    text.remove_prefix(digits.size());
    return digits;
}

// A <number-token> of CSS Syntax Level 3: digits stand after a point, and no inf, nan or
// hexadecimal.
bool is_css_number(std::string_view text) {
    const auto take_sign = [&text] {
        if (!text.empty() && (text[0] == '+' || text[0] == '-')) text.remove_prefix(1);
    };
    take_sign();
    const bool whole = !take_digits(text).empty();
    bool fraction = false;
    if (!text.empty() && text[0] == '.') {
        text.remove_prefix(1);
        fraction = !take_digits(text).empty();
        if (!fraction) return false;
    }
    if (!whole && !fraction) return false;
    if (!text.empty() && (text[0] == 'e' || text[0] == 'E')) {
        text.remove_prefix(1);
        take_sign();
        if (take_digits(text).empty()) return false;
    }
    return text.empty();
}

std::optional<double> parse_number(std::string_view text) {
    if (!is_css_number(text)) return std::nullopt;
    if (text[0] == '+') text.remove_prefix(1);  // the one thing that from_chars does not take
    double value = 0;
    const char* const end = text.data() + text.size();
    const auto [stop, error] = std::from_chars(text.data(), end, value);
    if (error != std::errc() || stop != end) return std::nullopt;
    return value + 0.0;  // no negative zero
}

std::string_view take_word(std::string_view& text) {
    text.remove_prefix(static_cast<std::size_t>(
        std::find_if_not(text.begin(), text.end(), is_white) - text.begin()));
    const std::string_view word = text.substr(
        0,
        static_cast<std::size_t>(std::find_if(text.begin(), text.end(), is_white) - text.begin()));
    text.remove_prefix(word.size());
    return word;
}

// What stands between the parentheses of lab(...).
std::optional<Lab> parse_lab(std::string_view inside) {
    std::string_view lightness = take_word(inside);
    if (!lightness.empty() && lightness.back() == '%') lightness.remove_suffix(1);
    const std::optional<double> L = parse_number(lightness);
    const std::optional<double> a = parse_number(take_word(inside));
    const std::optional<double> b = parse_number(take_word(inside));
    if (!L || !a || !b || !take_word(inside).empty()) return std::nullopt;
    return Lab{*L, *a, *b};
}

}  // namespace

ColourText parse_colour(std::string_view text) {
    const std::string small = lower(text);
    const std::string_view view = small;
    if (view == "transparent" || view == "currentcolor") refuse(text, "stands for no one colour");
    if (view.starts_with('#')) {
        if (const auto colour = parse_hex(view.substr(1))) return *colour;
        refuse(text, "is no colour: three or six hexadecimal digits belong after #");
    }
    constexpr std::string_view opening = "lab(";
    if (view.starts_with(opening) && view.ends_with(')')) {
        const auto lab = parse_lab(view.substr(opening.size(), view.size() - opening.size() - 1));
        if (!lab) refuse(text, "is no colour: three numbers with spaces between belong in lab()");
        if (lab->L < 0 || lab->L > 100 || std::max(lab->a, lab->b) > 200 ||
            std::min(lab->a, lab->b) < -200) {
            refuse(text, "is out of range: L runs from 0 to 100, a and b from -200 to 200");
        }
        return *lab;
    }
    if (const auto colour = find_name(view)) return *colour;
    refuse(text, "is no colour");
}

std::string hex(Rgb8 colour) {
    std::string text = "#";
    for (const std::uint8_t channel : {colour.r, colour.g, colour.b}) {
        text += "0123456789abcdef"[channel >> 4U];
        text += "0123456789abcdef"[channel & 0xFU];
    }
    return text;
}

}  // namespace tincture
