// From the nearest colour of each pixel to labels that can be printed.
#pragma once

#include <cstdint>
#include <optional>

#include "colour/colour_space.h"
#include "evidence/evidence_facts.h"
#include "histogram/colour_table.h"
#include "palette/palette.h"
#include "picture/picture.h"

namespace tincture {

// Regions of flat art below this many pixels are specks, unless the person says otherwise.
inline constexpr std::uint32_t usual_speck = 3;

// Tidies the labels of label_pixels(): in flat art edges are settled (label/edges.h), then regions
// of fewer than `speck` pixels join a neighbour (regions/specks.h); unset, fewer than usual_speck
// in flat art. Otherwise labels stay but for specks that are asked for. Returns how many pixels
// have another label then. The same for any number of threads.
std::uint64_t tidy_labels(Samples<std::uint8_t>& labels, const Picture& picture,
                          const ColourTable& table, const ColourSpace& space,
                          const Palette& palette, const EvidenceFacts& facts,
                          std::optional<std::uint32_t> speck);

}  // namespace tincture
