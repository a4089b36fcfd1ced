// A label map as runs of equal labels.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

namespace tincture {

// Some whole rows of a label map, row by row, in runs as long as they can be. Run r has the label
// label[r] from column begin[r] on, up to the next run of its row or the end of the row.
struct Runs {
    std::uint32_t width = 0;
    std::vector<std::uint32_t> begin;
    std::vector<std::uint8_t> label;
    std::vector<std::uint32_t> row_start;  // of each row its first run; one more at the end

    [[nodiscard]] std::uint32_t size() const { return static_cast<std::uint32_t>(begin.size()); }
    [[nodiscard]] std::uint32_t rows() const {
        return row_start.empty() ? 0 : static_cast<std::uint32_t>(row_start.size() - 1);
    }
    // One past the last column of run r, which is in row y.
    [[nodiscard]] std::uint32_t end(std::uint32_t r, std::uint32_t y) const {
        return r + 1 < row_start[y + 1] ? begin[r + 1] : width;
    }
};

// Of width * rows labels. At most 2^32 - 2 runs: throws std::length_error for more.
[[nodiscard]] Runs find_runs(const std::uint8_t* labels, std::uint32_t width, std::uint32_t rows);

// Calls body(other, length) for the runs of row `y` that lie over the columns [begin, end), with
// the number of columns that they share; from left to right.
template <typename Body>
void for_runs_over(const Runs& runs, std::uint32_t y, std::uint32_t begin, std::uint32_t end,
                   const Body& body);

// Implementation.

// The run of row y that holds column x.
[[nodiscard]] std::uint32_t run_at(const Runs& runs, std::uint32_t y, std::uint32_t x);

template <typename Body>
void for_runs_over(const Runs& runs, std::uint32_t y, std::uint32_t begin, std::uint32_t end,
                   const Body& body) {
    for (std::uint32_t r = run_at(runs, y, begin); r < runs.row_start[y + 1]; ++r) {
        const std::uint32_t from = runs.begin[r] > begin ? runs.begin[r] : begin;
        const std::uint32_t stop = runs.end(r, y);
        const std::uint32_t to = stop < end ? stop : end;
        if (from >= to) break;
        body(r, to - from);
    }
}

}  // namespace tincture
