#include "histogram/key_index.h"

#include <algorithm>
#include <bit>

namespace tincture {

KeyIndex::KeyIndex(const ColourTable& table)
    : shift_(64 - static_cast<int>(std::bit_width(std::max<std::size_t>(1, table.size()) * 2))),
      places_(std::size_t{1} << (64 - shift_)) {
    for (std::size_t i = 0; i < table.size(); ++i) {
        std::size_t at = start(table.key[i]);
        while (places_[at].index != missing) at = (at + 1) & (places_.size() - 1);
        places_[at] = {table.key[i], static_cast<std::uint32_t>(i)};
    }
}

}  // namespace tincture
