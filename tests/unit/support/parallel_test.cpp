#include "support/parallel.h"

#include <gtest/gtest.h>

#include <atomic>
#include <stdexcept>
#include <vector>

namespace tincture {
namespace {

TEST(Parallel, CallsEachBlockOnce) {
    for (const int threads : {1, 2, 3, 7}) {
        set_thread_count(threads);
        std::vector<std::atomic<int>> calls(1000);
        parallel_for(calls.size(), [&](std::size_t i) { ++calls[i]; });
        for (const auto& count : calls) EXPECT_EQ(count, 1);
    }
    set_thread_count(0);
}

TEST(Parallel, HandsAnExceptionOn) {
    EXPECT_THROW(parallel_for(100,
                              [](std::size_t i) {
                                  if (i == 57) throw std::runtime_error("57");
                              }),
                 std::runtime_error);
}

}  // namespace
}  // namespace tincture
