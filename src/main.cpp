// The only file that exits: turns errors into a line on standard error and an exit status.
#include <malloc.h>
#include <sys/mman.h>
#include <unistd.h>

#include <csignal>
#include <cstdint>
#include <cstdlib>
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

// A page fault can take longer than all that is done with the page: the heap gets huge pages where
// the system grants them, the part before the first of them is made at once, and what is freed is
// kept for the next step.
void prepare_heap() {
    constexpr int most_for_the_heap = 32 << 20;  // larger arrays come and go on their own
    constexpr int growth = 64 << 20;             // of addresses; memory is taken as it is used
    constexpr std::size_t probe = 256 << 10;     // more than the heap starts with
    constexpr std::uintptr_t page = 4 << 10;
    constexpr std::uintptr_t huge_page = 2 << 20;
    mallopt(M_MMAP_THRESHOLD, most_for_the_heap);
    mallopt(M_TRIM_THRESHOLD, 4 * growth);
    mallopt(M_TOP_PAD, growth);
    void* volatile grown = std::malloc(probe);  // volatile: so that it is not left out
    const auto start = reinterpret_cast<std::uintptr_t>(grown) / page * page;
    std::free(grown);
    const auto end = reinterpret_cast<std::uintptr_t>(sbrk(0));
    // A huge page can only be where nothing was touched yet.
    const std::uintptr_t first_huge = (start + probe + page + huge_page) / huge_page * huge_page;
    if (start == 0 || first_huge >= end) return;
    // Wishes: where they are not granted, pages come one by one.
    madvise(reinterpret_cast<void*>(start), first_huge - start, MADV_POPULATE_WRITE);
    madvise(reinterpret_cast<void*>(first_huge), end - first_huge, MADV_HUGEPAGE);
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
    prepare_heap();
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
