// Names for colours in plain words, for people who talk about them.
#pragma once

#include <span>
#include <string>
#include <vector>

#include "colour/lab.h"

namespace tincture {

// One name a colour, in the same order, each used once: lightness (pale, mid, deep), strength
// (greyish, soft, strong) and hue ("deep strong blue"), or "white", "black", "pale grey", "mid
// grey", "deep grey" where there is no hue to speak of. Where colours would share a name, those
// colours, and only those, add lightness, chroma and hue angle in whole units ("mid soft green 52
// 31 140"), with decimals where that is not enough. A name follows from the colour and its
// namesakes alone: adding a colour elsewhere, or another order, changes no other name. Only colours
// that are exactly equal depend on their order; they end in "again", as often as needed.
// The borders between the words are common practice, no standard.
[[nodiscard]] std::vector<std::string> name_colours(std::span<const Lab> colours);

}  // namespace tincture
