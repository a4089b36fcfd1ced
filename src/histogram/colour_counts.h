// Counting keys: the inner part of colour tables.
#pragma once

#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

#include "picture/picture.h"

namespace tincture {

struct ColourCount {
    std::uint64_t key;
    std::uint64_t count;
};

// Keys and how often they were added: a hash table with open addressing.
class KeyCounter {
  public:
    KeyCounter();
    void add(std::uint64_t key, std::uint64_t count);
    void add(const KeyCounter& other);
    [[nodiscard]] std::size_t size() const noexcept { return size_ + (highest_ > 0 ? 1 : 0); }
    [[nodiscard]] std::vector<ColourCount> sorted() const;  // ascending by key

  private:
    void grow();
    std::vector<ColourCount> places_;
    std::size_t size_ = 0;  // places in use
    // How often the highest key was added: it marks free places and so has none (full ink of 16-bit
    // CMYK).
    std::uint64_t highest_ = 0;
    int shift_;
};

// The colours of the opaque pixels of a picture, ascending by key; `too_many` and none where there
// are more than `limit` of them.
struct CountedColours {
    std::vector<ColourCount> colours;
    bool too_many = false;
};
[[nodiscard]] CountedColours count_keys(const Picture& picture, std::size_t limit);

}  // namespace tincture
