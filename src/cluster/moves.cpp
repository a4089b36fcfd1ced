#include "cluster/moves.h"

#include <algorithm>
#include <numeric>

#include "cluster/split.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// Found by trial on photograph-like pictures, as the figures of the search.
constexpr LloydLimits glance = {4, 1e-3};
constexpr std::size_t choices = 6;  // centres to go, clusters to split

struct ClusterSplit {
    int cluster;
    Split split;
};

// The points of a kept centre may all lie in one place beside it: that place is worth a centre.
Split split_from_kept(const WeightedPoints& points, const Members& members, std::size_t cluster) {
    Split split;
    split.gain = members.scatter[cluster];
    const std::size_t i = members.index[members.start[cluster]];
    for (int d = 0; d < points.dims; ++d) split.low.push_back(points.plane(d)[i]);
    split.high = split.low;
    return split;
}

Split split_of(const WeightedPoints& points, int kept, const Members& members, std::size_t k) {
    Split split = split_cluster(points, members.index.data() + members.start[k],
                                members.start[k + 1] - members.start[k]);
    if (split.gain <= 0 && static_cast<int>(k) < kept && members.scatter[k] > 0) {
        split = split_from_kept(points, members, k);
    }
    return split;
}

// The clusters whose split gains most, at most `wanted`, best first.
std::vector<ClusterSplit> best_splits(const WeightedPoints& points, int kept,
                                      const Members& members, std::size_t wanted) {
    std::vector<ClusterSplit> splits(members.scatter.size());
    parallel_for(splits.size(), [&](std::size_t k) {
        splits[k] = {static_cast<int>(k), split_of(points, kept, members, k)};
    });
    std::erase_if(splits, [](const ClusterSplit& s) { return s.split.gain <= 0; });
    std::stable_sort(splits.begin(), splits.end(),
                     [](const ClusterSplit& one, const ClusterSplit& two) {
                         return one.split.gain > two.split.gain;
                     });
    if (splits.size() > wanted) splits.resize(wanted);
    return splits;
}

// The cluster whose split gains most. No split gains more than the cluster's scatter, so that most
// need not be tried.
ClusterSplit best_split(const WeightedPoints& points, int kept, const Members& members) {
    std::vector<int> order(members.scatter.size());
    std::iota(order.begin(), order.end(), 0);
    std::stable_sort(order.begin(), order.end(), [&](int one, int two) {
        return members.scatter[static_cast<std::size_t>(one)] >
               members.scatter[static_cast<std::size_t>(two)];
    });
    ClusterSplit best{0, {}};
    for (const int k : order) {
        if (members.scatter[static_cast<std::size_t>(k)] <= best.split.gain) break;
        Split split = split_of(points, kept, members, static_cast<std::size_t>(k));
        if (split.gain > best.split.gain) best = {k, std::move(split)};
    }
    return best;
}

// Puts the halves of a split in place of its cluster: one takes the cluster's row, the other a new
// one. A kept centre stays; then only the half that lies further from it is used.
void apply_split(Centres& centres, const ClusterSplit& best, int kept) {
    const std::vector<float>* second = &best.split.high;
    if (best.cluster < kept) {
        const auto squared_to_kept = [&](const std::vector<float>& half) {
            float sum = 0;
            for (std::size_t d = 0; d < half.size(); ++d) {
                const float delta = half[d] - centres.row(best.cluster)[d];
                sum += delta * delta;
            }
            return sum;
        };
        if (squared_to_kept(best.split.low) > squared_to_kept(*second)) second = &best.split.low;
    } else {
        std::copy(best.split.low.begin(), best.split.low.end(), centres.row(best.cluster));
    }
    centres.x.insert(centres.x.end(), second->begin(), second->end());
    ++centres.count;
}

// The free centres whose points would suffer least without them, at most `wanted`, least first.
std::vector<int> least_missed(const Members& members, int kept, std::size_t wanted) {
    std::vector<int> order(members.removal_cost.size() - static_cast<std::size_t>(kept));
    std::iota(order.begin(), order.end(), kept);
    std::stable_sort(order.begin(), order.end(), [&](int one, int two) {
        return members.removal_cost[static_cast<std::size_t>(one)] <
               members.removal_cost[static_cast<std::size_t>(two)];
    });
    if (order.size() > wanted) order.resize(wanted);
    return order;
}

}  // namespace

void settle(const WeightedPoints& points, Solution& solution, int kept, const LloydLimits& limits) {
    solution.objective = lloyd(points, solution.centres, kept, limits, solution.partition);
}

void drop_centre(Solution& solution, int centre) {
    Centres& centres = solution.centres;
    const float* last = centres.row(centres.count - 1);
    std::copy(last, last + centres.dims, centres.row(centre));
    centres.x.resize(centres.x.size() - static_cast<std::size_t>(centres.dims));
    --centres.count;
    solution.partition.drop(centre);
}

Moves moves_of(const WeightedPoints& points, const Solution& from, int kept) {
    const Members members = members_of(points, from.centres);
    Moves moves;
    if (from.centres.count > 1) {
        for (const int centre : least_missed(members, kept, choices)) {
            moves.without.push_back({centre, from, 0});
        }
    }
    const std::vector<ClusterSplit> splits = best_splits(points, kept, members, choices);
    for (const ClusterSplit& split : splits) moves.with.push_back({split.cluster, from, 0});

    parallel_for(moves.without.size() + splits.size(), [&](std::size_t i) {
        const bool goes = i < moves.without.size();
        const std::size_t s = goes ? 0 : i - moves.without.size();
        Move& move = goes ? moves.without[i] : moves.with[s];
        if (goes) {
            drop_centre(move.solution, move.cluster);
        } else {
            apply_split(move.solution.centres, splits[s], kept);
            move.solution.partition.append();
        }
        settle(points, move.solution, kept, glance);
        move.change = move.solution.objective - from.objective;
    });
    return moves;
}

bool add_centre(const WeightedPoints& points, Centres& centres, int kept) {
    const ClusterSplit best = best_split(points, kept, members_of(points, centres));
    if (best.split.gain <= 0) return false;
    apply_split(centres, best, kept);
    return true;
}

}  // namespace tincture
