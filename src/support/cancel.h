// A run can be stopped from a signal handler: the handler asks, the pipeline answers at its next
// check by throwing Error(cancelled), and destructors take what was staged away.
#pragma once

#include <atomic>

namespace tincture {

// Async-signal-safe.
void request_cancel() noexcept;
[[nodiscard]] bool cancel_requested() noexcept;

// Throws Error(ErrorKind::cancelled) once request_cancel() was called. Cheap: one relaxed load.
void throw_if_cancelled();

}  // namespace tincture
