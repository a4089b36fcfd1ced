#pragma once

#include <string>

#include "choose/study.h"
#include "commands/terminal.h"

namespace tincture {

// What each step down costs, for the counts around the one that is used: the colour that goes and
// the one that its pixels get. Empty where no step was measured.
[[nodiscard]] std::string step_lines(const Study& study, const Terminal& terminal);

}  // namespace tincture
