#include "output/curve_csv.h"

#include "colour/notation.h"
#include "support/format.h"

namespace tincture {
namespace {

std::string loss_columns(const Study& study, const CurvePoint& point) {
    if (!point.loss) return std::string(10, ',');
    const CountLoss& loss = *point.loss;
    const Swatch& lost = palette_at(study, point.count + 1).swatches.at(loss.colour);
    const Swatch& into = palette_at(study, point.count).swatches.at(loss.into);
    std::string text;
    for (const Swatch* swatch : {&lost, &into}) {
        text += ',' + csv_field(swatch->name) + ',' + hex(swatch->srgb);
    }
    for (const double share : {loss.share, loss.into_share}) text += ',' + fixed(share, 6);
    for (const double de00 :
         {loss.mean_de00, loss.max_de00, loss.mean_de00_before, loss.max_de00_before}) {
        text += ',' + fixed(de00, 4);
    }
    return text;
}

}  // namespace

std::string curve_csv(const Study& study) {
    std::string text =
        "count,evidence_mse,mse,mean_de00,p95_de00,max_de00,closest_pair_de00,label_bits,"
        "prediction_strength,lost,lost_hex,into,into_hex,lost_share,into_share,lost_mean_de00,"
        "lost_max_de00,lost_mean_de00_before,lost_max_de00_before\n";
    for (const CurvePoint& point : study.curve) {
        text += std::to_string(point.count);
        for (const double mse : {point.evidence_mse, point.mse}) text += ',' + fixed(mse, 6);
        for (const double de00 : {point.mean_de00, point.p95_de00, point.max_de00}) {
            text += ',' + fixed(de00, 4);
        }
        text += ',';
        if (point.closest_pair_de00) text += fixed(*point.closest_pair_de00, 4);
        text += ',' + fixed(point.label_bits, 4) + ',';
        if (point.prediction_strength) text += fixed(*point.prediction_strength, 6);
        text += loss_columns(study, point) + '\n';
    }
    return text;
}

}  // namespace tincture
