#pragma once

#include <string>
#include <variant>

#include "commands/options.h"

namespace tincture {

// Text that was asked for instead of work: help or version.
struct Answer {
    std::string text;
};

using CommandLine = std::variant<Answer, ReduceOptions>;

// Throws Error(usage) with one sentence that says what is wrong and what to do.
[[nodiscard]] CommandLine read_command_line(int argc, const char* const* argv);

}  // namespace tincture
