#include "measure.h"

#include <fcntl.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <chrono>
#include <stdexcept>

namespace tincture::benchmarks {

double seconds(const std::function<void()>& work) {
    const auto start = std::chrono::steady_clock::now();
    work();
    return std::chrono::duration<double>(std::chrono::steady_clock::now() - start).count();
}

// fork() and not posix_spawn(): that lends the child its parent's memory until it starts, and the
// system would report the parent's peak as the child's.
ProgramRun run_program(const std::vector<std::string>& arguments) {
    std::vector<char*> argv;
    for (const std::string& argument : arguments) {
        argv.push_back(const_cast<char*>(argument.c_str()));
    }
    argv.push_back(nullptr);
    ProgramRun run;
    rusage usage{};
    run.seconds = seconds([&] {
        const pid_t child = fork();
        if (child < 0) throw std::runtime_error("cannot start " + arguments[0]);
        if (child == 0) {
            const int nowhere = open("/dev/null", O_WRONLY);
            dup2(nowhere, 1);
            dup2(nowhere, 2);
            execv(argv[0], argv.data());
            _exit(127);
        }
        wait4(child, &run.status, 0, &usage);
    });
    run.peak_bytes = static_cast<double>(usage.ru_maxrss) * 1024;
    return run;
}

double median(std::vector<double> values) {
    std::sort(values.begin(), values.end());
    return values[values.size() / 2];
}

}  // namespace tincture::benchmarks
