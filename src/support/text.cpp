#include "support/text.h"

#include <algorithm>
#include <array>
#include <cstddef>
#include <cstdint>

namespace tincture {
namespace {

struct Decoded {
    std::size_t length;  // bytes of the character, or of the maximal subpart of what is ill-formed
    char32_t character;
    bool valid;
};

struct LeadByte {
    std::size_t length;  // of a whole sequence; 0: no sequence begins with this byte
    std::uint8_t second_low;
    std::uint8_t second_high;
};

// The Unicode Standard, table 3-7: only the second byte has ranges of its own.
LeadByte lead_byte(std::uint8_t byte) {
    if (byte < 0x80) return {1, 0, 0};
    if (byte < 0xC2) return {0, 0, 0};
    if (byte < 0xE0) return {2, 0x80, 0xBF};
    if (byte == 0xE0) return {3, 0xA0, 0xBF};
    if (byte == 0xED) return {3, 0x80, 0x9F};
    if (byte < 0xF0) return {3, 0x80, 0xBF};
    if (byte == 0xF0) return {4, 0x90, 0xBF};
    if (byte < 0xF4) return {4, 0x80, 0xBF};
    if (byte == 0xF4) return {4, 0x80, 0x8F};
    return {0, 0, 0};
}

// Decodes the first character of `text`, which must not be empty.
Decoded decode(std::string_view text) {
    const auto first = static_cast<std::uint8_t>(text[0]);
    const LeadByte lead = lead_byte(first);
    if (lead.length == 0) return {1, 0, false};
    if (lead.length == 1) return {1, first, true};
    char32_t character = first & (0x7FU >> lead.length);
    for (std::size_t i = 1; i < lead.length; ++i) {
        const std::uint8_t low = i == 1 ? lead.second_low : std::uint8_t{0x80};
        const std::uint8_t high = i == 1 ? lead.second_high : std::uint8_t{0xBF};
        if (i >= text.size()) return {i, 0, false};
        const auto byte = static_cast<std::uint8_t>(text[i]);
        if (byte < low || byte > high) return {i, 0, false};
        character = (character << 6U) | (byte & 0x3FU);
    }
    return {lead.length, character, true};
}

struct Range {
    char32_t first;
    char32_t last;
};

template <std::size_t size>
bool is_in(const std::array<Range, size>& ranges, char32_t character) {
    return std::any_of(ranges.begin(), ranges.end(), [character](const Range& range) {
        return character >= range.first && character <= range.last;
    });
}

bool is_invisible(char32_t character) {
    // Controls, line separators, annotation marks and Default_Ignorable_Code_Point of Unicode 14.
    static constexpr std::array<Range, 19> ranges{{
        {0x0000, 0x001F},   {0x007F, 0x009F},   {0x00AD, 0x00AD},   {0x034F, 0x034F},
        {0x061C, 0x061C},   {0x115F, 0x1160},   {0x17B4, 0x17B5},   {0x180B, 0x180F},
        {0x200B, 0x200F},   {0x2028, 0x202E},   {0x2060, 0x206F},   {0x3164, 0x3164},
        {0xFE00, 0xFE0F},   {0xFEFF, 0xFEFF},   {0xFFA0, 0xFFA0},   {0xFFF0, 0xFFFB},
        {0x1BCA0, 0x1BCA3}, {0x1D173, 0x1D17A}, {0xE0000, 0xE0FFF},
    }};
    const bool no_character =
        (character >= 0xFDD0 && character <= 0xFDEF) || (character & 0xFFFEU) == 0xFFFEU;
    return no_character || is_in(ranges, character);
}

bool is_space(char32_t character) {
    // General category Zs of Unicode 14.
    static constexpr std::array<Range, 7> ranges{{
        {0x0020, 0x0020},
        {0x00A0, 0x00A0},
        {0x1680, 0x1680},
        {0x2000, 0x200A},
        {0x202F, 0x202F},
        {0x205F, 0x205F},
        {0x3000, 0x3000},
    }};
    return is_in(ranges, character);
}

void append_hex(std::string& text, std::string_view prefix, char32_t value, unsigned digits) {
    text += prefix;
    while (digits-- > 0) text += "0123456789abcdef"[(value >> (4 * digits)) & 0xFU];
}

void append_escape(std::string& text, char32_t character) {
    if (character == U'\n') {
        text += "\\n";
    } else if (character == U'\r') {
        text += "\\r";
    } else if (character == U'\t') {
        text += "\\t";
    } else if (character == U'\\') {
        text += "\\\\";
    } else if (character < 0x80) {
        append_hex(text, "\\x", character, 2);
    } else if (character < 0x10000) {
        append_hex(text, "\\u", character, 4);
    } else {
        append_hex(text, "\\U", character, 8);
    }
}

}  // namespace

std::string shown(std::string_view raw) {
    const bool double_quotes =
        raw.find('\'') != std::string_view::npos && raw.find('"') == std::string_view::npos;
    bool needs_quotes = raw.empty();
    std::string text;
    while (!raw.empty()) {
        const Decoded next = decode(raw);
        const std::string_view bytes = raw.substr(0, next.length);
        raw.remove_prefix(next.length);
        if (!next.valid) {
            for (const char byte : bytes) {
                append_hex(text, "\\x", static_cast<std::uint8_t>(byte), 2);
            }
            needs_quotes = true;
        } else if (next.character == U'\\' || is_invisible(next.character)) {
            append_escape(text, next.character);
            needs_quotes = true;
        } else {
            if (next.character == U'\'' && !double_quotes) text += '\\';
            text += bytes;
            needs_quotes = needs_quotes || next.character == U'\'' || next.character == U'"' ||
                           is_space(next.character);
        }
    }
    if (!needs_quotes) return text;
    const char quote = double_quotes ? '"' : '\'';
    return quote + text + quote;
}

std::string valid_utf8(std::string_view raw) {
    std::string text;
    text.reserve(raw.size());
    while (!raw.empty()) {
        const Decoded next = decode(raw);
        text += next.valid ? raw.substr(0, next.length) : std::string_view("\xEF\xBF\xBD");
        raw.remove_prefix(next.length);
    }
    return text;
}

}  // namespace tincture
