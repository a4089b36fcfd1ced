#include "output/study_json.h"

#include <nlohmann/json.hpp>
#include <optional>

#include "colour/notation.h"
#include "evidence/accents.h"
#include "output/json_text.h"
#include "support/format.h"

namespace tincture {
namespace {

using Json = nlohmann::ordered_json;

constexpr int mse_decimals = 6;
constexpr int share_decimals = 6;
constexpr int de_decimals = 4;
constexpr int bit_decimals = 4;
constexpr int lab_decimals = 4;
constexpr int dpi_decimals = 3;

template <typename Value>
Json known(const std::optional<Value>& value) {
    return value ? Json(*value) : Json(nullptr);
}

Json known(const std::optional<double>& value, int decimals) {
    return value ? Json(rounded(*value, decimals)) : Json(nullptr);
}

Json picture_json(const PictureFacts& picture) {
    Json json = {{"file", picture.file},
                 {"width", picture.width},
                 {"height", picture.height},
                 {"channels", picture.channels},
                 {"bits", picture.bits},
                 {"profile", known(picture.profile)},
                 {"dpi", nullptr},
                 {"opaque_pixels", picture.opaque_pixels},
                 {"distinct_colours", picture.distinct_colours}};
    if (picture.resolution) {
        json["dpi"] = {rounded(picture.resolution->x_dpi, dpi_decimals),
                       rounded(picture.resolution->y_dpi, dpi_decimals)};
    }
    if (picture.colour_cell_de)
        json["colour_cell_de"] = rounded(*picture.colour_cell_de, de_decimals);
    return json;
}

Json lab_json(const Lab& lab) {
    return Json::array(
        {rounded(lab.L, lab_decimals), rounded(lab.a, lab_decimals), rounded(lab.b, lab_decimals)});
}

Json accents_json(const Study& study) {
    if (!study.accents) return nullptr;
    Json labs = Json::array();
    for (const Lab& lab : study.accents->colours) labs.push_back(lab_json(lab));
    return {{"labs", labs},
            {"weight_each", accent_share},
            {"mse_by_area", rounded(study.accents->mse_by_area, mse_decimals)}};
}

Json place_json(const Palette& palette, std::size_t place) {
    const Swatch& swatch = palette.swatches.at(place);
    return {{"index", place}, {"name", swatch.name}, {"hex", hex(swatch.srgb)}};
}

Json loss_json(const Study& study, const CurvePoint& point) {
    if (!point.loss) return nullptr;
    const CountLoss& loss = *point.loss;
    return {{"colour", place_json(palette_at(study, point.count + 1), loss.colour)},
            {"into", place_json(palette_at(study, point.count), loss.into)},
            {"share", rounded(loss.share, share_decimals)},
            {"pixels", loss.pixels},
            {"into_share", rounded(loss.into_share, share_decimals)},
            {"mean_de00", rounded(loss.mean_de00, de_decimals)},
            {"max_de00", rounded(loss.max_de00, de_decimals)},
            {"mean_de00_before", rounded(loss.mean_de00_before, de_decimals)},
            {"max_de00_before", rounded(loss.max_de00_before, de_decimals)}};
}

Json curve_json(const Study& study) {
    Json json = Json::array();
    for (const CurvePoint& point : study.curve) {
        json.push_back({{"count", point.count},
                        {"evidence_mse", rounded(point.evidence_mse, mse_decimals)},
                        {"mse", rounded(point.mse, mse_decimals)},
                        {"mean_de00", rounded(point.mean_de00, de_decimals)},
                        {"p95_de00", rounded(point.p95_de00, de_decimals)},
                        {"max_de00", rounded(point.max_de00, de_decimals)},
                        {"closest_pair_de00", known(point.closest_pair_de00, de_decimals)},
                        {"label_bits", rounded(point.label_bits, bit_decimals)},
                        {"prediction_strength", known(point.prediction_strength, share_decimals)},
                        {"loss", loss_json(study, point)}});
    }
    return json;
}

Json proposal_json(const Proposal& proposal) {
    Json votes = Json::array();
    for (const Vote& vote : proposal.votes) {
        votes.push_back(
            {{"criterion", vote.criterion}, {"count", known(vote.count)}, {"reason", vote.reason}});
    }
    return {{"count", proposal.count},
            {"range", Json::array({proposal.low, proposal.high})},
            {"confidence", rounded(proposal.confidence, de_decimals)},
            {"sentence", proposal.sentence},
            {"votes", votes}};
}

Json swatch_json(const Swatch& swatch) {
    Json json = {{"name", swatch.name}, {"hex", hex(swatch.srgb)}};
    if (swatch.hex_de00) json["hex_de00"] = rounded(*swatch.hex_de00, de_decimals);
    json["lab"] = lab_json(swatch.lab);
    json["share"] = rounded(swatch.share, share_decimals);
    json["pixels"] = swatch.pixels;
    if (swatch.kept) json["kept"] = true;
    return json;
}

Json palettes_json(const std::vector<Palette>& palettes) {
    Json json = Json::array();
    for (const Palette& palette : palettes) {
        Json colours = Json::array();
        for (const Swatch& swatch : palette.swatches) colours.push_back(swatch_json(swatch));
        json.push_back({{"count", palette.count}, {"colours", std::move(colours)}});
    }
    return json;
}

Json labels_json(const LabelFacts& labels) {
    if (labels.shares.empty()) return nullptr;
    Json shares = Json::array();
    for (const double share : labels.shares) shares.push_back(rounded(share, share_decimals));
    return {{"shares", std::move(shares)},
            {"tidied_share", rounded(labels.tidied_share, share_decimals)}};
}

}  // namespace

std::string study_json(const Study& study, std::string_view version) {
    const Json json = {{"tincture", std::string(version)},
                       {"picture", picture_json(study.picture)},
                       {"evidence",
                        {{"kind", known(study.evidence.kind)},
                         {"flat_share", known(study.evidence.flat_share, share_decimals)},
                         {"noise", known(study.evidence.noise, de_decimals)},
                         {"accents", accents_json(study)}}},
                       {"tolerance", rounded(study.tolerance, de_decimals)},
                       {"curve", curve_json(study)},
                       {"proposal", proposal_json(study.proposal)},
                       {"count", study.count},
                       {"count_was_given", study.count_was_given},
                       {"labels", labels_json(study.labels)},
                       {"palettes", palettes_json(study.palettes)}};
    return json_text(json);
}

}  // namespace tincture
