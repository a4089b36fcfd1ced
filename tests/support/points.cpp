#include "tests/support/points.h"

#include <cmath>
#include <limits>
#include <numeric>

namespace tincture::test_support {
namespace {

// The points in the order of `index`.
WeightedPoints picked(const WeightedPoints& points, const std::vector<std::size_t>& index) {
    WeightedPoints result;
    result.dims = points.dims;
    result.n = index.size();
    result.inner_scatter = points.inner_scatter;
    for (int d = 0; d < points.dims; ++d) {
        for (const std::size_t i : index) result.x.push_back(points.plane(d)[i]);
    }
    for (const std::size_t i : index) {
        result.weight.push_back(points.weight[i]);
        result.total_weight += points.weight[i];
    }
    return result;
}

std::vector<std::size_t> range(std::size_t begin, std::size_t end) {
    std::vector<std::size_t> index(end - begin);
    std::iota(index.begin(), index.end(), begin);
    return index;
}

struct PlainNearest {
    std::size_t label = 0;
    double squared = std::numeric_limits<double>::infinity();
};

PlainNearest nearest_row(const WeightedPoints& points, std::size_t i, const Rows& centres) {
    PlainNearest best;
    for (std::size_t k = 0; k < centres.size(); ++k) {
        double squared = 0;
        for (std::size_t d = 0; d < centres[k].size(); ++d) {
            const double delta =
                static_cast<double>(points.plane(static_cast<int>(d))[i]) - centres[k][d];
            squared += delta * delta;
        }
        if (squared < best.squared) best = {k, squared};
    }
    return best;
}

}  // namespace

WeightedPoints points_from(const Rows& rows, const std::vector<double>& weights) {
    WeightedPoints points;
    points.dims = static_cast<int>(rows.front().size());
    points.n = rows.size();
    for (std::size_t d = 0; d < rows.front().size(); ++d) {
        for (const std::vector<double>& row : rows) points.x.push_back(static_cast<float>(row[d]));
    }
    points.weight = weights;
    points.total_weight = std::accumulate(weights.begin(), weights.end(), 0.0);
    return points;
}

WeightedPoints cloud_points(Random& random, const Clouds& clouds) {
    const auto dims = static_cast<std::size_t>(clouds.dims);
    Rows middles(static_cast<std::size_t>(clouds.groups), std::vector<double>(dims));
    for (std::vector<double>& middle : middles) {
        for (double& x : middle) x = random.between(-100, 100);
    }
    Rows rows;
    std::vector<double> weights;
    for (std::size_t i = 0; i < clouds.n; ++i) {
        std::vector<double> row = middles[random.below(middles.size())];
        for (double& x : row) {
            x = std::nearbyint((x + clouds.spread * random.bell()) * 16384) / 16384;
        }
        rows.push_back(std::move(row));
        weights.push_back(static_cast<double>(1 + random.below(clouds.heaviest)));
    }
    return points_from(rows, weights);
}

WeightedPoints shuffled(const WeightedPoints& points, Random& random) {
    std::vector<std::size_t> index = range(0, points.n);
    for (std::size_t i = index.size(); i > 1; --i) std::swap(index[i - 1], index[random.below(i)]);
    return picked(points, index);
}

WeightedPoints first_points(const WeightedPoints& points, std::size_t n) {
    return picked(points, range(0, n));
}

WeightedPoints last_points(const WeightedPoints& points, std::size_t n) {
    return picked(points, range(n, points.n));
}

Centres points_as_centres(const WeightedPoints& points, int count, Random& random) {
    const WeightedPoints mixed = shuffled(points, random);
    Centres centres{points.dims, count, {}};
    for (int k = 0; k < count; ++k) {
        for (int d = 0; d < points.dims; ++d) {
            centres.x.push_back(mixed.plane(d)[static_cast<std::size_t>(k)]);
        }
    }
    return centres;
}

Nearest plain_nearest(const WeightedPoints& points, std::size_t i, const Centres& centres) {
    Nearest best{0, std::numeric_limits<float>::infinity()};
    for (int k = 0; k < centres.count; ++k) {
        float squared = 0;
        for (int d = 0; d < points.dims; ++d) {
            const float delta = points.plane(d)[i] - centres.row(k)[d];
            squared += delta * delta;
        }
        if (squared < best.squared) best = {static_cast<std::uint16_t>(k), squared};
    }
    return best;
}

double plain_objective(const WeightedPoints& points, const Rows& centres) {
    double sum = points.inner_scatter;
    for (std::size_t i = 0; i < points.n; ++i) {
        sum += points.weight[i] * nearest_row(points, i, centres).squared;
    }
    return sum;
}

double plain_lloyd(const WeightedPoints& points, Rows& centres, int passes) {
    const auto dims = static_cast<std::size_t>(points.dims);
    std::vector<std::size_t> label(points.n, centres.size());
    for (int pass = 0; pass < passes; ++pass) {
        bool moved = false;
        Rows moment(centres.size(), std::vector<double>(dims, 0.0));
        std::vector<double> weight(centres.size(), 0.0);
        for (std::size_t i = 0; i < points.n; ++i) {
            const std::size_t k = nearest_row(points, i, centres).label;
            moved = moved || k != label[i];
            label[i] = k;
            weight[k] += points.weight[i];
            for (std::size_t d = 0; d < dims; ++d) {
                moment[k][d] +=
                    points.weight[i] * static_cast<double>(points.plane(static_cast<int>(d))[i]);
            }
        }
        for (std::size_t k = 0; k < centres.size(); ++k) {
            for (std::size_t d = 0; weight[k] > 0 && d < dims; ++d) {
                centres[k][d] = moment[k][d] / weight[k];
            }
        }
        if (!moved) break;
    }
    return plain_objective(points, centres);
}

Rows rows_of(const Centres& centres) {
    Rows rows;
    for (int k = 0; k < centres.count; ++k) {
        rows.emplace_back(centres.row(k), centres.row(k) + centres.dims);
    }
    return rows;
}

}  // namespace tincture::test_support
