#include "support/utf8.h"

#include <algorithm>

#include "support/text.h"

namespace tincture {
namespace {

bool is_illegible(char32_t code) {
    const auto in = [code](char32_t first, char32_t last) { return code >= first && code <= last; };
    return code < 0x20 || in(0x7F, 0x9F) || in(0x200E, 0x200F) || in(0x2028, 0x202E) ||
           in(0x2060, 0x206F) || code == 0xFEFF || in(0xFDD0, 0xFDEF) ||
           (code & 0xFFFEU) == 0xFFFEU;
}

}  // namespace

std::u32string code_points(std::string_view raw) {
    std::u32string codes;
    for (const char c : valid_utf8(raw)) {
        const auto byte = static_cast<unsigned char>(c);
        if (byte < 0x80) {
            codes += byte;
        } else if (byte >= 0xF0) {
            codes += byte & 0x07U;
        } else if (byte >= 0xE0) {
            codes += byte & 0x0FU;
        } else if (byte >= 0xC0) {
            codes += byte & 0x1FU;
        } else {  // one of the bytes that follow
            codes.back() = codes.back() << 6U | (byte & 0x3FU);
        }
    }
    return codes;
}

std::string to_utf8(std::u32string_view codes) {
    std::string text;
    const auto tail = [&text](char32_t code, unsigned shift) {
        text += static_cast<char>(0x80U | (code >> shift & 0x3FU));
    };
    for (const char32_t code : codes) {
        if (code < 0x80) {
            text += static_cast<char>(code);
        } else if (code < 0x800) {
            text += static_cast<char>(0xC0U | code >> 6U);
            tail(code, 0);
        } else if (code < 0x10000) {
            text += static_cast<char>(0xE0U | code >> 12U);
            tail(code, 6);
            tail(code, 0);
        } else {
            text += static_cast<char>(0xF0U | code >> 18U);
            tail(code, 12);
            tail(code, 6);
            tail(code, 0);
        }
    }
    return text;
}

std::string legible(std::string_view raw) {
    std::u32string codes = code_points(raw);
    std::replace_if(codes.begin(), codes.end(), is_illegible, char32_t{0xFFFD});
    return to_utf8(codes);
}

}  // namespace tincture
