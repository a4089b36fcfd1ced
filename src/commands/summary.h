#pragma once

#include <optional>
#include <string>

#include "choose/study.h"
#include "commands/terminal.h"

namespace tincture {

// What a person reads at the end of a run: picture, proposal, swatches, the counts with their error
// as bars, and where the files are. `asked` is the count that was asked for, `folder` where the
// files are.
[[nodiscard]] std::string summary(const Study& study, const std::optional<int>& asked,
                                  const Terminal& terminal, const std::string& folder);

}  // namespace tincture
