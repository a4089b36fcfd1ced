#include "commands/text_layout.h"

#include <algorithm>
#include <array>

#include "support/utf8.h"

namespace tincture {
namespace {

struct Range {
    char32_t first;
    char32_t last;
};

bool is_in(const auto& ranges, char32_t code) {
    return std::any_of(ranges.begin(), ranges.end(), [code](const Range& range) {
        return code >= range.first && code <= range.last;
    });
}

// The large blocks of Unicode 14 with East_Asian_Width W or F (UAX #11).
constexpr std::array<Range, 9> wide{{{0x1100, 0x115F},
                                     {0x2E80, 0xA4CF},
                                     {0xAC00, 0xD7A3},
                                     {0xF900, 0xFAFF},
                                     {0xFE30, 0xFE6F},
                                     {0xFF01, 0xFF60},
                                     {0xFFE0, 0xFFE6},
                                     {0x1F300, 0x1FAFF},
                                     {0x20000, 0x3FFFD}}};

// Blocks of combining diacritical marks.
constexpr std::array<Range, 4> combining{
    {{0x0300, 0x036F}, {0x1AB0, 0x1AFF}, {0x1DC0, 0x1DFF}, {0x20D0, 0x20FF}}};

std::string spaces_up_to(const std::string& text, std::size_t width) {
    const std::size_t taken = columns_of(text);
    return std::string(taken < width ? width - taken : 0, ' ');
}

}  // namespace

std::size_t columns_of(std::string_view text) {
    std::size_t columns = 0;
    for (const char32_t code : code_points(text)) {
        columns += is_in(wide, code) ? 2 : is_in(combining, code) ? 0 : 1;
    }
    return columns;
}

std::string flush_right(const std::string& text, std::size_t width) {
    return spaces_up_to(text, width) + text;
}

std::string flush_left(const std::string& text, std::size_t width) {
    return text + spaces_up_to(text, width);
}

std::string wrapped(const std::string& first, std::string_view text, std::size_t width,
                    std::size_t indent) {
    std::string out = first;
    std::size_t column = columns_of(first);
    bool at_start = true;  // of a line: no space goes before the word
    while (!text.empty()) {
        const std::string_view word = text.substr(0, text.find(' '));
        text.remove_prefix(std::min(word.size() + 1, text.size()));
        const std::size_t columns = columns_of(word);
        if (!at_start && column + 1 + columns > width) {
            out += '\n' + std::string(indent, ' ');
            column = indent;
            at_start = true;
        }
        if (!at_start) out += ' ';
        out += word;
        column += columns + (at_start ? 0 : 1);
        at_start = false;
    }
    return out + '\n';
}

std::string grouped(std::uint64_t number) {
    std::string text = std::to_string(number);
    for (std::size_t at = text.size(); at > 3; at -= 3) text.insert(at - 3, ",");
    return text;
}

}  // namespace tincture
