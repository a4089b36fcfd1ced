#include "support/format.h"

#include <array>
#include <charconv>
#include <cmath>

namespace tincture {

std::string fixed(double value, int decimals) {
    if (!std::isfinite(value)) return {};
    std::array<char, 400> text;  // the longest double has 309 digits before the point
    const auto end = std::to_chars(text.data(), text.data() + text.size(), value,
                                   std::chars_format::fixed, decimals);
    std::string result(text.data(), end.ptr);
    if (result.starts_with('-') && result.find_first_of("123456789") == std::string::npos) {
        result.erase(0, 1);
    }
    return result;
}

double rounded(double value, int decimals) {
    const std::string text = fixed(value, decimals);
    if (text.empty()) return value;
    double result = value;
    std::from_chars(text.data(), text.data() + text.size(), result);
    return result;
}

std::string readable(double value, int decimals) {
    std::string text = fixed(value, decimals);
    if (text.starts_with('-')) text.replace(0, 1, "\u2212");
    return text;
}

std::string colours(int count) {
    return std::to_string(count) + (count == 1 ? " colour" : " colours");
}

std::string csv_field(std::string_view text) {
    if (text.find_first_of(",\"\r\n") == std::string_view::npos) return std::string(text);
    std::string quoted = "\"";
    for (const char c : text) {
        if (c == '"') quoted += '"';
        quoted += c;
    }
    return quoted + '"';
}

}  // namespace tincture
