#include "regions/tidy_labels.h"

#include <utility>

#include "histogram/pixel_lab.h"
#include "label/edges.h"
#include "label/label_map.h"
#include "regions/specks.h"

namespace tincture {

std::uint64_t tidy_labels(Samples<std::uint8_t>& labels, const Picture& picture,
                          const ColourTable& table, const ColourSpace& space,
                          const Palette& palette, const EvidenceFacts& facts,
                          std::optional<std::uint32_t> speck) {
    if (facts.kind != "flat art") {
        return tidy_specks(labels, picture.width, picture.height, palette, speck.value_or(0));
    }
    Samples<std::uint8_t> tidied =
        settled_edges(labels, PixelLab(picture, table, space), palette, facts.noise.value_or(0));
    tidy_specks(tidied, picture.width, picture.height, palette, speck.value_or(usual_speck));
    const std::uint64_t changed = count_differences(labels, tidied);
    labels = std::move(tidied);
    return changed;
}

}  // namespace tincture
