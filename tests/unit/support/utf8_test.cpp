#include "support/utf8.h"

#include <gtest/gtest.h>

namespace tincture {
namespace {

TEST(Utf8, CodePointsAndBack) {
    const std::string text = "a\u00e4\u20ac\U0001f3a8";
    EXPECT_EQ(code_points(text), U"a\u00e4\u20ac\U0001f3a8");
    EXPECT_EQ(to_utf8(code_points(text)), text);
    EXPECT_EQ(code_points("a\xff"
                          "b"),
              U"a\ufffdb");
    EXPECT_EQ(code_points(""), U"");
}

TEST(Utf8, LegibleTextHidesNothing) {
    EXPECT_EQ(legible("plain \u00e4 \u4e2d"), "plain \u00e4 \u4e2d");
    EXPECT_EQ(legible("a\nb\x1b\x7f"),
              "a\ufffd"
              "b\ufffd\ufffd");
    EXPECT_EQ(legible("a\u202eb\u2066c\ufeff"), "a\ufffdb\ufffdc\ufffd");
    EXPECT_EQ(legible("\u0085\u2028\ufffe"), "\ufffd\ufffd\ufffd");
    EXPECT_EQ(legible("a\u200db"), "a\u200db");  // joins letters in some scripts
}

}  // namespace
}  // namespace tincture
