// From means of clusters to colours that are there in the picture.
#pragma once

#include <span>
#include <vector>

#include "colour/lab.h"
#include "histogram/colour_table.h"

namespace tincture {

// Moves each of `centres` (CIELAB) but the first `kept` to a colour of the pixels that are nearest
// to it (CIE 1976), where it is not one already:
//   - to their most frequent colour, if that is half of them, or three tenths and within 2.5 dE76:
//   the
//     ink of clean art is given as it is in the file;
//   - to where they are densest, if less than a hundredth of them is within 2 dE76 of it: a mean
//     between two colours is the colour of nothing.
// Where cells stand for colours (table.cell_de), only the second.
[[nodiscard]] std::vector<Lab> moved_to_source(std::span<const Lab> centres, int kept,
                                               const ColourTable& table);

}  // namespace tincture
