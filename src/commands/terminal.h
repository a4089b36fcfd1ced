// What the two output streams can show. The only file that asks the environment.
#pragma once

namespace tincture {

struct Terminal {
    bool colour = false;    // 24-bit colours
    bool unicode = true;    // block characters
    bool progress = false;  // standard error is a terminal
    int width = 80;         // columns of text
};

[[nodiscard]] Terminal ask_terminal();

}  // namespace tincture
