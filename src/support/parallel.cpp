#include "support/parallel.h"

#include <tbb/global_control.h>
#include <tbb/parallel_for.h>

#include <memory>
#include <thread>
#include <vector>

namespace tincture {
namespace {

#if defined(__SANITIZE_THREAD__)
#define TINCTURE_PLAIN_THREADS 1
#elif defined(__has_feature)
#if __has_feature(thread_sanitizer)
#define TINCTURE_PLAIN_THREADS 1
#endif
#endif

std::size_t processor_count() {
    return std::max(1U, std::thread::hardware_concurrency());
}

#ifdef TINCTURE_PLAIN_THREADS
std::size_t thread_limit = processor_count();
#else
std::unique_ptr<tbb::global_control> thread_limit;
#endif

}  // namespace

#ifdef TINCTURE_PLAIN_THREADS

// ThreadSanitizer does not see the hand-over inside oneTBB and reports races that are none.
void set_thread_count(int count) {
    thread_limit = count <= 0 ? processor_count() : static_cast<std::size_t>(count);
}

void start_threads() {}

void parallel_for(std::size_t blocks, const std::function<void(std::size_t)>& body) {
    std::vector<std::exception_ptr> failures(thread_limit);
    std::vector<std::thread> threads;
    for (std::size_t t = 0; t < thread_limit; ++t) {
        threads.emplace_back([&, t] {
            try {
                for (std::size_t i = t; i < blocks; i += thread_limit) body(i);
            } catch (...) {
                failures[t] = std::current_exception();
            }
        });
    }
    for (std::thread& thread : threads) thread.join();
    for (const std::exception_ptr& failure : failures) {
        if (failure) std::rethrow_exception(failure);
    }
}

#else

void set_thread_count(int count) {
    thread_limit.reset();
    const std::size_t threads = count <= 0 ? processor_count() : static_cast<std::size_t>(count);
    thread_limit = std::make_unique<tbb::global_control>(
        tbb::global_control::max_allowed_parallelism, threads);
}

void start_threads() {
    if (tbb::global_control::active_value(tbb::global_control::max_allowed_parallelism) < 2) return;
    static std::jthread starter;  // joined when the program ends
    starter = std::jthread([] { tbb::parallel_for(0, 2, [](int) {}); });
}

void parallel_for(std::size_t blocks, const std::function<void(std::size_t)>& body) {
    tbb::parallel_for(std::size_t{0}, blocks, body, tbb::simple_partitioner());
}

#endif

void run_both(const std::function<void()>& one, const std::function<void()>& two) {
    parallel_for(2, [&](std::size_t i) { (i == 0 ? one : two)(); });
}

}  // namespace tincture
