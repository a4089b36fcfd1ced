#include "output/curve_csv.h"

#include "support/format.h"

namespace tincture {

std::string curve_csv(const Study& study) {
    std::string text =
        "count,evidence_mse,mse,mean_de00,p95_de00,max_de00,closest_pair_de00,label_bits,"
        "prediction_strength\n";
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
        text += '\n';
    }
    return text;
}

}  // namespace tincture
