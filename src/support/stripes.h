#pragma once

#include <cstddef>

namespace tincture {

// [0, n) cut into `count` stripes of nearly the same size.
struct Stripes {
    std::size_t n;
    std::size_t count;
    [[nodiscard]] std::size_t begin(std::size_t s) const { return n * s / count; }
};

}  // namespace tincture
