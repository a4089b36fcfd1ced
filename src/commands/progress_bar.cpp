#include "commands/progress_bar.h"

#include <cstdio>

namespace tincture {

using namespace std::chrono_literals;

ProgressBar::ProgressBar(bool enabled) : enabled_(enabled) {}

ProgressBar::~ProgressBar() {
    clear();
}

void ProgressBar::clear() {
    if (visible_) std::fputs("\r\x1b[K", stderr);
    visible_ = false;
}

void ProgressBar::stage(std::string name, double from, double to) {
    name_ = std::move(name);
    from_ = from;
    to_ = to;
    part(0);
}

void ProgressBar::part(double done) {
    if (!enabled_) return;
    done_ = done;
    const Clock::time_point now = Clock::now();
    if (now - start_ < 500ms || (visible_ && now - drawn_ < 40ms)) return;
    drawn_ = now;
    visible_ = true;
    draw();
}

void ProgressBar::draw() {
    constexpr int width = 24;
    const double whole = from_ + (to_ - from_) * done_;
    const int filled = static_cast<int>(whole * width);
    const std::string bar = std::string(static_cast<std::size_t>(filled), '=') +
                            std::string(static_cast<std::size_t>(width - filled), ' ');
    std::fprintf(stderr, "\r\x1b[K%3d %% |%s| %s", static_cast<int>(whole * 100), bar.c_str(),
                 name_.c_str());
    std::fflush(stderr);
}

}  // namespace tincture
