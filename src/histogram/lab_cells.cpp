#include "histogram/lab_cells.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <unordered_map>

#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// Steps of Lab along the edge of the finest cell.
constexpr auto finest_edge = static_cast<std::int64_t>(finest_cell_de * lab_steps_per_unit);
constexpr std::int64_t offset_cells = 1 << 15;  // makes cell coordinates positive

// Exact sums over the pixels of a cell, relative to the cell's low corner: mergeable in any order.
struct CellSums {
    std::int64_t count = 0;
    std::array<std::int64_t, 3> moment{};
    std::int64_t squares = 0;
};

struct MixKey {
    std::size_t operator()(std::uint64_t key) const noexcept {
        return key * 0x9E3779B97F4A7C15U >> 20;
    }
};
using Cells = std::unordered_map<std::uint64_t, CellSums, MixKey>;

std::int64_t floor_div(std::int64_t value, std::int64_t by) {
    return value >= 0 ? value / by : -((-value + by - 1) / by);
}

std::uint64_t pack(const std::array<std::int64_t, 3>& cell) {
    std::uint64_t key = 0;
    for (const std::int64_t c : cell)
        key = key << 16 | static_cast<std::uint64_t>(c + offset_cells);
    return key;
}

std::array<std::int64_t, 3> unpack(std::uint64_t key) {
    std::array<std::int64_t, 3> cell{};
    for (std::size_t d = 3; d-- > 0; key >>= 16)
        cell[d] = static_cast<std::int64_t>(key & 0xFFFF) - offset_cells;
    return cell;
}

void add_colour(Cells& cells, std::int64_t edge, const std::array<float, 3>& lab,
                std::int64_t count) {
    std::array<std::int64_t, 3> cell{};
    std::array<std::int64_t, 3> inside{};
    for (std::size_t d = 0; d < 3; ++d) {
        const auto steps =
            static_cast<std::int64_t>(static_cast<double>(lab[d]) * lab_steps_per_unit);
        cell[d] = floor_div(steps, edge);
        inside[d] = steps - cell[d] * edge;
    }
    CellSums& sums = cells[pack(cell)];
    sums.count += count;
    for (std::size_t d = 0; d < 3; ++d) {
        sums.moment[d] += count * inside[d];
        sums.squares += count * inside[d] * inside[d];
    }
}

// Cells of twice the edge. Low corners move by one fine edge where a cell's coordinate is odd.
Cells doubled(const Cells& fine, std::int64_t fine_edge) {
    Cells coarse;
    for (const auto& [key, sums] : fine) {
        const std::array<std::int64_t, 3> cell = unpack(key);
        std::array<std::int64_t, 3> parent{};
        CellSums moved = sums;
        for (std::size_t d = 0; d < 3; ++d) {
            parent[d] = floor_div(cell[d], 2);
            const std::int64_t shift = (cell[d] - 2 * parent[d]) * fine_edge;
            moved.squares += 2 * shift * moved.moment[d] + sums.count * shift * shift;
            moved.moment[d] += sums.count * shift;
        }
        CellSums& into = coarse[pack(parent)];
        into.count += moved.count;
        into.squares += moved.squares;
        for (std::size_t d = 0; d < 3; ++d) into.moment[d] += moved.moment[d];
    }
    return coarse;
}

void append_cell(ColourTable& table, std::uint64_t key, const CellSums& sums, std::int64_t edge) {
    const std::array<std::int64_t, 3> cell = unpack(key);
    std::array<double, 3> lab{};
    const auto count = static_cast<double>(sums.count);
    auto scatter = static_cast<double>(sums.squares);
    for (std::size_t d = 0; d < 3; ++d) {
        const auto moment = static_cast<double>(sums.moment[d]);
        const double inside = std::nearbyint(moment / count);
        lab[d] = (static_cast<double>(cell[d] * edge) + inside) / lab_steps_per_unit;
        scatter += inside * (count * inside - 2 * moment);
    }
    table.key.push_back(key);
    table.L.push_back(static_cast<float>(lab[0]));
    table.a.push_back(static_cast<float>(lab[1]));
    table.b.push_back(static_cast<float>(lab[2]));
    table.count.push_back(static_cast<std::uint64_t>(sums.count));
    table.opaque_pixels += static_cast<std::uint64_t>(sums.count);
    table.inner_scatter += std::max(0.0, scatter) / (lab_steps_per_unit * lab_steps_per_unit);
}

}  // namespace

void picture_to_lab(const Picture& picture, const ColourSpace& space, std::size_t start,
                    std::size_t n, LabPlanes out) {
    constexpr std::size_t block_size = 4096;
    const auto channels = static_cast<std::size_t>(channel_count(picture.model));
    parallel_for((n + block_size - 1) / block_size, [&](std::size_t block) {
        const std::size_t first = block * block_size;
        const std::size_t size = std::min(block_size, n - first);
        std::vector<float> device(size * channels);
        const std::size_t sample = (start + first) * channels;
        for (std::size_t i = 0; i < device.size(); ++i) {
            device[i] = picture.bits == 16
                            ? static_cast<float>(picture.samples16[sample + i] / 65535.0)
                            : static_cast<float>(picture.samples8[sample + i] / 255.0);
        }
        space.to_lab(device.data(), size, {out.L + first, out.a + first, out.b + first});
    });
}

ColourTable count_lab_cells(const Picture& picture, const ColourSpace& space,
                            std::size_t max_cells) {
    constexpr std::size_t step = 1 << 18;
    std::int64_t edge = finest_edge;
    Cells cells;
    std::array<std::vector<float>, 3> lab;
    for (std::vector<float>& plane : lab) plane.resize(step);
    for (std::size_t start = 0; start < picture.pixel_count(); start += step) {
        throw_if_cancelled();
        const std::size_t n = std::min(step, picture.pixel_count() - start);
        picture_to_lab(picture, space, start, n, {lab[0].data(), lab[1].data(), lab[2].data()});
        for (std::size_t i = 0; i < n; ++i) {
            if (!picture.opaque.empty() && picture.opaque[start + i] == 0) continue;
            add_colour(cells, edge, {lab[0][i], lab[1][i], lab[2][i]}, 1);
        }
        // The eight cells around the origin never become one.
        while (cells.size() > std::max<std::size_t>(max_cells, 8)) {
            cells = doubled(cells, edge);
            edge *= 2;
        }
    }
    std::vector<std::uint64_t> keys;
    keys.reserve(cells.size());
    for (const auto& [key, sums] : cells) keys.push_back(key);
    std::sort(keys.begin(), keys.end());
    ColourTable table;
    table.cell_de = static_cast<double>(edge) / lab_steps_per_unit;
    for (const std::uint64_t key : keys) append_cell(table, key, cells.at(key), edge);
    return table;
}

}  // namespace tincture
