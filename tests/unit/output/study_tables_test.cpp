// What programs read: CSV, JSON and design tokens, parsed again.
#include <gtest/gtest.h>

#include <clocale>
#include <locale>
#include <nlohmann/json.hpp>
#include <set>

#include "colour/notation.h"
#include "output/curve_csv.h"
#include "output/curve_svg.h"
#include "output/json_text.h"
#include "output/study_json.h"
#include "output/swatch_csv.h"
#include "output/swatch_sheet.h"
#include "output/swatch_tokens.h"
#include "study_fixtures.h"

namespace tincture {
namespace {

using Json = nlohmann::ordered_json;
using Rows = std::vector<std::vector<std::string>>;

// RFC 4180, with line feeds.
Rows read_csv(const std::string& text) {
    Rows rows(1, {""});
    bool quoted = false;
    for (std::size_t i = 0; i < text.size(); ++i) {
        const char c = text[i];
        if (quoted && c == '"' && i + 1 < text.size() && text[i + 1] == '"') {
            rows.back().back() += text[++i];
        } else if (c == '"') {
            quoted = !quoted;
        } else if (!quoted && c == ',') {
            rows.back().emplace_back();
        } else if (!quoted && c == '\n') {
            rows.push_back({""});
        } else {
            rows.back().back() += c;
        }
    }
    EXPECT_EQ(rows.back(), std::vector<std::string>{""}) << "no line break at the end";
    rows.pop_back();
    return rows;
}

TEST(CurveCsv, HoldsTheCurve) {
    Study study = fixtures::poster();
    study.curve[1].evidence_mse = 1234567.1234567;
    study.curve[1].max_de00 = 0.00004;
    const Rows rows = read_csv(curve_csv(study));
    ASSERT_EQ(rows.size(), 13U);
    EXPECT_EQ(rows[0],
              (std::vector<std::string>{
                  "count", "evidence_mse", "mse", "mean_de00", "p95_de00", "max_de00",
                  "closest_pair_de00", "label_bits", "prediction_strength", "lost", "lost_hex",
                  "into", "into_hex", "lost_share", "into_share", "lost_mean_de00", "lost_max_de00",
                  "lost_mean_de00_before", "lost_max_de00_before"}));
    EXPECT_EQ(rows[1][0], "1");
    EXPECT_EQ(rows[1][6], "") << "one colour has no pair";
    EXPECT_EQ(rows[2][1], "1234567.123457");
    EXPECT_EQ(rows[2][5], "0.0000");
    EXPECT_EQ(rows[2][6], "30.0000");
    EXPECT_EQ(rows[12][2], "0.000000");
    EXPECT_EQ(rows[4][7], "1.6000");
    EXPECT_EQ(rows[4][8], "0.350000");
    EXPECT_EQ(read_csv(curve_csv(fixtures::many()))[30][8], "") << "not measured";
    const Swatch& lost = study.palettes[4].swatches[4];
    const Swatch& into = study.palettes[3].swatches[2];
    EXPECT_EQ(rows[4][9], lost.name);
    EXPECT_EQ(rows[4][10], hex(lost.srgb));
    EXPECT_EQ(rows[4][11], into.name);
    EXPECT_EQ(rows[4][12], hex(into.srgb));
    EXPECT_EQ(rows[4][13], "0.011431");
    EXPECT_EQ(rows[4][14], "0.750000");
    EXPECT_EQ(rows[4][17], "1.5000");
    EXPECT_EQ(rows[4][18], "4.2500");
    for (std::size_t i = 9; i < 19; ++i) EXPECT_EQ(rows[12][i], "") << "no more was measured";
    for (const auto& row : rows) EXPECT_EQ(row.size(), rows[0].size());
}

TEST(SwatchCsv, HoldsThePaletteOfTheCount) {
    const Study study = fixtures::given();
    const Rows rows = read_csv(swatch_csv(study));
    const Palette& palette = palette_at(study, 5);
    ASSERT_EQ(rows.size(), 6U);
    EXPECT_EQ(rows[0],
              (std::vector<std::string>{"index", "name", "hex", "L", "a", "b", "share", "pixels"}));
    for (std::size_t i = 0; i < 5; ++i) {
        EXPECT_EQ(rows[i + 1][0], std::to_string(i));
        EXPECT_EQ(rows[i + 1][1], palette.swatches[i].name);
        EXPECT_EQ(rows[i + 1][2].size(), 7U);
        EXPECT_NEAR(std::stod(rows[i + 1][3]), palette.swatches[i].lab.L, 5.001e-5);
        EXPECT_NEAR(std::stod(rows[i + 1][6]), palette.swatches[i].share, 5.001e-7);
        EXPECT_EQ(rows[i + 1][7], std::to_string(palette.swatches[i].pixels));
    }
    EXPECT_EQ(rows[1][2], "#f7f7f3");
    EXPECT_EQ(rows[1][3], "97.2000");
}

TEST(SwatchCsv, HostileNamesStayOneField) {
    const Study study = fixtures::hostile();
    const Rows rows = read_csv(swatch_csv(study));
    ASSERT_EQ(rows.size(), 8U);
    EXPECT_EQ(rows[1].size(), 8U);
    EXPECT_EQ(rows[1][1], palette_at(study, 7).swatches[0].name);
}

std::vector<std::string> keys_of(const Json& json) {
    std::vector<std::string> keys;
    for (const auto& [key, value] : json.items()) keys.push_back(key);
    return keys;
}

TEST(StudyJson, HasTheKeysInTheirOrder) {
    const Json json = Json::parse(study_json(fixtures::poster(), "1.2.3"));
    EXPECT_EQ(keys_of(json), (std::vector<std::string>{"tincture", "picture", "evidence",
                                                       "tolerance", "curve", "proposal", "count",
                                                       "count_was_given", "labels", "palettes"}));
    EXPECT_EQ(keys_of(json["picture"]),
              (std::vector<std::string>{"file", "width", "height", "channels", "bits", "profile",
                                        "dpi", "opaque_pixels", "distinct_colours"}));
    EXPECT_EQ(keys_of(json["curve"][3]),
              (std::vector<std::string>{"count", "evidence_mse", "mse", "mean_de00", "p95_de00",
                                        "max_de00", "closest_pair_de00", "label_bits",
                                        "prediction_strength", "loss"}));
    EXPECT_EQ(
        keys_of(json["curve"][3]["loss"]),
        (std::vector<std::string>{"colour", "into", "share", "pixels", "into_share", "mean_de00",
                                  "max_de00", "mean_de00_before", "max_de00_before"}));
    EXPECT_EQ(keys_of(json["curve"][3]["loss"]["colour"]),
              (std::vector<std::string>{"index", "name", "hex"}));
    EXPECT_EQ(keys_of(json["proposal"]),
              (std::vector<std::string>{"count", "range", "confidence", "sentence", "votes"}));
    EXPECT_EQ(keys_of(json["palettes"][6]["colours"][0]),
              (std::vector<std::string>{"name", "hex", "lab", "share", "pixels"}));
}

TEST(StudyJson, NamesWhatIsLost) {
    const Study study = fixtures::far_count();
    const Json json = Json::parse(study_json(study, ""));
    const Json& loss = json["curve"][5]["loss"];
    EXPECT_EQ(loss["colour"]["index"], 6);
    EXPECT_EQ(loss["colour"]["name"], json["palettes"][6]["colours"][6]["name"]);
    EXPECT_EQ(loss["colour"]["hex"], json["palettes"][6]["colours"][6]["hex"]);
    EXPECT_EQ(loss["into"]["index"], 3);
    EXPECT_EQ(loss["into"]["hex"], json["palettes"][5]["colours"][3]["hex"]);
    EXPECT_EQ(loss["pixels"], 12345);
    EXPECT_EQ(loss["into_share"], 0.75);
    EXPECT_EQ(loss["mean_de00_before"], 1.5);
    EXPECT_EQ(loss["max_de00_before"], 4.25);
    EXPECT_TRUE(json["curve"][24]["loss"].is_null()) << "26 colours were not measured";
    EXPECT_TRUE(json["curve"][25]["loss"].is_null());
}

TEST(StudyJson, HoldsRoundedValues) {
    Study study = fixtures::given();
    study.curve[4].mse = 3.123456789;
    study.palettes[4].swatches[1].lab.a = -0.00001;
    study.picture.resolution = Resolution{299.99949, 300};
    const std::string text = study_json(study, "1.2.3");
    const Json json = Json::parse(text);
    EXPECT_EQ(json["tincture"], "1.2.3");
    EXPECT_EQ(json["curve"][4]["mse"], 3.123457);
    EXPECT_EQ(json["picture"]["dpi"], Json::parse("[299.999, 300.0]"));
    EXPECT_EQ(json["count"], 5);
    EXPECT_EQ(json["count_was_given"], true);
    EXPECT_EQ(json["proposal"]["range"], Json::parse("[7, 9]"));
    EXPECT_EQ(json["proposal"]["votes"][0]["count"], 9);
    EXPECT_EQ(json["palettes"][4]["colours"][2]["kept"], true);
    EXPECT_EQ(json["labels"]["tidied_share"], 0.012346);
    EXPECT_EQ(text.find("-0.0,"), std::string::npos);
}

TEST(StudyJson, WhatIsUnknownIsNull) {
    const Json json = Json::parse(study_json(fixtures::single_colour(), ""));
    EXPECT_TRUE(json["picture"]["profile"].is_null());
    EXPECT_TRUE(json["picture"]["dpi"].is_null());
    EXPECT_TRUE(json["evidence"]["kind"].is_null());
    EXPECT_TRUE(json["evidence"]["noise"].is_null());
    EXPECT_TRUE(json["proposal"]["votes"][0]["count"].is_null());
    EXPECT_TRUE(json["curve"][0]["closest_pair_de00"].is_null());
    const Json many = Json::parse(study_json(fixtures::many(), ""));
    EXPECT_TRUE(many["curve"][29]["prediction_strength"].is_null());
    EXPECT_EQ(many["curve"][3]["prediction_strength"], 0.35);
    Study study = fixtures::single_colour();
    study.labels = {};
    study.curve[0].mse = std::numeric_limits<double>::quiet_NaN();
    const Json bare = Json::parse(study_json(study, ""));
    EXPECT_TRUE(bare["labels"].is_null());
    EXPECT_TRUE(bare["curve"][0]["mse"].is_null());
}

TEST(StudyJson, ExtrasStandOnlyWhereTheyAreSet) {
    const Json json = Json::parse(study_json(fixtures::wide_gamut(), ""));
    EXPECT_EQ(json["picture"]["colour_cell_de"], 0.25);
    EXPECT_EQ(json["palettes"][8]["colours"][4]["hex_de00"], 8.25);
    EXPECT_FALSE(json["palettes"][8]["colours"][5].contains("hex_de00"));
}

TEST(JsonText, BreaksLinesAndKeepsTheValue) {
    const Json value = Json::parse(R"({"b": [1, 2], "a": [{"x": {"y": null}}, {}], "c": ""})");
    EXPECT_EQ(json_text(value),
              "{\n  \"b\": [1,2],\n  \"a\": [\n    {\n      \"x\": {\"y\":null}\n    },\n"
              "    {}\n  ],\n  \"c\": \"\"\n}\n");
    const Json study = Json::parse(study_json(fixtures::many(), ""));
    EXPECT_EQ(Json::parse(json_text(study)), study);
}

// The rules of the format 2025.10 for colour values and for names, as its JSON Schema has them.
TEST(SwatchTokens, FollowTheFormat) {
    for (const auto& [name, study] : fixtures::all()) {
        const Json json = Json::parse(swatch_tokens(study));
        EXPECT_EQ(keys_of(json), std::vector<std::string>{"palette"});
        std::size_t tokens = 0;
        for (const auto& [key, token] : json["palette"].items()) {
            if (key == "$description") continue;
            ++tokens;
            EXPECT_EQ(key.find_first_of("{}.$"), std::string::npos) << key;
            EXPECT_EQ(token["$type"], "color");
            EXPECT_EQ(keys_of(token["$value"]),
                      (std::vector<std::string>{"colorSpace", "components", "hex"}));
            EXPECT_EQ(token["$value"]["colorSpace"], "srgb");
            ASSERT_EQ(token["$value"]["components"].size(), 3U);
            for (const Json& component : token["$value"]["components"]) {
                EXPECT_GE(component.get<double>(), 0);
                EXPECT_LE(component.get<double>(), 1);
            }
            EXPECT_EQ(token["$value"]["hex"].get<std::string>().size(), 7U);
            EXPECT_TRUE(token["$description"].is_string());
        }
        EXPECT_EQ(tokens, palette_at(study, study.count).swatches.size()) << name;
    }
}

TEST(SwatchTokens, NamesThatWouldMeetStayApart) {
    Study study = fixtures::two_colours();
    study.palettes[1].swatches[0].name = "a.b";
    study.palettes[1].swatches[1].name = "a$b";
    const Json json = Json::parse(swatch_tokens(study));
    EXPECT_EQ(json["palette"]["a-b"]["$value"]["hex"], "#f7f7f3");
    EXPECT_EQ(json["palette"]["a-b again"]["$value"]["hex"], "#1a1a1b");
    EXPECT_EQ(json["palette"]["a-b"]["$value"]["components"][2], 0.9529);  // 243 / 255
}

class CommaPoint : public std::numpunct<char> {
  protected:
    char do_decimal_point() const override { return ','; }
    std::string do_grouping() const override { return "\3"; }
};

std::string everything(const Study& study) {
    const auto png = swatches_png(study);
    return curve_csv(study) + curve_svg(study) + study_json(study, "1") + swatch_csv(study) +
           swatches_svg(study) + swatch_tokens(study) + std::string(png.begin(), png.end());
}

TEST(StudyFiles, DoNotFollowTheLocale) {
    const Study study = fixtures::poster();
    const std::string plain = everything(study);
    const std::locale before =
        std::locale::global(std::locale(std::locale::classic(), new CommaPoint));
    std::setlocale(LC_ALL, "de_DE.UTF-8");  // where it is installed
    const std::string abroad = everything(study);
    std::locale::global(before);
    std::setlocale(LC_ALL, "C");
    EXPECT_EQ(plain, abroad);
}

}  // namespace
}  // namespace tincture
