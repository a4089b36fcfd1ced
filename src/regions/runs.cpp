#include "regions/runs.h"

#include <algorithm>
#include <cstring>
#include <limits>
#include <stdexcept>

#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

constexpr std::uint32_t rows_at_once = 64;

// The first column from x on whose label is not that of x - 1; `width` if there is none.
std::uint32_t next_change(const std::uint8_t* row, std::uint32_t x, std::uint32_t width) {
    // Eight at a time: a word that equals the word one pixel before it holds one label.
    while (x + 8 <= width) {
        std::uint64_t here = 0;
        std::uint64_t before = 0;
        std::memcpy(&here, row + x, 8);
        std::memcpy(&before, row + x - 1, 8);
        if (here != before) break;
        x += 8;
    }
    while (x < width && row[x] == row[x - 1]) ++x;
    return x;
}

struct Block {
    std::vector<std::uint32_t> begin;
    std::vector<std::uint8_t> label;
    std::vector<std::uint32_t> per_row;
};

void add_row(const std::uint8_t* row, std::uint32_t width, Block& block) {
    const std::size_t before = block.begin.size();
    for (std::uint32_t x = 0; x < width; x = next_change(row, x + 1, width)) {
        block.begin.push_back(x);
        block.label.push_back(row[x]);
    }
    block.per_row.push_back(static_cast<std::uint32_t>(block.begin.size() - before));
}

}  // namespace

Runs find_runs(const std::uint8_t* labels, std::uint32_t width, std::uint32_t rows) {
    std::vector<Block> blocks((std::size_t{rows} + rows_at_once - 1) / rows_at_once);
    parallel_for(blocks.size(), [&](std::size_t b) {
        throw_if_cancelled();
        const std::size_t first = b * rows_at_once;
        const std::size_t end = std::min(first + rows_at_once, std::size_t{rows});
        for (std::size_t y = first; y < end; ++y) add_row(labels + y * width, width, blocks[b]);
    });
    std::size_t size = 0;
    for (const Block& block : blocks) size += block.begin.size();
    if (size >= std::numeric_limits<std::uint32_t>::max() - 1) {
        throw std::length_error("a label map has too many runs");
    }
    Runs runs;
    runs.width = width;
    runs.begin.reserve(size);
    runs.label.reserve(size);
    runs.row_start.reserve(std::size_t{rows} + 1);
    runs.row_start.push_back(0);
    for (Block& block : blocks) {
        runs.begin.insert(runs.begin.end(), block.begin.begin(), block.begin.end());
        runs.label.insert(runs.label.end(), block.label.begin(), block.label.end());
        for (const std::uint32_t n : block.per_row) {
            runs.row_start.push_back(runs.row_start.back() + n);
        }
        block = {};
    }
    return runs;
}

std::uint32_t run_at(const Runs& runs, std::uint32_t y, std::uint32_t x) {
    const auto first = runs.begin.begin() + runs.row_start[y];
    const auto last = runs.begin.begin() + runs.row_start[y + 1];
    return static_cast<std::uint32_t>(std::upper_bound(first, last, x) - runs.begin.begin() - 1);
}

}  // namespace tincture
