#include "histogram/cells.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdint>

namespace tincture {
namespace {

// A box of cells around the points.
struct Grid {
    std::array<int, 3> low{};
    std::array<std::size_t, 3> size{};
    float inverse_edge = 0;

    // Integer coordinates of a cell along one axis.
    [[nodiscard]] int along(float x) const {
        return static_cast<int>(std::floor(x * inverse_edge));
    }

    [[nodiscard]] std::size_t cell(const WeightedPoints& points, std::size_t i) const {
        std::size_t index = 0;
        for (std::size_t d = 0; d < 3; ++d) {
            const int c = along(points.x[d * points.n + i]) - low[d];
            index = index * size[d] + static_cast<std::size_t>(c);
        }
        return index;
    }
    [[nodiscard]] std::size_t cells() const { return size[0] * size[1] * size[2]; }
};

Grid grid_around(const WeightedPoints& points, double edge) {
    Grid grid;
    grid.inverse_edge = static_cast<float>(1.0 / edge);
    for (std::size_t d = 0; d < 3; ++d) {
        const float* plane = points.plane(static_cast<int>(d));
        const auto [low, high] = std::minmax_element(plane, plane + points.n);
        grid.low[d] = grid.along(*low);
        grid.size[d] = static_cast<std::size_t>(grid.along(*high) - grid.low[d] + 1);
    }
    return grid;
}

}  // namespace

WeightedPoints points_of(const ColourTable& table) {
    WeightedPoints points;
    points.n = table.size();
    points.x.reserve(3 * table.size());
    for (const std::vector<float>* plane : {&table.L, &table.a, &table.b}) {
        points.x.insert(points.x.end(), plane->begin(), plane->end());
    }
    points.weight.assign(table.count.begin(), table.count.end());
    points.total_weight = static_cast<double>(table.opaque_pixels);
    points.inner_scatter = table.inner_scatter;
    return points;
}

WeightedPoints merge_into_cells(const WeightedPoints& points, double edge) {
    if (points.dims != 3 || points.n == 0) return points;
    const Grid grid = grid_around(points, edge);

    // Cells in use are numbered in the order of the grid, so that the order of the points has no
    // say.
    std::vector<std::uint32_t> number(grid.cells(), 0);
    std::vector<std::uint32_t> cell_of(points.n);
    for (std::size_t i = 0; i < points.n; ++i) {
        const std::size_t cell = grid.cell(points, i);
        cell_of[i] = static_cast<std::uint32_t>(cell);
        number[cell] = 1;
    }
    std::uint32_t used = 0;
    for (std::uint32_t& n : number) {
        if (n != 0) n = used++;
    }

    WeightedPoints merged;
    merged.n = used;
    merged.x.assign(3 * std::size_t{used}, 0.0F);
    merged.weight.assign(used, 0.0);
    std::vector<double> moment(3 * std::size_t{used}, 0.0);
    for (std::size_t i = 0; i < points.n; ++i) {
        const std::size_t cell = number[cell_of[i]];
        merged.weight[cell] += points.weight[i];
        for (std::size_t d = 0; d < 3; ++d) {
            moment[3 * cell + d] +=
                points.weight[i] * static_cast<double>(points.x[d * points.n + i]);
        }
    }
    for (std::size_t cell = 0; cell < merged.n; ++cell) {
        for (std::size_t d = 0; d < 3; ++d) {
            merged.x[d * merged.n + cell] =
                static_cast<float>(moment[3 * cell + d] / merged.weight[cell]);
        }
    }
    merged.inner_scatter = points.inner_scatter;
    for (std::size_t i = 0; i < points.n; ++i) {
        const std::size_t cell = number[cell_of[i]];
        double squared = 0;
        for (std::size_t d = 0; d < 3; ++d) {
            const double delta = static_cast<double>(points.x[d * points.n + i]) -
                                 static_cast<double>(merged.x[d * merged.n + cell]);
            squared += delta * delta;
        }
        merged.inner_scatter += points.weight[i] * squared;
    }
    merged.total_weight = points.total_weight;
    return merged;
}

}  // namespace tincture
