// Which colours a count is judged on.
#pragma once

#include "colour/colour_space.h"
#include "evidence/evidence_facts.h"
#include "histogram/colour_table.h"
#include "histogram/weighted_points.h"

namespace tincture {

// Weighted colours for clustering, in CIELAB, and what was found on the way.
struct Evidence {
    WeightedPoints points;
    EvidenceFacts facts;
};

// Lets flat areas speak and blends along edges not: textbook criteria on every pixel count blends
// and noise as colours. Flat pixels count by how much their colour stands out as a peak among flat
// colours; all pixels count by what is missing to flat art, which is nearly everything for
// continuous tone and a 4096th for flat art (so that there is an answer for any count). Of large
// pictures some millions of pixels on a grid are looked at for what is flat.
[[nodiscard]] Evidence weigh_evidence(const Picture& picture, const ColourTable& table,
                                      const ColourSpace& space);

// Every pixel with the same weight; nothing is said of the picture.
[[nodiscard]] Evidence equal_evidence(const ColourTable& table);

}  // namespace tincture
