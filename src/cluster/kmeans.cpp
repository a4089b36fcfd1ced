#include "cluster/kmeans.h"

#include <algorithm>
#include <array>
#include <cstdint>
#include <queue>

#include "cluster/nearest.h"
#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// Small enough that labels and distances stay in the first-level cache.
constexpr std::size_t block_size = 2048;
constexpr std::size_t max_dims = 16;

struct Labelled {
    std::array<std::uint16_t, block_size> label;
    std::array<float, block_size> squared_distance;
};

// Labels the points [start, start + size).
void label_block(const WeightedPoints& points, const Centres& centres, std::size_t start,
                 std::size_t size, Labelled& labelled) {
    std::array<const float*, max_dims> plane{};
    for (int d = 0; d < points.dims; ++d)
        plane[static_cast<std::size_t>(d)] = points.plane(d) + start;
    nearest_centres({plane.data(), points.dims, size}, centres, labelled.label.data(),
                    labelled.squared_distance.data());
}

// The sums of one cluster side by side: weight, scatter, then a moment for each dimension. Where
// `fixed_dims` is not 0 the compiler knows the number of dimensions and unrolls.
template <std::size_t fixed_dims>
void add_block(const WeightedPoints& points, const Labelled& labelled, std::size_t start,
               std::size_t size, double* sums) {
    const std::size_t dims = fixed_dims > 0 ? fixed_dims : static_cast<std::size_t>(points.dims);
    const std::size_t n = points.n;
    const float* x = points.x.data() + start;
    const double* weights = points.weight.data() + start;
    for (std::size_t i = 0; i < size; ++i) {
        const double weight = weights[i];
        double* sum = sums + labelled.label[i] * (dims + 2);
        sum[0] += weight;
        sum[1] += weight * static_cast<double>(labelled.squared_distance[i]);
        for (std::size_t d = 0; d < dims; ++d) {
            sum[2 + d] += weight * static_cast<double>(x[d * n + i]);
        }
    }
}

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
    Labelled labelled;
    for (std::size_t start = 0; start < points.n; start += block_size) {
        const std::size_t size = std::min(block_size, points.n - start);
        label_block(points, centres, start, size, labelled);
        for (std::size_t i = 0; i < size; ++i) {
            const double cost =
                points.weight[start + i] * static_cast<double>(labelled.squared_distance[i]);
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
                   const ClusterSums& sums) {
    std::vector<int> empty;
    for (int k = fixed; k < centres.count; ++k) {
        const double weight = sums.weight[static_cast<std::size_t>(k)];
        if (weight <= 0) {
            empty.push_back(k);
            continue;
        }
        for (int d = 0; d < points.dims; ++d) {
            const auto at = static_cast<std::size_t>(k * points.dims + d);
            centres.x[at] = static_cast<float>(sums.moment[at] / weight);
        }
    }
    if (!empty.empty()) repair_empty(points, centres, empty);
    return !empty.empty();
}

// Lloyd's steps fall short where a cluster's border crosses many points, so they are lengthened. A
// step that does not pay is not taken, so that the objective falls as it does without this.
void step_past(const Centres& from, Centres& means) {
    constexpr float lengthened = 1.5F;  // found by trial on photographs
    for (std::size_t i = 0; i < means.x.size(); ++i) {
        means.x[i] = from.x[i] + lengthened * (means.x[i] - from.x[i]);
    }
}

}  // namespace

ClusterSums sum_clusters(const WeightedPoints& points, const Centres& centres) {
    throw_if_cancelled();
    const auto count = static_cast<std::size_t>(centres.count);
    const auto dims = static_cast<std::size_t>(points.dims);
    const std::size_t stride = dims + 2;
    // Several blocks share one partial sum, so that adding the partial sums stays cheap; which do
    // depends on the number of points alone.
    constexpr std::size_t blocks_a_part = 8;
    const std::size_t parts =
        (points.n + block_size * blocks_a_part - 1) / (block_size * blocks_a_part);
    std::vector<double> partial(parts * count * stride, 0.0);
    const auto sum_part = [&](std::size_t part) {
        Labelled labelled;
        const std::size_t end = std::min(points.n, (part + 1) * block_size * blocks_a_part);
        for (std::size_t start = part * block_size * blocks_a_part; start < end;
             start += block_size) {
            const std::size_t size = std::min(block_size, end - start);
            label_block(points, centres, start, size, labelled);
            const auto add = points.dims == 3 ? add_block<3> : add_block<0>;
            add(points, labelled, start, size, partial.data() + part * count * stride);
        }
    };
    if (parts == 1) {
        sum_part(0);
    } else {
        parallel_for(parts, sum_part);
    }

    ClusterSums sums{std::vector<double>(count), std::vector<double>(count * dims),
                     std::vector<double>(count), 0};
    for (std::size_t part = 0; part < parts; ++part) {
        for (std::size_t k = 0; k < count; ++k) {
            const double* sum = partial.data() + (part * count + k) * stride;
            sums.weight[k] += sum[0];
            sums.scatter[k] += sum[1];
            for (std::size_t d = 0; d < dims; ++d) sums.moment[k * dims + d] += sum[2 + d];
        }
    }
    for (std::size_t k = 0; k < count; ++k) sums.objective += sums.scatter[k];
    return sums;
}

double objective(const WeightedPoints& points, const Centres& centres) {
    return sum_clusters(points, centres).objective + points.inner_scatter;
}

double lloyd(const WeightedPoints& points, Centres& centres, int fixed, const LloydLimits& limits) {
    ClusterSums sums = sum_clusters(points, centres);
    bool further = true;  // whether steps past the mean still pay
    for (int pass = 0; pass < limits.passes; ++pass) {
        Centres next = centres;
        const bool repaired = move_to_means(points, next, fixed, sums);
        // The last step goes to the means themselves.
        further = further && !repaired && pass + 1 < limits.passes;
        if (further) step_past(centres, next);
        ClusterSums next_sums = sum_clusters(points, next);
        const double gain = sums.objective - next_sums.objective;
        const bool enough = gain > limits.relative_gain * sums.objective;
        if (further && !enough) {
            further = false;
            continue;
        }
        if (gain < 0 && !repaired) break;  // a mean rounded to single precision, a hair worse
        centres = std::move(next);
        sums = std::move(next_sums);
        if (!enough && !repaired) break;
    }
    return sums.objective + points.inner_scatter;
}

}  // namespace tincture
