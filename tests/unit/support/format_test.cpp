#include "support/format.h"

#include <gtest/gtest.h>

#include <clocale>
#include <cmath>
#include <limits>
#include <locale>

namespace tincture {
namespace {

TEST(Format, FixedRoundsAndHasNoNegativeZero) {
    EXPECT_EQ(fixed(1.005, 2), "1.00");  // the double lies below
    EXPECT_EQ(fixed(0.125, 2), "0.12");  // a tie goes to the even digit
    EXPECT_EQ(fixed(2.5, 0), "2");
    EXPECT_EQ(fixed(-0.004, 2), "0.00");
    EXPECT_EQ(fixed(-0.0, 0), "0");
    EXPECT_EQ(fixed(-0.006, 2), "-0.01");
    EXPECT_EQ(fixed(1e300, 1).size(), 303U);
    EXPECT_EQ(fixed(std::nan(""), 2), "");
    EXPECT_EQ(fixed(std::numeric_limits<double>::infinity(), 2), "");
}

TEST(Format, RoundedIsWhatFixedShows) {
    EXPECT_EQ(rounded(0.123456789, 4), 0.1235);
    EXPECT_EQ(rounded(-1e-9, 4), 0.0);
    EXPECT_FALSE(std::signbit(rounded(-1e-9, 4)));
    EXPECT_TRUE(std::isnan(rounded(std::nan(""), 4)));
}

TEST(Format, ReadableHasATrueMinus) {
    EXPECT_EQ(readable(-12.34, 1), "\u221212.3");
    EXPECT_EQ(readable(-0.01, 1), "0.0");
}

TEST(Format, OneColourIsNotSeveral) {
    EXPECT_EQ(colours(1), "1 colour");
    EXPECT_EQ(colours(2), "2 colours");
    EXPECT_EQ(colours(256), "256 colours");
}

TEST(Format, CsvFieldsAreQuotedOnlyWhereNeeded) {
    EXPECT_EQ(csv_field("mid soft green"), "mid soft green");
    EXPECT_EQ(csv_field(""), "");
    EXPECT_EQ(csv_field("a,b"), "\"a,b\"");
    EXPECT_EQ(csv_field("say \"hello\""), "\"say \"\"hello\"\"\"");
    EXPECT_EQ(csv_field("two\nlines"), "\"two\nlines\"");
}

class CommaPoint : public std::numpunct<char> {
  protected:
    char do_decimal_point() const override { return ','; }
    char do_thousands_sep() const override { return '.'; }
    std::string do_grouping() const override { return "\3"; }
};

TEST(Format, DoesNotFollowTheLocale) {
    const std::locale before =
        std::locale::global(std::locale(std::locale::classic(), new CommaPoint));
    std::setlocale(LC_ALL, "de_DE.UTF-8");  // where it is installed
    const std::string text = fixed(12345.5, 2);
    const double number = rounded(12345.678, 1);
    std::locale::global(before);
    std::setlocale(LC_ALL, "C");
    EXPECT_EQ(text, "12345.50");
    EXPECT_EQ(number, 12345.7);
}

}  // namespace
}  // namespace tincture
