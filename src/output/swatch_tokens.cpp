#include "output/swatch_tokens.h"

#include <cstdint>
#include <nlohmann/json.hpp>

#include "colour/notation.h"
#include "output/json_text.h"
#include "support/format.h"

namespace tincture {
namespace {

using Json = nlohmann::ordered_json;

// Names must not hold { } or a point, nor start with $.
std::string token_name(const std::string& name) {
    std::string token;
    for (const char c : name) {
        const bool forbidden = c == '{' || c == '}' || c == '.' || c == '$' ||
                               static_cast<unsigned char>(c) < 0x20 || c == 0x7f;
        token += forbidden ? '-' : c;
    }
    return token.empty() ? "colour" : token;
}

Json token(const Swatch& swatch) {
    Json components = Json::array();
    for (const std::uint8_t value : {swatch.srgb.r, swatch.srgb.g, swatch.srgb.b}) {
        components.push_back(rounded(value / 255.0, 4));
    }
    std::string text = "Lab (D50) " + fixed(swatch.lab.L, 2) + ' ' + fixed(swatch.lab.a, 2) + ' ' +
                       fixed(swatch.lab.b, 2) + "; " + fixed(100 * swatch.share, 2) +
                       " % of the picture";
    if (swatch.hex_de00) {
        text += "; sRGB cannot hold it and is off by " + fixed(*swatch.hex_de00, 2) + " CIEDE2000";
    }
    return {{"$type", "color"},
            {"$value",
             {{"colorSpace", "srgb"},
              {"components", std::move(components)},
              {"hex", hex(swatch.srgb)}}},
            {"$description", std::move(text)}};
}

}  // namespace

std::string swatch_tokens(const Study& study) {
    Json group = Json::object();
    group["$description"] = "The picture in " + colours(study.count) + ": " + study.picture.file;
    for (const Swatch& swatch : palette_at(study, study.count).swatches) {
        std::string name = token_name(swatch.name);
        while (group.contains(name)) name += " again";
        group[name] = token(swatch);
    }
    return json_text({{"palette", std::move(group)}});
}

}  // namespace tincture
