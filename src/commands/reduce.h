#pragma once

#include "commands/options.h"
#include "commands/terminal.h"

namespace tincture {

// tincture reduce: how many colours a picture needs, and the picture in them. Throws Error.
void run_reduce(const ReduceOptions& options, const Terminal& terminal);

}  // namespace tincture
