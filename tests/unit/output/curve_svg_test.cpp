#include "output/curve_svg.h"

#include <gtest/gtest.h>

#include <algorithm>

#include "study_fixtures.h"
#include "svg_reading.h"

namespace tincture {
namespace {

using svg_reading::Element;

std::vector<Element> texts_of(const std::vector<Element>& drawing) {
    std::vector<Element> texts;
    std::copy_if(drawing.begin(), drawing.end(), std::back_inserter(texts),
                 [](const Element& element) { return element.name == "text"; });
    return texts;
}

bool shows(const std::vector<Element>& drawing, const std::string& words) {
    return std::any_of(drawing.begin(), drawing.end(),
                       [&](const Element& element) { return element.text == words; });
}

void expect_text_is_free(const std::string& name, const std::string& svg) {
    const auto drawing = svg_reading::parse(svg);
    const auto texts = texts_of(drawing);
    const Box page{0, 0, svg_reading::number(drawing[0], "width"),
                   svg_reading::number(drawing[0], "height")};
    std::vector<Segment> lines;
    for (const char* width : {"2", "1.5", "1.2"}) {  // curves, the choice, the tolerance
        const auto more = svg_reading::segments(drawing, width);
        lines.insert(lines.end(), more.begin(), more.end());
    }
    for (std::size_t i = 0; i < texts.size(); ++i) {
        const Box box = svg_reading::text_box(texts[i]);
        EXPECT_TRUE(contains(page, box)) << name << ": " << texts[i].text;
        for (std::size_t j = 0; j < i; ++j) {
            EXPECT_FALSE(overlap(box, svg_reading::text_box(texts[j])))
                << name << ": " << texts[i].text << " and " << texts[j].text;
        }
        for (const Segment& line : lines) {
            EXPECT_FALSE(crosses(line, box)) << name << ": " << texts[i].text;
        }
    }
}

TEST(CurveSvg, TextCoversNeitherTextNorCurves) {
    for (const auto& [name, study] : fixtures::all()) expect_text_is_free(name, curve_svg(study));
}

TEST(CurveSvg, TextIsFreeOnRandomStudies) {
    for (unsigned seed = 1; seed <= 200; ++seed) {
        const Study study = fixtures::random_study(seed);
        const std::string svg = curve_svg(study);
        expect_text_is_free("seed " + std::to_string(seed), svg);
        const auto drawing = svg_reading::parse(svg);
        EXPECT_TRUE(shows(drawing, "Number of colours") ||
                    shows(drawing, "Number of colours (log scale)"))
            << "a name found no place with seed " << seed;
        if (HasFailure()) break;
    }
}

TEST(CurveSvg, NamesWhatItMarks) {
    const auto poster = svg_reading::parse(curve_svg(fixtures::poster()));
    for (const char* words : {"proposed: 7", "knee: 7", "within tolerance: 6", "tolerance 3",
                              "all pixels", "evidence", "average", "6 to 8 can be defended"}) {
        EXPECT_TRUE(shows(poster, words)) << words;
    }
    const auto given = svg_reading::parse(curve_svg(fixtures::given()));
    EXPECT_TRUE(shows(given, "given: 5"));
    EXPECT_TRUE(shows(given, "proposed: 8; 7 to 9 can be defended"));
    const auto photograph = svg_reading::parse(curve_svg(fixtures::photograph()));
    EXPECT_TRUE(shows(photograph, "tolerance 3, not met"));
    EXPECT_FALSE(shows(photograph, "evidence")) << "it cannot be told from all pixels";
}

// As where a palette is used as it was given.
TEST(CurveSvg, WithoutAProposalNothingIsDefended) {
    Study study = fixtures::given();
    study.proposal = {};
    const std::string svg = curve_svg(study);
    const auto drawing = svg_reading::parse(svg);
    EXPECT_TRUE(shows(drawing, "5 colours were given."));
    EXPECT_EQ(svg.find("defended"), std::string::npos);
    const bool band = std::any_of(drawing.begin(), drawing.end(), [](const Element& element) {
        const auto fill = element.attributes.find("fill");
        return fill != element.attributes.end() && fill->second == "#f0f0f0";
    });
    EXPECT_FALSE(band);
}

TEST(CurveSvg, CurveRunsThroughTheMeasuredPoints) {
    Study study = fixtures::photograph();
    const auto drawing = svg_reading::parse(curve_svg(study));
    const auto curves = svg_reading::segments(drawing, "2");
    ASSERT_EQ(curves.size(), 2 * (study.curve.size() - 1));
    // On a log axis equal ratios are equal distances: mse falls by one power of the count.
    const auto height = [&](std::size_t i) {
        return i == 0 ? curves[0].from.y : curves[i - 1].to.y;
    };
    const double to_2 = height(1) - height(0);
    EXPECT_NEAR(height(3) - height(1), to_2, 0.02);
    EXPECT_NEAR(height(15) - height(0), 4 * to_2, 0.04);
}

TEST(CurveSvg, ZeroStandsOnTheFootBelowABreak) {
    const auto drawing = svg_reading::parse(curve_svg(fixtures::two_colours()));
    const auto curves = svg_reading::segments(drawing, "2");
    EXPECT_EQ(curves[0].to.y, 398);  // the foot of the upper panel
    EXPECT_LT(curves[0].from.y, 398 - 26);
    EXPECT_TRUE(shows(drawing, "0"));
    EXPECT_TRUE(shows(svg_reading::parse(curve_svg(fixtures::nearly_exact())), "<0.05"));
}

TEST(CurveSvg, IsReadOutAndStandsAlone) {
    const auto drawing = svg_reading::parse(curve_svg(fixtures::poster()));
    EXPECT_EQ(drawing[0].attributes.at("role"), "img");
    EXPECT_EQ(drawing[0].attributes.at("xmlns"), "http://www.w3.org/2000/svg");
    EXPECT_EQ(drawing[1].name, "title");
    EXPECT_EQ(drawing[1].text, "Error curve of harbour-festival.png");
    EXPECT_EQ(drawing[2].name, "desc");
    EXPECT_NE(drawing[2].text.find("7 colours are proposed"), std::string::npos);
    for (const Element& element : drawing) {
        EXPECT_FALSE(element.attributes.contains("href")) << "fetches something";
    }
}

TEST(CurveSvg, HostileNamesStayText) {
    const std::string svg = curve_svg(fixtures::hostile());
    for (const Element& element : svg_reading::parse(svg)) {
        EXPECT_NE(element.name, "img");
        EXPECT_NE(element.name, "b");
    }
    EXPECT_EQ(svg.find('\x1b'), std::string::npos);
    EXPECT_EQ(svg.find("\u202e"), std::string::npos);
}

TEST(CurveSvg, NoCurveIsAnError) {
    EXPECT_THROW((void)curve_svg(Study{}), std::out_of_range);
}

}  // namespace
}  // namespace tincture
