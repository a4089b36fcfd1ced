// From exact centres to colours that can be written.
#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "colour/colour_space.h"
#include "colour/lab.h"
#include "colour/rgb.h"
#include "palette/palette.h"

namespace tincture {

// For each wanted colour the 8-bit colour of `space` that is nearest in CIELAB, in the same order.
// Where two would come out the same, the later takes the nearest neighbour that is still free: a
// palette never holds a colour twice. A colour of an 8-bit picture comes out as itself.
[[nodiscard]] std::vector<Rgb8> written_colours(std::span<const Lab> wanted,
                                                const ColourSpace& space);

// Colours of `space`, their Lab and their pixels (none empty) as swatches with sRGB form, share and
// name; most pixels first, equal ones by colour. The first `kept` are marked as kept.
[[nodiscard]] Palette make_palette(std::span<const Rgb8> written, std::span<const Lab> lab,
                                   std::span<const std::uint64_t> pixels, int kept,
                                   const ColourSpace& space, const ColourSpace& srgb);

}  // namespace tincture
