#include "cluster/kmeans.h"

#include <algorithm>
#include <array>
#include <cstdint>
#include <queue>

#include "cluster/nearest.h"

namespace tincture {
namespace {

constexpr std::size_t block_size = 2048;

// The points that add most to the objective, at most `wanted`, most first; ties by lower index.
std::vector<std::size_t> worst_points(const WeightedPoints& points, const Centres& centres,
                                      std::size_t wanted) {
    struct Candidate {
        double cost;
        std::size_t index;
        bool operator<(const Candidate& other) const {  // the queue's top is the least bad
            return cost != other.cost ? cost > other.cost : index < other.index;
        }
    };
    std::priority_queue<Candidate> worst;
    std::array<std::uint16_t, block_size> label;
    std::array<float, block_size> squared_distance;
    for (std::size_t start = 0; start < points.n; start += block_size) {
        const std::size_t size = std::min(block_size, points.n - start);
        nearest_centres(points, start, size, centres, label.data(), squared_distance.data());
        for (std::size_t i = 0; i < size; ++i) {
            const double cost = points.weight[start + i] * static_cast<double>(squared_distance[i]);
            if (cost <= 0) continue;
            worst.push({cost, start + i});
            if (worst.size() > wanted) worst.pop();
        }
    }
    std::vector<std::size_t> found;
    for (; !worst.empty(); worst.pop()) found.push_back(worst.top().index);
    std::reverse(found.begin(), found.end());
    return found;
}

void repair_empty(const WeightedPoints& points, Centres& centres, const std::vector<int>& empty) {
    const std::vector<std::size_t> worst = worst_points(points, centres, empty.size());
    for (std::size_t e = 0; e < std::min(empty.size(), worst.size()); ++e) {
        for (int d = 0; d < points.dims; ++d) centres.row(empty[e])[d] = points.plane(d)[worst[e]];
    }
}

// Moves each free centre to the mean of its points; true if an empty one had to be repaired.
bool move_to_means(const WeightedPoints& points, Centres& centres, int fixed,
                   const Partition& partition) {
    std::vector<int> empty;
    for (int k = fixed; k < centres.count; ++k) {
        if (partition.empty(k)) {
            empty.push_back(k);
            continue;
        }
        for (int d = 0; d < points.dims; ++d) {
            centres.row(k)[d] = static_cast<float>(partition.moment(k, d) / partition.weight(k));
        }
    }
    if (!empty.empty()) repair_empty(points, centres, empty);
    return !empty.empty();
}

// Lloyd's steps fall short where a cluster's border crosses many points, so they are lengthened. A
// step that does not pay is not taken, so that the objective falls as it does without this.
void step_past(const Centres& from, Centres& means) {
    constexpr float lengthened = 1.8F;  // found by trial on photographs
    for (std::size_t i = 0; i < means.x.size(); ++i) {
        means.x[i] = from.x[i] + lengthened * (means.x[i] - from.x[i]);
    }
}

}  // namespace

double objective(const WeightedPoints& points, const Centres& centres) {
    Partition partition(points, centres.count);
    partition.assign(points, centres);
    return partition.objective() + points.inner_scatter;
}

double lloyd(const WeightedPoints& points, Centres& centres, int fixed, const LloydLimits& limits) {
    Partition partition(points, centres.count);
    return lloyd(points, centres, fixed, limits, partition);
}

double lloyd(const WeightedPoints& points, Centres& centres, int fixed, const LloydLimits& limits,
             Partition& partition) {
    partition.assign(points, centres);
    double reached = partition.objective();
    Centres means;
    bool repaired = false;
    bool further = true;    // whether steps past the means still pay
    bool overdone = false;  // the last one did not: `means` are still those of the centres
    for (int pass = 0; pass < limits.passes; ++pass) {
        if (!overdone) {
            means = centres;
            repaired = move_to_means(points, means, fixed, partition);
        }
        // The last step goes to the means themselves.
        further = further && !repaired && pass + 1 < limits.passes;
        Centres next = means;
        if (further) step_past(centres, next);
        partition.assign(points, next);
        const double gain = reached - partition.objective();
        const bool enough = gain > limits.relative_gain * reached;
        overdone = further && !enough;
        if (overdone) {
            further = false;
            continue;
        }
        // Means are never worse, but for what single precision adds.
        constexpr double rounding = 1e-6;
        if (gain < -rounding * reached && !repaired) {
            partition.assign(points, centres);
            break;
        }
        centres = std::move(next);
        reached = partition.objective();
        if (!enough && !repaired) break;
    }
    return reached + points.inner_scatter;
}

}  // namespace tincture
