// The only place where threads are made. Work is cut into blocks whose number never depends on how
// many threads there are, so that a result summed block by block is the same for any of them.
#pragma once

#include <cstddef>
#include <functional>

namespace tincture {

// How many threads later calls may use together; 0 means one per processor.
void set_thread_count(int count);

// Gets the threads going in the background: that takes milliseconds, in which a caller may read a
// file. Later calls need not wait for it.
void start_threads();

// Calls body(i) once for each i in [0, blocks), in no order, possibly at the same time; returns
// when all have ended. An exception of a body is rethrown here (one of them, if several threw).
void parallel_for(std::size_t blocks, const std::function<void(std::size_t)>& body);

// Calls both, possibly at the same time; returns when both have ended, or rethrows as above.
void run_both(const std::function<void()>& one, const std::function<void()>& two);

}  // namespace tincture
