#include "cluster/sweep.h"

#include <algorithm>
#include <atomic>
#include <mutex>
#include <stdexcept>

#include "cluster/kmeans.h"
#include "cluster/moves.h"
#include "cluster/search.h"
#include "histogram/cells.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// Points, from coarse to fine: centres are searched for on the coarse ones, settle on the cells and
// are polished on the points themselves. Figures were found by trial, as those of the search.
constexpr std::size_t coarse_least = 2000;
constexpr std::size_t coarse_most = 6000;
constexpr std::size_t points_a_coarse_one = 50;  // between the two
constexpr double coarser = 1.2;                  // times the edge, until there are few enough
constexpr double cell_edge = 2;
constexpr LloydLimits settle_limits = {20, 1e-4};
constexpr LloydLimits polish_settled = {8, 2e-4};
constexpr LloydLimits polish_limits = {6, 2e-4};
constexpr LloydLimits grow_limits = {3, 1e-3};

// How many points to search on: a search on more finds better centres, where many points give it
// more to find.
std::size_t coarse_size(const WeightedPoints& points) {
    return std::clamp(points.n / points_a_coarse_one, coarse_least, coarse_most);
}

// The finest cells that are no more than `size`, from cells that are finer.
WeightedPoints coarse_points(const WeightedPoints& cells, std::size_t size) {
    WeightedPoints coarse = cells;
    for (double edge = coarser * cell_edge; coarse.dims == 3 && coarse.n > size && edge <= 32;
         edge *= coarser) {
        coarse = merge_into_cells(cells, edge);
    }
    return coarse;
}

// One centre after the other, each settling briefly.
void grow(const WeightedPoints& points, Centres& centres, int kept, int count) {
    while (centres.count < count && add_centre(points, centres, kept)) {
        lloyd(points, centres, kept, grow_limits);
    }
}

// The search ends early where coarse points run out before the points do, and it does not reach a
// count beyond the range.
void reach_further(const WeightedPoints& points, const WeightedPoints& cells,
                   const SweepOptions& options, std::vector<Centres>& found) {
    const auto grown = [&](int count) {
        Centres centres = found.back();
        if (cells.n > 8 * static_cast<std::size_t>(count)) {
            grow(cells, centres, options.kept.count, count);
        }
        grow(points, centres, options.kept.count, count);
        return centres;
    };
    while (found.back().count < options.max_count) {
        Centres next = grown(found.back().count + 1);
        if (next.count == found.back().count) return;
        found.push_back(std::move(next));
    }
    if (options.extra_count > found.back().count) found.push_back(grown(options.extra_count));
}

// Polishes the centres that belong to place `at` of the sweep and notes what they come to.
void polish(const WeightedPoints& points, Centres& centres, const LloydLimits& limits,
            std::size_t at, Sweep& sweep) {
    Partition partition(points, centres.count);
    sweep.objective[at] = lloyd(points, centres, sweep.kept, limits, partition);
    sweep.weights[at].clear();
    for (int k = 0; k < centres.count; ++k) sweep.weights[at].push_back(partition.weight(k));
}

// A result that is worse than the count before it starts from that instead, with one centre more.
void mend_rises(const WeightedPoints& points, Sweep& sweep) {
    for (std::size_t i = 1; i < sweep.centres.size(); ++i) {
        if (sweep.objective[i] <= sweep.objective[i - 1]) continue;
        Centres centres = sweep.centres[i - 1];
        grow(points, centres, sweep.kept, sweep.centres[i].count);
        polish(points, centres, polish_limits, i, sweep);
        sweep.centres[i] = std::move(centres);
    }
}

}  // namespace

Sweep sweep_counts(const WeightedPoints& points, const SweepOptions& options) {
    if (points.n == 0) throw std::invalid_argument("nothing to cluster");
    const auto report = [&](double part) {
        if (options.progress) options.progress(part);
    };
    Sweep sweep;
    sweep.kept = options.kept.count;
    sweep.weight = points.total_weight;
    const WeightedPoints cells = merge_into_cells(points, cell_edge);
    const std::size_t few_points = coarse_size(points);
    const bool few = points.n <= few_points;
    const bool merged = !few && cells.n < points.n / 2;
    sweep.coarse = few ? points : coarse_points(cells, few_points);
    sweep.centres = search_counts(sweep.coarse, options.kept, options.max_count,
                                  [&](double part) { report(part * 0.4); });
    reach_further(points, cells, options, sweep.centres);

    sweep.objective.resize(sweep.centres.size());
    sweep.weights.resize(sweep.centres.size());
    std::atomic<std::size_t> done{0};
    std::mutex reporting;
    // The largest counts take longest: they go first, so that the threads end together.
    parallel_for(sweep.centres.size(), [&](std::size_t i) {
        const std::size_t at = sweep.centres.size() - 1 - i;
        Centres& centres = sweep.centres[at];
        const bool settle = merged && cells.n > 8 * static_cast<std::size_t>(centres.count);
        if (settle) lloyd(cells, centres, sweep.kept, settle_limits);
        polish(points, centres, settle ? polish_settled : polish_limits, at, sweep);
        const std::lock_guard<std::mutex> lock(reporting);
        report(0.4 + 0.6 * static_cast<double>(++done) / static_cast<double>(sweep.centres.size()));
    });
    mend_rises(points, sweep);
    return sweep;
}

}  // namespace tincture
