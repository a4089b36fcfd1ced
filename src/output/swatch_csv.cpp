#include "output/swatch_csv.h"

#include "colour/notation.h"
#include "support/format.h"

namespace tincture {

std::string swatch_csv(const Study& study) {
    std::string text = "index,name,hex,L,a,b,share,pixels\n";
    int index = 0;
    for (const Swatch& swatch : palette_at(study, study.count).swatches) {
        text += std::to_string(index++) + ',' + csv_field(swatch.name) + ',' + hex(swatch.srgb);
        for (const double value : {swatch.lab.L, swatch.lab.a, swatch.lab.b}) {
            text += ',' + fixed(value, 4);
        }
        text += ',' + fixed(swatch.share, 6) + ',' + std::to_string(swatch.pixels) + '\n';
    }
    return text;
}

}  // namespace tincture
