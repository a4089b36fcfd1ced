// study.json: everything that was measured, for programs.
#pragma once

#include <string>
#include <string_view>

#include "choose/study.h"

namespace tincture {

// The study as UTF-8 JSON with the keys of docs/study.schema.json in their order; `version` is that
// of the program. Values are rounded (mean squared errors and shares to 6 decimals, CIEDE2000, dE76
// and Lab to 4), what is unknown is null, and bytes that are no UTF-8 become U+FFFD.
[[nodiscard]] std::string study_json(const Study& study, std::string_view version);

}  // namespace tincture
