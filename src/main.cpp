// The only file that exits: turns errors into a line on standard error and an exit status.
#include <malloc.h>

#include <csignal>
#include <iostream>
#include <new>

#include "commands/command_line.h"
#include "commands/reduce.h"
#include "support/cancel.h"
#include "support/error.h"
#include "support/text.h"

namespace {

constexpr int done = 0;
constexpr int stopped = 1;
constexpr int wrong_usage = 2;

volatile std::sig_atomic_t signal_number = 0;

void on_signal(int number) {
    signal_number = number;
    tincture::request_cancel();
}

void listen_for_signals() {
    for (const int number : {SIGINT, SIGTERM, SIGHUP}) {
        struct sigaction action {};
        action.sa_handler = on_signal;
        // A second signal ends the program at once.
        action.sa_flags = static_cast<int>(SA_RESETHAND);
        sigaction(number, &action, nullptr);
    }
    // A limit on file sizes is to end in a message, as any full disk.
    std::signal(SIGXFSZ, SIG_IGN);
}

// Arrays of a few megabytes come and go in every step: kept, they are not cleared again and again.
void keep_freed_memory() {
    mallopt(M_MMAP_THRESHOLD, 32 << 20);
    mallopt(M_TRIM_THRESHOLD, 64 << 20);
}

int fail(int status, const std::string& subject, const std::string& message) {
    std::cerr << "tincture: " << (subject.empty() ? "" : tincture::shown(subject) + ": ") << message
              << '\n';
    return status;
}

int run(int argc, char** argv) {
    const tincture::CommandLine line = tincture::read_command_line(argc, argv);
    if (const auto* answer = std::get_if<tincture::Answer>(&line)) {
        std::cout << answer->text;
    } else {
        run_reduce(std::get<tincture::ReduceOptions>(line), tincture::ask_terminal());
    }
    std::cout.flush();
    return std::cout ? done : fail(stopped, "standard output", "cannot be written");
}

}  // namespace

int main(int argc, char** argv) {
    listen_for_signals();
    keep_freed_memory();
    try {
        return run(argc, argv);
    } catch (const tincture::Error& error) {
        if (error.kind() == tincture::ErrorKind::cancelled && signal_number != 0) {
            // What was staged is gone: end as the signal would have ended the program.
            const int number = signal_number;
            std::signal(number, SIG_DFL);
            std::raise(number);
        }
        const bool usage = error.kind() == tincture::ErrorKind::usage;
        return fail(usage ? wrong_usage : stopped, error.subject(), error.what());
    } catch (const std::bad_alloc&) {
        return fail(stopped, "", "memory ran out; give the program more, or a smaller picture");
    } catch (const std::exception& error) {
        return fail(stopped, "",
                    std::string("something that should not happen did: ") + error.what());
    }
}
