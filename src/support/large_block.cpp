#include "support/large_block.h"

#include <sys/mman.h>

namespace tincture {

LargeBlock::LargeBlock(std::size_t bytes) {
    if (bytes == 0) return;
    constexpr std::size_t huge_page = std::size_t{2} << 20;
    // A small block's pages are made at once, which costs less than a fault for each.
    const int populate = bytes < huge_page ? MAP_POPULATE : 0;
    void* memory =
        mmap(nullptr, bytes, PROT_READ | PROT_WRITE, MAP_PRIVATE | MAP_ANONYMOUS | populate, -1, 0);
    if (memory == MAP_FAILED) throw std::bad_alloc();
    // A wish: where it is not granted, small pages serve.
    if (populate == 0) madvise(memory, bytes, MADV_HUGEPAGE);
    memory_ = memory;
    bytes_ = bytes;
}

LargeBlock::~LargeBlock() {
    if (memory_ != nullptr) munmap(memory_, bytes_);
}

}  // namespace tincture
