// swatches.csv: the palette as a table.
#pragma once

#include <string>

#include "choose/study.h"

namespace tincture {

// Columns index,name,hex,L,a,b,share,pixels for the palette of study.count. `index` is the place in
// the palette of reduced.png and starts at 0; `hex` is sRGB; Lab is D50 and that of the colour as
// written, with 4 decimals; share is a part of the opaque pixels, with 6.
[[nodiscard]] std::string swatch_csv(const Study& study);

}  // namespace tincture
