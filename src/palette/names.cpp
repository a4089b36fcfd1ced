#include "palette/names.h"

#include <cmath>
#include <cstddef>
#include <map>

#include "support/format.h"

namespace tincture {
namespace {

constexpr double degrees_per_radian = 57.29577951308232;

// atan of 0 to 1 in degrees by plain arithmetic: the C library's differs between processors, and a
// name must not. Good to 1e-12 degrees.
double small_atan_degrees(double t) {
    constexpr double tan_22_5 = 0.41421356237309503;
    const bool upper = t > tan_22_5;
    const double x = upper ? (t - 1.0) / (t + 1.0) : t;
    double power = x;
    double sum = x;
    for (int n = 3; n <= 41; n += 2) {
        power *= -(x * x);
        sum += power / n;
    }
    return (upper ? 45.0 : 0.0) + sum * degrees_per_radian;
}

// Hue angle in CIELAB, 0 to below 360 degrees; 0 where a and b are both 0.
double hue_degrees(double a, double b) {
    const double wide = std::abs(a);
    const double high = std::abs(b);
    if (wide == 0 && high == 0) return 0;
    double angle =
        wide >= high ? small_atan_degrees(high / wide) : 90.0 - small_atan_degrees(wide / high);
    if (a < 0) angle = 180.0 - angle;
    if (b < 0 && angle > 0) angle = 360.0 - angle;
    return angle;
}

double chroma(const Lab& lab) {
    return std::sqrt(lab.a * lab.a + lab.b * lab.b);
}

const char* lightness_word(double lightness) {
    if (lightness >= 72) return "pale";
    return lightness >= 42 ? "mid" : "deep";
}

const char* strength_word(double strength) {
    if (strength >= 40) return "strong";
    return strength >= 14 ? "soft" : "greyish";
}

// Brown is what orange becomes when it is dark or dull, olive the same of yellow.
bool is_brownish(double lightness, double strength) {
    return lightness < 42 || (lightness < 55 && strength < 62) || (lightness < 63 && strength < 30);
}

// The borders lie between the hues that people name alike in CIELAB: sRGB red has 41 degrees,
// yellow 99, green 134, cyan 197, blue 301, magenta 327. Vivid blues reach far into the hues that
// look violet when they are paler or duller.
const char* hue_word(double lightness, double strength, double hue) {
    const bool brownish = is_brownish(lightness, strength);
    if (hue < 15 || hue >= 342) {
        if (lightness >= 45) return "pink";
        return hue < 15 || hue >= 354 ? "red" : "purple";
    }
    if (hue < 50) {
        if (lightness >= 66) return "pink";
        return brownish && strength < 30 && hue >= 38 ? "brown" : "red";
    }
    if (hue < 80) return brownish ? "brown" : "orange";
    if (hue < 88) return brownish ? "brown" : "yellow";
    if (hue < 110) return lightness < 64 ? "olive" : "yellow";
    if (hue < 170) return "green";
    if (hue < 222) return "teal";
    if (hue < (strength >= 80 ? 304 : 291)) return "blue";
    return hue < 320 ? "violet" : "purple";
}

std::string plain_name(const Lab& lab) {
    const double strength = chroma(lab);
    if (strength < 4) {
        if (lab.L >= 94) return "white";
        if (lab.L < 12) return "black";
        return std::string(lightness_word(lab.L)) + " grey";
    }
    return std::string(lightness_word(lab.L)) + ' ' + strength_word(strength) + ' ' +
           hue_word(lab.L, strength, hue_degrees(lab.a, lab.b));
}

std::string figures(const Lab& lab, int decimals) {
    std::string hue = fixed(hue_degrees(lab.a, lab.b), decimals);
    if (hue.starts_with("360")) hue = fixed(0, decimals);
    return ' ' + fixed(lab.L, decimals) + ' ' + fixed(chroma(lab), decimals) + ' ' + hue;
}

using Group = std::vector<std::size_t>;

// Adds figures to the names of `group`, which are equal, with as few decimals as tell each from all
// that are still alike; figures of different length cannot be equal.
void tell_apart(std::span<const Lab> colours, std::vector<std::string>& names, Group group) {
    constexpr int most_decimals = 9;
    for (int decimals = 0; decimals <= most_decimals && !group.empty(); ++decimals) {
        std::map<std::string, Group> namesakes;
        for (const std::size_t i : group) namesakes[figures(colours[i], decimals)].push_back(i);
        std::erase_if(group, [&](std::size_t i) {
            const std::string suffix = figures(colours[i], decimals);
            const bool alone = namesakes[suffix].size() == 1;
            if (alone) names[i] += suffix;
            return alone;
        });
    }
    std::map<std::string, std::string> again;  // equal colours, each set of them by itself
    for (const std::size_t i : group) {
        const std::string suffix = figures(colours[i], most_decimals);
        names[i] += suffix + again[suffix];
        again[suffix] += " again";
    }
}

}  // namespace

std::vector<std::string> name_colours(std::span<const Lab> colours) {
    std::vector<std::string> names;
    names.reserve(colours.size());
    std::map<std::string, Group> namesakes;
    for (std::size_t i = 0; i < colours.size(); ++i) {
        names.push_back(plain_name(colours[i]));
        namesakes[names.back()].push_back(i);
    }
    for (const auto& [name, group] : namesakes) {
        if (group.size() > 1) tell_apart(colours, names, group);
    }
    return names;
}

}  // namespace tincture
