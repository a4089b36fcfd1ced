#include "measure.h"

#include <fcntl.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include <algorithm>
#include <chrono>
#include <stdexcept>

namespace tincture::benchmarks {

using Clock = std::chrono::steady_clock;

double seconds(const std::function<void()>& work) {
    const Clock::time_point start = Clock::now();
    work();
    return std::chrono::duration<double>(Clock::now() - start).count();
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
    // The child says when it starts the program: copying this process takes a time of its own.
    int pipe_ends[2];
    if (pipe(pipe_ends) != 0) throw std::runtime_error("cannot make a pipe");
    const pid_t child = fork();
    if (child < 0) throw std::runtime_error("cannot start " + arguments[0]);
    if (child == 0) {
        const int nowhere = open("/dev/null", O_WRONLY);
        dup2(nowhere, 1);
        dup2(nowhere, 2);
        close(pipe_ends[0]);
        fcntl(pipe_ends[1], F_SETFD, FD_CLOEXEC);
        const Clock::time_point start = Clock::now();
        if (write(pipe_ends[1], &start, sizeof start) != sizeof start) _exit(127);
        execv(argv[0], argv.data());
        _exit(127);
    }
    close(pipe_ends[1]);
    wait4(child, &run.status, 0, &usage);
    const Clock::time_point end = Clock::now();
    Clock::time_point start;
    const bool started = read(pipe_ends[0], &start, sizeof start) == sizeof start;
    close(pipe_ends[0]);
    if (!started) throw std::runtime_error("cannot start " + arguments[0]);
    run.seconds = std::chrono::duration<double>(end - start).count();
    run.peak_bytes = static_cast<double>(usage.ru_maxrss) * 1024;
    return run;
}

double median(std::vector<double> values) {
    std::sort(values.begin(), values.end());
    return values[values.size() / 2];
}

}  // namespace tincture::benchmarks
