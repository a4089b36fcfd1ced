// The only place where threads are made. Work is cut into blocks whose number never depends on how
// many threads there are, so that a result summed block by block is the same for any of them.
#pragma once

#include <cstddef>
#include <functional>

namespace tincture {

// How many threads later calls may use together; 0 means one per processor.
void set_thread_count(int count);

// Calls body(i) once for each i in [0, blocks), in no order, possibly at the same time; returns
// when all have ended. An exception of a body is rethrown here (one of them, if several threw).
void parallel_for(std::size_t blocks, const std::function<void(std::size_t)>& body);

}  // namespace tincture
