#include "support/cancel.h"

#include "support/error.h"

namespace tincture {
namespace {
std::atomic<bool> requested{false};
static_assert(std::atomic<bool>::is_always_lock_free, "a signal handler writes it");
}  // namespace

void request_cancel() noexcept {
    requested.store(true, std::memory_order_relaxed);
}

bool cancel_requested() noexcept {
    return requested.load(std::memory_order_relaxed);
}

void throw_if_cancelled() {
    if (cancel_requested()) throw Error(ErrorKind::cancelled, "", "stopped");
}

}  // namespace tincture
