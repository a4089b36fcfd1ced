// Timing of functions and programs.
#pragma once

#include <functional>
#include <string>
#include <vector>

namespace tincture::benchmarks {

[[nodiscard]] double seconds(const std::function<void()>& work);  // wall clock

struct ProgramRun {
    double seconds = 0;     // from start to exit, wall clock
    double peak_bytes = 0;  // largest resident size
    int status = 0;
};
// Runs a program with its outputs thrown away.
[[nodiscard]] ProgramRun run_program(const std::vector<std::string>& arguments);

[[nodiscard]] double median(std::vector<double> values);

}  // namespace tincture::benchmarks
