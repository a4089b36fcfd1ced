#include "choose/prediction_strength.h"

#include <algorithm>
#include <array>
#include <bit>
#include <cmath>
#include <map>
#include <numeric>

#include "cluster/kmeans.h"
#include "cluster/moves.h"
#include "cluster/nearest.h"
#include "support/parallel.h"
#include "support/random.h"

namespace tincture {
namespace {

constexpr LloydLimits half_limits = {5, 1e-2};

// Lowers what cells send to what they may.
void limit_cells(const WeightedPoints& points, const Halving& halving, std::vector<double>& units) {
    const auto cell_of = [&](std::size_t i) {
        std::array<int, 3> cell{};
        for (int d = 0; d < 3; ++d) {
            cell[static_cast<std::size_t>(d)] = static_cast<int>(
                std::floor(static_cast<double>(points.plane(d)[i]) / halving.cell_edge));
        }
        return cell;
    };
    std::map<std::array<int, 3>, double> sent;
    for (std::size_t i = 0; i < points.n; ++i) sent[cell_of(i)] += units[i];
    for (std::size_t i = 0; i < points.n; ++i) {
        units[i] *= std::min(1.0, halving.units_a_cell / sent.at(cell_of(i)));
    }
}

// What each point sends, in units.
std::vector<double> units_of(const WeightedPoints& points, const Halving& halving) {
    std::vector<double> units = points.weight;
    const auto scale_to = [&](double most) {
        const double sum = std::accumulate(units.begin(), units.end(), 0.0);
        if (sum <= most) return;
        for (double& part : units) part *= most / sum;
    };
    scale_to(halving.units);
    if (halving.units_a_cell > 0 && points.dims == 3) limit_cells(points, halving, units);
    scale_to(halving.most_units);
    return units;
}

// Whole units, drawn at even steps: a point's number is less than one off what it sends.
std::vector<int> drawn(const std::vector<double>& wanted, double start) {
    std::vector<int> units;
    double sum = start;
    double before = 0;
    for (const double part : wanted) {
        sum += part;
        units.push_back(static_cast<int>(std::floor(sum) - before));
        before = std::floor(sum);
    }
    return units;
}

// How many of so many coins show heads.
int heads(int coins, Random& random) {
    int sum = 0;
    for (; coins > 0; coins -= 64) {
        const std::uint64_t thrown = random.bits();
        sum += std::popcount(coins >= 64 ? thrown : thrown >> (64 - coins));
    }
    return sum;
}

// The points that stand for at least one unit, with these as their weights.
WeightedPoints weighed(const WeightedPoints& points, const std::vector<int>& units) {
    WeightedPoints half;
    half.dims = points.dims;
    for (const int n : units) {
        if (n == 0) continue;
        half.weight.push_back(n);
        half.total_weight += n;
    }
    half.n = half.weight.size();
    for (int d = 0; d < points.dims; ++d) {
        for (std::size_t i = 0; i < points.n; ++i) {
            if (units[i] > 0) half.x.push_back(points.plane(d)[i]);
        }
    }
    return half;
}

// Every unit as a point of its own, off by a deviate that is nearly normal: 64 coins.
WeightedPoints blurred(const WeightedPoints& points, const std::vector<int>& units, double blur,
                       Random& random) {
    constexpr double mean_heads = 32;
    constexpr double deviation_of_heads = 4;
    WeightedPoints half;
    half.dims = points.dims;
    for (int d = 0; d < points.dims; ++d) {
        for (std::size_t i = 0; i < points.n; ++i) {
            for (int unit = 0; unit < units[i]; ++unit) {
                const double off = blur * (heads(64, random) - mean_heads) / deviation_of_heads;
                half.x.push_back(static_cast<float>(static_cast<double>(points.plane(d)[i]) + off));
            }
        }
    }
    half.n = half.x.size() / static_cast<std::size_t>(points.dims);
    half.weight.assign(half.n, 1.0);
    half.total_weight = static_cast<double>(half.n);
    return half;
}

using Halves = std::array<WeightedPoints, 2>;

Halves halves_of(const WeightedPoints& points, const std::vector<double>& wanted, double blur,
                 Random& random) {
    std::vector<int> rest = drawn(wanted, random.unit());
    std::vector<int> half(points.n);
    for (std::size_t i = 0; i < points.n; ++i) {
        half[i] = heads(rest[i], random);
        rest[i] -= half[i];
    }
    if (blur <= 0) return {weighed(points, half), weighed(points, rest)};
    return {blurred(points, half, blur, random), blurred(points, rest, blur, random)};
}

std::vector<std::uint16_t> labels_of(const WeightedPoints& points, const Centres& centres) {
    std::vector<std::uint16_t> labels(points.n);
    std::vector<float> squared(points.n);
    nearest_centres(points, 0, points.n, centres, labels.data(), squared.data());
    return labels;
}

// The least share of pairs that a cluster of `own` centres keeps with those of the other half.
double least_kept(const WeightedPoints& half, const Centres& own, const Centres& other) {
    if (own.count == 1) return 1;  // by definition
    const std::vector<std::uint16_t> cluster = labels_of(half, own);
    const std::vector<std::uint16_t> given = labels_of(half, other);
    const auto k = static_cast<std::size_t>(own.count);
    std::vector<double> together(k * k, 0.0);
    for (std::size_t i = 0; i < half.n; ++i) together[cluster[i] * k + given[i]] += half.weight[i];
    double least = 1;
    for (std::size_t j = 0; j < k; ++j) {
        double size = 0;
        double pairs = 0;
        for (std::size_t l = 0; l < k; ++l) {
            const double n = together[j * k + l];
            size += n;
            pairs += n * (n - 1);
        }
        least = std::min(least, size < 2 ? 0 : pairs / (size * (size - 1)));
    }
    return least;
}

}  // namespace

std::vector<double> prediction_strengths(const WeightedPoints& points, std::size_t counts,
                                         const Halving& halving, const HalfClustering& cluster) {
    const std::vector<double> wanted = units_of(points, halving);
    Random random(halving.seed);
    std::vector<Halves> splits;
    for (int s = 0; s < halving.splits; ++s) {
        splits.push_back(halves_of(points, wanted, halving.blur, random));
    }
    std::vector<std::array<std::vector<Centres>, 2>> centres(splits.size());
    parallel_for(2 * splits.size(), [&](std::size_t task) {
        centres[task / 2][task % 2] = cluster(splits[task / 2][task % 2]);
    });
    std::vector<double> strengths(counts, 0.0);
    for (std::size_t s = 0; s < splits.size(); ++s) {
        const auto& [one, two] = centres[s];
        for (std::size_t i = 0; i < std::min({counts, one.size(), two.size()}); ++i) {
            strengths[i] +=
                least_kept(splits[s][0], one[i], two[i]) + least_kept(splits[s][1], two[i], one[i]);
        }
    }
    for (double& strength : strengths) strength /= 2.0 * halving.splits;
    return strengths;
}

HalfClustering grown_from(std::span<const Centres> centres, int kept) {
    return [centres, kept](const WeightedPoints& half) {
        std::vector<Centres> grown;
        for (std::size_t i = 0; i < centres.size(); ++i) {
            Centres found = centres[i == 0 ? 0 : i - 1];
            if (i > 0 && !add_centre(half, found, kept)) break;
            lloyd(half, found, kept, half_limits);
            grown.push_back(std::move(found));
        }
        return grown;
    };
}

}  // namespace tincture
