#include "cluster/split.h"

#include <algorithm>
#include <array>
#include <cmath>

#include "cluster/nearest.h"

namespace tincture {
namespace {

// The direction in which the points spread most, by power iteration on their covariance, which is
// never formed: each round sums the points' projections. Sign and length do not matter.
std::vector<double> longest_axis(const WeightedPoints& points, const std::size_t* index,
                                 std::size_t n, const std::vector<double>& mean) {
    const auto dims = static_cast<std::size_t>(points.dims);
    std::vector<double> covariance(dims * dims, 0.0);
    std::vector<double> delta(dims);
    for (std::size_t i = 0; i < n; ++i) {
        for (std::size_t d = 0; d < dims; ++d) {
            delta[d] = static_cast<double>(points.x[d * points.n + index[i]]) - mean[d];
        }
        const double weight = points.weight[index[i]];
        for (std::size_t r = 0; r < dims; ++r) {
            for (std::size_t c = r; c < dims; ++c)
                covariance[r * dims + c] += weight * delta[r] * delta[c];
        }
    }
    // Start from the axis of largest variance, so that the start is never across the answer.
    std::size_t widest = 0;
    for (std::size_t d = 1; d < dims; ++d) {
        if (covariance[d * dims + d] > covariance[widest * dims + widest]) widest = d;
    }
    std::vector<double> axis(dims, 0.0);
    axis[widest] = 1;
    std::vector<double> next(dims);
    for (int round = 0; round < 12; ++round) {
        double largest = 0;
        for (std::size_t r = 0; r < dims; ++r) {
            next[r] = 0;
            for (std::size_t c = 0; c < dims; ++c) {
                next[r] += covariance[std::min(r, c) * dims + std::max(r, c)] * axis[c];
            }
            largest = std::max(largest, std::abs(next[r]));
        }
        if (largest <= 0) break;
        for (std::size_t d = 0; d < dims; ++d) axis[d] = next[d] / largest;
    }
    return axis;
}

struct Half {
    double weight = 0;
    std::vector<double> moment;
};

}  // namespace

Members members_of(const WeightedPoints& points, const Centres& centres) {
    const auto count = static_cast<std::size_t>(centres.count);
    Members members{std::vector<std::size_t>(points.n), std::vector<std::size_t>(count + 1, 0),
                    std::vector<double>(count, 0.0), std::vector<double>(count, 0.0)};
    std::vector<std::uint16_t> label(points.n);
    std::vector<float> first(points.n);
    std::vector<float> second(points.n);
    std::array<const float*, max_dims> plane{};
    for (int d = 0; d < points.dims; ++d) plane[static_cast<std::size_t>(d)] = points.plane(d);
    nearest_two_centres({plane.data(), points.dims, points.n}, centres, label.data(), first.data(),
                        second.data());
    for (std::size_t i = 0; i < points.n; ++i) {
        ++members.start[label[i] + 1];
        const double weight = points.weight[i];
        members.scatter[label[i]] += weight * static_cast<double>(first[i]);
        members.removal_cost[label[i]] += weight * static_cast<double>(second[i] - first[i]);
    }
    for (std::size_t k = 0; k < count; ++k) members.start[k + 1] += members.start[k];
    std::vector<std::size_t> next(members.start.begin(), members.start.end() - 1);
    for (std::size_t i = 0; i < points.n; ++i) members.index[next[label[i]]++] = i;
    return members;
}

Split split_cluster(const WeightedPoints& points, const std::size_t* index, std::size_t n) {
    const auto dims = static_cast<std::size_t>(points.dims);
    Split split;
    if (n < 2) return split;
    double weight = 0;
    std::vector<double> mean(dims, 0.0);
    for (std::size_t i = 0; i < n; ++i) {
        weight += points.weight[index[i]];
        for (std::size_t d = 0; d < dims; ++d) {
            mean[d] +=
                points.weight[index[i]] * static_cast<double>(points.x[d * points.n + index[i]]);
        }
    }
    for (double& m : mean) m /= weight;

    // The cut is a plane: direction and offset. It starts through the mean.
    std::vector<double> normal = longest_axis(points, index, n, mean);
    double offset = 0;
    for (std::size_t d = 0; d < dims; ++d) offset += normal[d] * mean[d];
    std::vector<double> low(dims);
    std::vector<double> high(dims);
    for (int round = 0; round < 6; ++round) {
        Half below{0, std::vector<double>(dims, 0.0)};
        Half above{0, std::vector<double>(dims, 0.0)};
        for (std::size_t i = 0; i < n; ++i) {
            double along = 0;
            for (std::size_t d = 0; d < dims; ++d) {
                along += normal[d] * static_cast<double>(points.x[d * points.n + index[i]]);
            }
            Half& half = along < offset ? below : above;
            const double w = points.weight[index[i]];
            half.weight += w;
            for (std::size_t d = 0; d < dims; ++d) {
                half.moment[d] += w * static_cast<double>(points.x[d * points.n + index[i]]);
            }
        }
        if (below.weight <= 0 || above.weight <= 0) break;
        // The next cut is the plane halfway between the two means.
        double gain = 0;
        offset = 0;
        for (std::size_t d = 0; d < dims; ++d) {
            low[d] = below.moment[d] / below.weight;
            high[d] = above.moment[d] / above.weight;
            normal[d] = high[d] - low[d];
            offset += normal[d] * (high[d] + low[d]) / 2;
            gain += below.weight * (low[d] - mean[d]) * (low[d] - mean[d]) +
                    above.weight * (high[d] - mean[d]) * (high[d] - mean[d]);
        }
        if (gain <= split.gain) break;
        split.gain = gain;
        split.low.assign(low.begin(), low.end());
        split.high.assign(high.begin(), high.end());
    }
    return split;
}

}  // namespace tincture
