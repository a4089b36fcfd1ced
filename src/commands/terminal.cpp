#include "commands/terminal.h"

#include <sys/ioctl.h>
#include <unistd.h>

#include <algorithm>
#include <cctype>
#include <cstdlib>
#include <string>
#include <string_view>

namespace tincture {
namespace {

std::string_view environment(const char* name) {
    const char* value = std::getenv(name);
    return value == nullptr ? "" : value;
}

// The first of these that is set counts (POSIX).
bool locale_is_utf8() {
    for (const char* name : {"LC_ALL", "LC_CTYPE", "LANG"}) {
        const std::string_view value = environment(name);
        if (value.empty()) continue;
        // Written in many ways: C.UTF-8, en_GB.utf8.
        std::string letters;
        for (const char c : value) {
            if (c != '-') letters += static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
        }
        return letters.find("utf8") != std::string::npos;
    }
    return false;
}

}  // namespace

Terminal ask_terminal() {
    Terminal terminal;
    const bool dumb = environment("TERM") == "dumb";
    const bool shown = isatty(STDOUT_FILENO) == 1 && !dumb;
    terminal.colour = shown && environment("NO_COLOR").empty();
    terminal.unicode = !shown || locale_is_utf8();  // a file takes all of UTF-8
    terminal.progress = isatty(STDERR_FILENO) == 1 && !dumb;
    winsize size{};
    if (shown && ioctl(STDOUT_FILENO, TIOCGWINSZ, &size) == 0 && size.ws_col > 0) {
        terminal.width = std::clamp<int>(size.ws_col, 40, 120);
    }
    return terminal;
}

}  // namespace tincture
