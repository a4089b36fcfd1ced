#include "output/typeface.h"

#include <gtest/gtest.h>

#include <numeric>

#include "output/svg.h"
#include "svg_reading.h"

namespace tincture {
namespace {

// Advance widths of Roboto-Regular 2.137 at 2048 units to the em, read from its hmtx table by other
// means: space 508, "0" 1151, "H" 1461; figures are all alike (common practice).
TEST(Typeface, WidthsAreThoseOfTheFont) {
    EXPECT_NEAR(text_width("0", 2048, Weight::regular), 1151, 0.01);
    EXPECT_NEAR(text_width("0123456789", 2048, Weight::regular), 11510, 0.1);
    EXPECT_NEAR(text_width("H H", 2048, Weight::regular), 2 * 1461 + 508, 0.1);
    EXPECT_NEAR(text_width("H", 13, Weight::regular), 1461 * 13 / 2048.0, 1e-4);
    EXPECT_GT(text_width("medium", 13, Weight::medium), text_width("medium", 13, Weight::regular));
    EXPECT_EQ(text_width("", 13, Weight::regular), 0);
}

TEST(Typeface, PairsAreKerned) {
    EXPECT_LT(text_width("AV", 100, Weight::regular),
              text_width("A", 100, Weight::regular) + text_width("V", 100, Weight::regular));
}

TEST(Typeface, HasTheSignsThatDrawingsUse) {
    const double box = text_width("\uffff", 100, Weight::regular);
    TextPainter painter;
    const GlyphImage* missing = painter.paint("\uffff", 40, Weight::regular, 0, 40)[0].image;
    for (const char* sign :
         {"\u2212", "\u2248", "\u00b0", "\u2026", "\u2009", "\u2002", "\u2003"}) {
        const GlyphImage* image = painter.paint(sign, 40, Weight::regular, 0, 40)[0].image;
        EXPECT_NE(image->coverage, missing->coverage) << sign;
    }
    EXPECT_GT(box, 0);
}

TEST(Typeface, PaintsWhereThePenStands) {
    TextPainter painter;
    const auto glyphs = painter.paint("HH", 40, Weight::regular, 10, 50);
    ASSERT_EQ(glyphs.size(), 2U);
    EXPECT_EQ(glyphs[0].y + glyphs[0].image->height, 50) << "stands on the baseline";
    EXPECT_GT(glyphs[0].x, 10);
    EXPECT_NEAR(glyphs[1].x - glyphs[0].x, text_width("H", 40, Weight::regular), 1);
    const auto& coverage = glyphs[0].image->coverage;
    const double ink = std::accumulate(coverage.begin(), coverage.end(), 0.0) / 255;
    // Two stems and a bar of an eighth of the height or so.
    EXPECT_GT(ink, 0.2 * static_cast<double>(coverage.size()));
    EXPECT_LT(ink, 0.6 * static_cast<double>(coverage.size()));
}

TEST(Typeface, ShortensInTheMiddle) {
    const std::string name = "a rather long name of a picture from the harbour.png";
    EXPECT_EQ(shortened(name, 13, Weight::regular, 1000), name);
    const std::string less = shortened(name, 13, Weight::regular, 120);
    EXPECT_LE(text_width(less, 13, Weight::regular), 120);
    EXPECT_GT(text_width(less, 13, Weight::regular), 100);
    EXPECT_TRUE(less.starts_with("a rather"));
    EXPECT_TRUE(less.ends_with(".png"));
    EXPECT_EQ(shortened(name, 13, Weight::regular, 1), "\u2026");
    EXPECT_EQ(shortened("", 13, Weight::regular, 1), "");
}

TEST(Svg, EscapesWhateverComes) {
    EXPECT_EQ(xml_escape("<a href=\"x\">&'"), "&lt;a href=&quot;x&quot;&gt;&amp;&#39;");
    EXPECT_EQ(xml_escape("\x01\n\xff\u202e"), "\ufffd\ufffd\ufffd\ufffd");
    EXPECT_EQ(xml_escape("gr\u00fcn \u4e2d"), "gr\u00fcn \u4e2d");
}

TEST(Svg, WritesWhatReadsBack) {
    SvgWriter svg(100, 50.5, "id", "Title <1>", "Words & more");
    svg.text({1.239, -0.001}, "a<b", {13, Weight::medium, "#123456", Anchor::end});
    svg.line({{0, 1}, {2, 3}}, {"#000000", 2, "1 2"});
    const std::string text = std::move(svg).finish();
    const auto elements = svg_reading::parse(text);
    ASSERT_EQ(elements.size(), 6U);
    EXPECT_EQ(elements[0].attributes.at("viewBox"), "0 0 100 50.5");
    EXPECT_EQ(elements[1].text, "Title <1>");
    EXPECT_EQ(elements[2].text, "Words & more");
    EXPECT_EQ(elements[4].attributes.at("x"), "1.24");
    EXPECT_EQ(elements[4].attributes.at("y"), "0");
    EXPECT_EQ(elements[4].text, "a<b");
    EXPECT_EQ(elements[5].attributes.at("stroke-dasharray"), "1 2");
    EXPECT_THROW((void)svg_reading::parse(text.substr(0, text.size() - 8)), std::runtime_error);
}

}  // namespace
}  // namespace tincture
