// One centre more, one centre fewer: the moves that the search for good centres is made of.
#pragma once

#include <vector>

#include "cluster/kmeans.h"
#include "cluster/partition.h"
#include "histogram/weighted_points.h"

namespace tincture {

// Centres of one count, the partition that they make and its objective, inner scatter included.
struct Solution {
    Centres centres;
    Partition partition;
    double objective = 0;
};

// Runs lloyd() on a solution; the first `kept` centres stay.
void settle(const WeightedPoints& points, Solution& solution, int kept, const LloydLimits& limits);

// Takes a centre out and leaves its points to nobody; the last centre takes its number.
void drop_centre(Solution& solution, int centre);

// A solution after one move and a few passes of lloyd().
struct Move {
    int cluster;  // of the solution it came from: the one that went, or was split
    Solution solution;
    double change;  // of the objective
};

// The promising moves of a solution.
struct Moves {
    std::vector<Move> without;  // each without one of the centres that are missed least
    std::vector<Move> with;     // each with one of the clusters split that gain most by it
};
[[nodiscard]] Moves moves_of(const WeightedPoints& points, const Solution& from, int kept);

// Splits the cluster that gains most by it: one more centre, the first `kept` unmoved; false where
// no cluster can be split.
bool add_centre(const WeightedPoints& points, Centres& centres, int kept);

}  // namespace tincture
