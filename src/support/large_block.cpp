#include "support/large_block.h"

#include <sys/mman.h>

namespace tincture {

LargeBlock::LargeBlock(std::size_t bytes) {
    if (bytes == 0) return;
    void* memory = mmap(nullptr, bytes, PROT_READ | PROT_WRITE, MAP_PRIVATE | MAP_ANONYMOUS, -1, 0);
    if (memory == MAP_FAILED) throw std::bad_alloc();
    // A wish: where it is not granted, small pages serve.
    constexpr std::size_t huge_page = std::size_t{2} << 20;
    if (bytes >= huge_page) madvise(memory, bytes, MADV_HUGEPAGE);
    memory_ = memory;
    bytes_ = bytes;
}

LargeBlock::~LargeBlock() {
    if (memory_ != nullptr) munmap(memory_, bytes_);
}

}  // namespace tincture
