#pragma once

#include <chrono>
#include <string>

namespace tincture {

// One line on standard error that shows how far the work is, once that has taken half a second;
// gone when the work is done.
class ProgressBar {
  public:
    explicit ProgressBar(bool enabled);
    ~ProgressBar();
    ProgressBar(const ProgressBar&) = delete;
    ProgressBar& operator=(const ProgressBar&) = delete;

    // The work named `name` runs from `from` to `to` of the whole, 0 to 1.
    void stage(std::string name, double from, double to);
    void part(double done);  // of the stage, 0 to 1
    void clear();            // takes the line away

  private:
    void draw();

    using Clock = std::chrono::steady_clock;
    bool enabled_;
    bool visible_ = false;
    Clock::time_point start_ = Clock::now();
    Clock::time_point drawn_ = start_;
    std::string name_;
    double from_ = 0;
    double to_ = 0;
    double done_ = 0;
};

}  // namespace tincture
