// Specks: regions too small to stand.
#pragma once

#include <cstdint>

#include "palette/palette.h"
#include "picture/picture.h"

namespace tincture {

// Gives every component of fewer than `smallest` pixels the label of a neighbour: of those that
// share a side with it, the label with the longest border, then the one whose colour is nearest in
// CIELAB, then the lower one. Returns how many pixels changed.
//
// Which components are specks is judged once, on the map as it comes. Specks join what is no speck;
// a speck among specks joins after one of its neighbours has. Where opaque pixels hang together in
// specks alone, the largest of them stays (of equally large ones that of the lowest label, then the
// first from the top) and the others join it. So no component below `smallest` remains where an
// opaque area has one that large; pixels that are no specks never change.
//
// Components hang together over corners: a stroke of one pixel that runs aslant is one region, not
// a row of specks. Labels of `palette.count` are transparent: never changed, never joined.
// `labels` holds width * height values.
std::uint64_t tidy_specks(Samples<std::uint8_t>& labels, std::uint32_t width, std::uint32_t height,
                          const Palette& palette, std::uint32_t smallest);

}  // namespace tincture
