#include "support/text.h"

#include <gtest/gtest.h>

#include <cstdint>
#include <random>
#include <string>
#include <vector>

namespace tincture {
namespace {

using namespace std::string_literals;

TEST(Shown, LeavesOrdinaryNamesAlone) {
    for (const char* name : {"poster.png", "-rf", "a/b-c_d.tif", "Grün.jpg", "絵.png", "картина",
                             "🎨.webp", "$(x);*?"}) {
        EXPECT_EQ(shown(name), name);
    }
}

TEST(Shown, QuotesSpacesQuotesAndNothing) {
    EXPECT_EQ(shown(""), "''");
    EXPECT_EQ(shown("two words.png"), "'two words.png'");
    EXPECT_EQ(shown("no\u00A0break"), "'no\u00A0break'");
    EXPECT_EQ(shown("wide\u3000space"), "'wide\u3000space'");
    EXPECT_EQ(shown("it's"), "\"it's\"");
    EXPECT_EQ(shown("5\" disk"), "'5\" disk'");
    EXPECT_EQ(shown("it's 5\""), "'it\\'s 5\"'");
    EXPECT_EQ(shown("back\\slash"), "'back\\\\slash'");
}

TEST(Shown, EscapesControls) {
    EXPECT_EQ(shown("a\nb\tc\rd"), "'a\\nb\\tc\\rd'");
    EXPECT_EQ(shown("\x1b[31mred"), "'\\x1b[31mred'");
    EXPECT_EQ(shown("a\0b"s), "'a\\x00b'");
    EXPECT_EQ(shown("\x7f"), "'\\x7f'");
    EXPECT_EQ(shown("\u009b31m"), "'\\u009b31m'");  // the one-character form of ESC [
    for (char c = 1; c < 0x20; ++c) {
        const std::string text = shown(std::string(1, c));
        EXPECT_EQ(text.find(c), std::string::npos) << int{c};
    }
}

TEST(Shown, EscapesWhatIsInvisible) {
    EXPECT_EQ(shown("photo\u202egnp.exe"), "'photo\\u202egnp.exe'");
    for (const char32_t character :
         {U'\u00AD', U'\u061C', U'\u115F', U'\u200B', U'\u200C', U'\u200D', U'\u200E', U'\u200F',
          U'\u2028', U'\u2029', U'\u202A', U'\u202B', U'\u202C', U'\u202D', U'\u2060', U'\u2066',
          U'\u2067', U'\u2068', U'\u2069', U'\u3164', U'\uFE0F', U'\uFEFF', U'\uFDD0', U'\uFFFE'}) {
        std::string text;
        text += static_cast<char>(0xE0U | (character >> 12U));
        text += static_cast<char>(0x80U | ((character >> 6U) & 0x3FU));
        text += static_cast<char>(0x80U | (character & 0x3FU));
        if (character < 0x800) {
            text = {static_cast<char>(0xC0U | (character >> 6U)),
                    static_cast<char>(0x80U | (character & 0x3FU))};
        }
        const std::string escaped = shown(text);
        EXPECT_EQ(escaped.substr(0, 3), "'\\u") << std::hex << static_cast<unsigned>(character);
        EXPECT_EQ(std::stoul(escaped.substr(3), nullptr, 16), character);
    }
    EXPECT_EQ(shown("\U000E0041"), "'\\U000e0041'");
    EXPECT_EQ(shown("\U0001FFFF"), "'\\U0001ffff'");
    // The neighbours of the ranges are visible.
    for (const char* visible : {"\u00AC", "\u00AE", "\u2010", "\u2027", "\u2070", "\uFFFD", "¡"}) {
        EXPECT_EQ(shown(visible), visible);
    }
}

TEST(Shown, EscapesBytesThatAreNotUtf8) {
    EXPECT_EQ(shown("caf\xe9.png"), "'caf\\xe9.png'");
    EXPECT_EQ(shown("\xf0\x9f\x8e"), "'\\xf0\\x9f\\x8e'");
    EXPECT_EQ(shown("\xc0\xaf"), "'\\xc0\\xaf'");
    EXPECT_EQ(shown("\x85"), "'\\x85'");  // a byte, where U+0085 is \u0085
    EXPECT_EQ(shown("\u0085"), "'\\u0085'");
}

// The Unicode Standard 15, chapter 3.9, tables 3-8 to 3-11 (from memory).
TEST(ValidUtf8, ReplacesMaximalSubparts) {
    const std::string r = "\uFFFD";
    EXPECT_EQ(valid_utf8("\xC0\xAF\xE0\x80\xBF\xF0\x81\x82\x41"),
              r + r + r + r + r + r + r + r + "A");
    EXPECT_EQ(valid_utf8("\xED\xA0\x80\xED\xBF\xBF\xED\xAF\x41"),
              r + r + r + r + r + r + r + r + "A");
    EXPECT_EQ(valid_utf8("\xF4\x91\x92\x93\xFF\x41\x80\xBF\x42"),
              r + r + r + r + r + "A" + r + r + "B");
    EXPECT_EQ(valid_utf8("\xE1\x80\xE2\xF0\x91\x92\xF1\xBF\x41"), r + r + r + r + "A");
}

TEST(ValidUtf8, KeepsWhatIsValid) {
    for (const std::string& text : {""s, "plain"s, "a\0b"s, "\u0080\u07FF\u0800\uD7FF\uE000\uFFFF"s,
                                    "\U00010000\U0010FFFF"s}) {
        EXPECT_EQ(valid_utf8(text), text);
    }
    EXPECT_EQ(valid_utf8("\xE2\x82"), "\uFFFD");
    EXPECT_EQ(valid_utf8("\xE2"), "\uFFFD");
}

TEST(Text, AnyBytesBecomeOneSafeLine) {
    std::mt19937 random(20);
    const std::vector<std::uint8_t> bytes = {0x00, 0x0A, 0x1B, 0x20, 0x22, 0x27, 0x41, 0x5C, 0x7F,
                                             0x80, 0x8B, 0x9B, 0xA0, 0xAD, 0xBF, 0xC0, 0xC2, 0xDF,
                                             0xE0, 0xE2, 0xED, 0xEF, 0xF0, 0xF3, 0xF4, 0xF5, 0xFF};
    for (int round = 0; round < 20000; ++round) {
        std::string raw;
        for (auto length = random() % 8; length > 0; --length) {
            raw += static_cast<char>(bytes[random() % bytes.size()]);
        }
        const std::string valid = valid_utf8(raw);
        EXPECT_EQ(valid_utf8(valid), valid);
        const std::string line = shown(raw);
        EXPECT_EQ(valid_utf8(line), line);
        for (const char c : line) {
            EXPECT_TRUE(static_cast<std::uint8_t>(c) >= 0x20 && c != 0x7F) << line;
        }
    }
}

}  // namespace
}  // namespace tincture
