// swatches.tokens.json: the palette as design tokens.
#pragma once

#include <string>

#include "choose/study.h"

namespace tincture {

// The palette of study.count as a file of the Design Tokens Format 2025.10 (Design Tokens Community
// Group, final report of 28 October 2025): one group "palette" of colour tokens in sRGB, components
// 0 to 1 with 4 decimals and the hex form beside them, keyed by the swatch's name (without what
// the format forbids in a name); the description holds Lab (D50) and the share.
[[nodiscard]] std::string swatch_tokens(const Study& study);

}  // namespace tincture
