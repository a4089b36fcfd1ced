#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "histogram/colour_table.h"

namespace tincture {

// Where a key stands in a table: open addressing in places that are at most half used.
class KeyIndex {
  public:
    // Of a table that lists its keys. The table is not needed afterwards.
    explicit KeyIndex(const ColourTable& table);

    // `missing` for a key that is not in the table: only pixels that are not opaque have one.
    static constexpr std::uint32_t missing = 0xFFFF'FFFF;
    [[nodiscard]] std::uint32_t find(std::uint64_t key) const {
        for (std::size_t at = start(key);; at = (at + 1) & (places_.size() - 1)) {
            const Place& place = places_[at];
            if (place.index == missing || place.key == key) return place.index;
        }
    }

  private:
    struct Place {
        std::uint64_t key = 0;
        std::uint32_t index = missing;
    };
    // Multiplicative hashing with the golden ratio, high bits.
    [[nodiscard]] std::size_t start(std::uint64_t key) const {
        return key * 0x9E3779B97F4A7C15U >> shift_;
    }

    int shift_;
    std::vector<Place> places_;
};

}  // namespace tincture
