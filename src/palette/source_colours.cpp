#include "palette/source_colours.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <unordered_map>

#include "cluster/nearest.h"

namespace tincture {
namespace {

constexpr double most_of_a_cluster = 0.5;
constexpr double much_of_a_cluster = 0.3;
constexpr double near_de = 2.5;
constexpr double there_de = 2;  // CIEDE2000 is hardly ever larger than 1.5 times that
constexpr double there_share = 0.01;
constexpr double cell_de = 2;  // of what is densest

// What is known of the pixels that are nearest to a centre.
struct Cluster {
    std::uint64_t pixels = 0;
    std::uint64_t there = 0;   // within there_de
    std::size_t heaviest = 0;  // in the table
    std::uint64_t most = 0;    // pixels of the heaviest
};

Lab lab_at(const ColourTable& table, std::size_t i) {
    return {table.L[i], table.a[i], table.b[i]};
}

double squared_distance(const Lab& one, const Lab& two) {
    const double L = one.L - two.L;
    const double a = one.a - two.a;
    const double b = one.b - two.b;
    return L * L + a * a + b * b;
}

std::vector<std::uint16_t> nearest_of(const ColourTable& table, std::span<const Lab> centres,
                                      std::vector<float>& squared) {
    Centres rows{3, static_cast<int>(centres.size()), {}};
    for (const Lab& lab : centres) {
        rows.x.insert(rows.x.end(), {static_cast<float>(lab.L), static_cast<float>(lab.a),
                                     static_cast<float>(lab.b)});
    }
    std::vector<std::uint16_t> label(table.size());
    squared.resize(table.size());
    const std::array<const float*, 3> plane = {table.L.data(), table.a.data(), table.b.data()};
    nearest_centres({plane.data(), 3, table.size()}, rows, label.data(), squared.data());
    return label;
}

// The mean of the heaviest cell among the pixels of a cluster; the first met of equal ones.
Lab densest(const ColourTable& table, const std::vector<std::uint16_t>& label, std::uint16_t k) {
    struct Cell {
        double pixels = 0, L = 0, a = 0, b = 0;
    };
    std::unordered_map<std::uint64_t, std::size_t> places;
    std::vector<Cell> cells;
    const auto step = [](float value) {
        return static_cast<std::uint64_t>(std::floor(static_cast<double>(value) / cell_de) + 512);
    };
    for (std::size_t i = 0; i < table.size(); ++i) {
        if (label[i] != k) continue;
        const std::uint64_t key =
            step(table.L[i]) << 40 | step(table.a[i]) << 20 | step(table.b[i]);
        const auto [place, is_new] = places.try_emplace(key, cells.size());
        if (is_new) cells.emplace_back();
        Cell& cell = cells[place->second];
        const auto n = static_cast<double>(table.count[i]);
        cell.pixels += n;
        cell.L += n * static_cast<double>(table.L[i]);
        cell.a += n * static_cast<double>(table.a[i]);
        cell.b += n * static_cast<double>(table.b[i]);
    }
    const auto best =
        std::max_element(cells.begin(), cells.end(),
                         [](const Cell& one, const Cell& two) { return one.pixels < two.pixels; });
    return {best->L / best->pixels, best->a / best->pixels, best->b / best->pixels};
}

}  // namespace

std::vector<Lab> moved_to_source(std::span<const Lab> centres, int kept, const ColourTable& table) {
    std::vector<float> squared;
    const std::vector<std::uint16_t> label = nearest_of(table, centres, squared);
    std::vector<Cluster> clusters(centres.size());
    for (std::size_t i = 0; i < table.size(); ++i) {
        Cluster& cluster = clusters[label[i]];
        cluster.pixels += table.count[i];
        if (squared[i] <= there_de * there_de) cluster.there += table.count[i];
        if (table.count[i] <= cluster.most) continue;
        cluster.most = table.count[i];
        cluster.heaviest = i;
    }
    std::vector<Lab> moved(centres.begin(), centres.end());
    for (std::size_t k = static_cast<std::size_t>(kept); k < moved.size(); ++k) {
        const Cluster& cluster = clusters[k];
        if (cluster.pixels == 0) continue;
        const auto pixels = static_cast<double>(cluster.pixels);
        const double share = static_cast<double>(cluster.most) / pixels;
        const Lab heaviest = lab_at(table, cluster.heaviest);
        const bool near = squared_distance(heaviest, moved[k]) <= near_de * near_de;
        if (table.cell_de == 0 &&
            (share >= most_of_a_cluster || (share >= much_of_a_cluster && near))) {
            moved[k] = heaviest;
        } else if (static_cast<double>(cluster.there) < there_share * pixels) {
            moved[k] = densest(table, label, static_cast<std::uint16_t>(k));
        }
    }
    return moved;
}

}  // namespace tincture
