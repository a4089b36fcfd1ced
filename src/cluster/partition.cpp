#include "cluster/partition.h"

#include <algorithm>
#include <array>
#include <cstring>

#include "cluster/nearest.h"
#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

constexpr std::uint16_t nobody = 0xFFFF;
// Small enough that labels and distances stay in the first-level cache.
constexpr std::size_t block_size = 2048;
// Several blocks share one partial sum, so that adding the partial sums stays cheap; which do
// depends on the number of points alone.
constexpr std::size_t part_size = 8 * block_size;

bool same_eight(const std::uint16_t* one, const std::uint16_t* two) {
    std::array<std::uint64_t, 2> first;
    std::array<std::uint64_t, 2> second;
    std::memcpy(first.data(), one, sizeof first);
    std::memcpy(second.data(), two, sizeof second);
    return first == second;
}

// Moves the points of a block that have another label than owner from one cluster's sums to the
// other's. Where `fixed_dims` is not 0 the compiler knows the number of dimensions and unrolls.
template <std::size_t fixed_dims>
void move_block(const WeightedPoints& points, const std::uint16_t* label, std::uint16_t* owner,
                std::size_t start, std::size_t size, double* sums) {
    const std::size_t dims = fixed_dims > 0 ? fixed_dims : static_cast<std::size_t>(points.dims);
    const float* x = points.x.data() + start;
    const double* weights = points.weight.data() + start;
    const auto add = [&](std::uint16_t cluster, std::size_t i, double sign) {
        double* sum = sums + cluster * (dims + 2);
        const double weight = sign * weights[i];
        sum[0] += sign;
        sum[1] += weight;
        for (std::size_t d = 0; d < dims; ++d) {
            sum[2 + d] += weight * static_cast<double>(x[d * points.n + i]);
        }
    };
    constexpr std::size_t run = 8;  // most points stay: they are passed over several at a time
    for (std::size_t at = 0; at < size; at += run) {
        if (at + run <= size && same_eight(label + at, owner + at)) continue;
        for (std::size_t i = at; i < std::min(at + run, size); ++i) {
            if (label[i] == owner[i]) continue;
            add(label[i], i, 1);
            if (owner[i] != nobody) add(owner[i], i, -1);
            owner[i] = label[i];
        }
    }
}

// Sum of weight * squared distance, always in the same order.
double scatter_of(const double* weight, const float* squared_distance, std::size_t size) {
    constexpr std::size_t lanes = 8;
    double sum[lanes] = {};
    std::size_t i = 0;
    for (; i + lanes <= size; i += lanes) {
        for (std::size_t lane = 0; lane < lanes; ++lane) {
            sum[lane] += weight[i + lane] * static_cast<double>(squared_distance[i + lane]);
        }
    }
    for (; i < size; ++i) sum[i % lanes] += weight[i] * static_cast<double>(squared_distance[i]);
    return ((sum[0] + sum[1]) + (sum[2] + sum[3])) + ((sum[4] + sum[5]) + (sum[6] + sum[7]));
}

}  // namespace

Partition::Partition(const WeightedPoints& points, int clusters)
    : dims_(static_cast<std::size_t>(points.dims)),
      owner_(points.n, nobody),
      sums_(static_cast<std::size_t>(clusters) * stride(), 0.0) {}

void Partition::assign(const WeightedPoints& points, const Centres& centres) {
    throw_if_cancelled();
    const std::size_t length = sums_.size();
    const std::size_t parts = (points.n + part_size - 1) / part_size;
    // What each part changes: the sums, then the objective.
    std::vector<double> changes(parts * (length + 1), 0.0);
    const auto assign_part = [&](std::size_t part) {
        std::array<std::uint16_t, block_size> label;
        std::array<float, block_size> squared_distance;
        double* change = changes.data() + part * (length + 1);
        const std::size_t end = std::min(points.n, (part + 1) * part_size);
        for (std::size_t start = part * part_size; start < end; start += block_size) {
            const std::size_t size = std::min(block_size, end - start);
            nearest_centres(points, start, size, centres, label.data(), squared_distance.data());
            const auto move = points.dims == 3 ? move_block<3> : move_block<0>;
            move(points, label.data(), owner_.data() + start, start, size, change);
            change[length] +=
                scatter_of(points.weight.data() + start, squared_distance.data(), size);
        }
    };
    if (parts == 1) {
        assign_part(0);
    } else {
        parallel_for(parts, assign_part);
    }
    objective_ = 0;
    for (std::size_t part = 0; part < parts; ++part) {
        const double* change = changes.data() + part * (length + 1);
        for (std::size_t i = 0; i < length; ++i) sums_[i] += change[i];
        objective_ += change[length];
    }
    // Where sums are not exact, something may be left of a cluster that lost its last point.
    for (std::size_t at = 0; at < length; at += stride()) {
        if (sums_[at] <= 0)
            std::fill_n(sums_.begin() + static_cast<std::ptrdiff_t>(at), stride(), 0.0);
    }
}

void Partition::append() {
    sums_.resize(sums_.size() + stride(), 0.0);
}

void Partition::drop(int cluster) {
    const auto last = static_cast<int>(sums_.size() / stride()) - 1;
    for (std::uint16_t& owner : owner_) {
        if (owner == cluster) {
            owner = nobody;
        } else if (owner == last) {
            owner = static_cast<std::uint16_t>(cluster);
        }
    }
    std::copy_n(
        sums_of(last), stride(),
        sums_.begin() + static_cast<std::ptrdiff_t>(static_cast<std::size_t>(cluster) * stride()));
    sums_.resize(sums_.size() - stride());
}

}  // namespace tincture
