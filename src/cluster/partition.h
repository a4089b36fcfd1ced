// Which point belongs to which centre, and what that makes of each cluster.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "histogram/weighted_points.h"

namespace tincture {

// The points of each centre, brought up to date rather than made anew: from one set of centres to
// the next few points change hands, and only these are taken from one cluster's sums and given to
// another's. The same sums for any number of threads; exact, and so free of how they came about,
// where sums over the points are (see WeightedPoints).
class Partition {
  public:
    // Clusters without points: none belongs to anyone yet.
    Partition(const WeightedPoints& points, int clusters);

    // Gives each of the same points to the nearest of the centres, one a cluster.
    void assign(const WeightedPoints& points, const Centres& centres);

    // One more cluster, without points.
    void append();
    // Takes a cluster out: its points are nobody's, and the last cluster takes its number.
    void drop(int cluster);

    [[nodiscard]] bool empty(int cluster) const { return sums_of(cluster)[0] <= 0; }
    [[nodiscard]] double weight(int cluster) const { return sums_of(cluster)[1]; }
    // The sum of weight * coordinate along a dimension.
    [[nodiscard]] double moment(int cluster, int dim) const { return sums_of(cluster)[2 + dim]; }
    // The sum of weight * squared distance to the centre; inner scatter not included.
    [[nodiscard]] double objective() const { return objective_; }

  private:
    [[nodiscard]] std::size_t stride() const { return dims_ + 2; }
    [[nodiscard]] const double* sums_of(int cluster) const {
        return sums_.data() + static_cast<std::size_t>(cluster) * stride();
    }

    std::size_t dims_;
    std::vector<std::uint16_t> owner_;
    // For each cluster side by side: points, weight, a moment for each dimension.
    std::vector<double> sums_;
    double objective_ = 0;
};

}  // namespace tincture
