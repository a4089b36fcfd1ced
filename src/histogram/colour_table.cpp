#include "histogram/colour_table.h"

#include <algorithm>
#include <array>

#include "histogram/colour_counts.h"
#include "histogram/lab_cells.h"
#include "support/parallel.h"

namespace tincture {
namespace {

constexpr std::size_t block_size = 8192;

void fill_lab(ColourTable& table, const ColourSpace& space, double full_scale) {
    const auto channels = static_cast<std::size_t>(channel_count(space.model()));
    const std::size_t blocks = (table.size() + block_size - 1) / block_size;
    parallel_for(blocks, [&](std::size_t block) {
        const std::size_t start = block * block_size;
        const std::size_t size = std::min(block_size, table.size() - start);
        std::vector<float> device(size * channels);
        for (std::size_t i = 0; i < size; ++i) {
            unpack_key(table.key[start + i], channels, full_scale, device.data() + i * channels);
        }
        space.to_lab(device.data(), size,
                     {table.L.data() + start, table.a.data() + start, table.b.data() + start});
    });
}

ColourTable exact_table(const std::vector<ColourCount>& colours, const ColourSpace& space,
                        int bits) {
    ColourTable table;
    table.key.resize(colours.size());
    table.count.resize(colours.size());
    table.L.resize(colours.size());
    table.a.resize(colours.size());
    table.b.resize(colours.size());
    for (std::size_t i = 0; i < colours.size(); ++i) {
        table.key[i] = colours[i].key;
        table.count[i] = colours[i].count;
        table.opaque_pixels += colours[i].count;
    }
    fill_lab(table, space, full_scale(bits));
    return table;
}

}  // namespace

void unpack_key(std::uint64_t key, std::size_t channels, double full_scale, float* device) {
    for (std::size_t c = channels; c-- > 0; key >>= 16) {
        device[c] = static_cast<float>(static_cast<double>(key & 0xFFFF) / full_scale);
    }
}

ColourTable count_colours(const Picture& picture, const ColourSpace& space,
                          std::size_t exact_limit) {
    const CountedColours counted = count_keys(picture, exact_limit);
    if (counted.too_many) return count_lab_cells(picture, space);
    return exact_table(counted.colours, space, picture.bits);
}

}  // namespace tincture
