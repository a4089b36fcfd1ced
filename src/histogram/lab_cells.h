// Counting in cells of CIELAB, for pictures with too many colours to list them.
#pragma once

#include "histogram/colour_table.h"

namespace tincture {

inline constexpr double finest_cell_de = 0.25;

// Lab of the pixels [start, start + n) of a picture, opaque or not.
void picture_to_lab(const Picture& picture, const ColourSpace& space, std::size_t start,
                    std::size_t n, LabPlanes out);

// As count_colours(), in cells of finest_cell_de on a side, doubled until there are no more than
// `max_cells` (at least 8). Keys are cell numbers. Reads every pixel through the profile: slow, but
// in bounded memory.
[[nodiscard]] ColourTable count_lab_cells(const Picture& picture, const ColourSpace& space,
                                          std::size_t max_cells = 2'000'000);

}  // namespace tincture
