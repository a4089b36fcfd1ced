#include "regions/components.h"

#include <algorithm>
#include <cstddef>

#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

constexpr std::uint32_t rows_at_once = 64;

// The root of a set is its first run, so that the order of unions has no say.
std::uint32_t root_of(std::vector<std::uint32_t>& parent, std::uint32_t r) {
    while (parent[r] != r) {
        parent[r] = parent[parent[r]];
        r = parent[r];
    }
    return r;
}

void unite(std::vector<std::uint32_t>& parent, std::uint32_t one, std::uint32_t two) {
    one = root_of(parent, one);
    two = root_of(parent, two);
    if (one < two)
        parent[two] = one;
    else
        parent[one] = two;
}

// Joins the runs of row y with those of the row above that touch them.
void join_with_above(const Runs& runs, std::uint32_t y, std::uint32_t reach,
                     std::vector<std::uint32_t>& parent) {
    std::uint32_t above = runs.row_start[y - 1];
    const std::uint32_t above_end = runs.row_start[y];
    for (std::uint32_t r = runs.row_start[y]; r < runs.row_start[y + 1]; ++r) {
        const std::uint32_t begin = runs.begin[r];
        const std::uint32_t end = runs.end(r, y);
        while (above < above_end && runs.end(above, y - 1) + reach <= begin) ++above;
        for (std::uint32_t a = above; a < above_end && runs.begin[a] < end + reach; ++a) {
            if (runs.label[a] == runs.label[r]) unite(parent, a, r);
        }
    }
}

}  // namespace

std::vector<std::uint32_t> find_components(const Runs& runs, Connectivity connectivity) {
    const std::uint32_t reach = connectivity == Connectivity::sides ? 0 : 1;
    std::vector<std::uint32_t> parent(runs.size());
    const std::uint32_t rows = runs.rows();
    const std::uint32_t blocks = (rows + rows_at_once - 1) / rows_at_once;
    parallel_for(blocks, [&](std::size_t block) {
        throw_if_cancelled();
        const auto first = static_cast<std::uint32_t>(block) * rows_at_once;
        const std::uint32_t end = std::min(first + rows_at_once, rows);
        for (std::uint32_t r = runs.row_start[first]; r < runs.row_start[end]; ++r) parent[r] = r;
        for (std::uint32_t y = first + 1; y < end; ++y) join_with_above(runs, y, reach, parent);
    });
    for (std::uint32_t block = 1; block < blocks; ++block) {
        join_with_above(runs, block * rows_at_once, reach, parent);
    }
    // Parents come before their children: one pass makes every parent a root.
    for (std::uint32_t r = 0; r < runs.size(); ++r) parent[r] = parent[parent[r]];
    return parent;
}

std::vector<std::uint64_t> component_areas(const Runs& runs,
                                           const std::vector<std::uint32_t>& component) {
    std::vector<std::uint64_t> area(runs.size(), 0);
    for (std::uint32_t y = 0; y < runs.rows(); ++y) {
        for (std::uint32_t r = runs.row_start[y]; r < runs.row_start[y + 1]; ++r) {
            area[component[r]] += runs.end(r, y) - runs.begin[r];
        }
    }
    return area;
}

}  // namespace tincture
