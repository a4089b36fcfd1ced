#pragma once

#include <vector>

#include "histogram/pixel_lab.h"
#include "histogram/weighted_points.h"

namespace tincture {

// A place in CIELAB where the colours of flat areas gather.
struct Peak {
    double L = 0, a = 0, b = 0;
    double weight = 0;  // within the radius
    // The part of the weight within twice the radius that lies within the radius: near 1 for an
    // ink, near a half or less where colours go on evenly, as along a fade.
    double prominence = 0;
};

// Places from the heaviest point on, each of what lies within `radius` (dE76) of it and in no
// earlier one (two can lie nearer to each other where the first took the points between them),
// that weigh at least `least`; at most `most`, from twice as many tries. Points of three
// dimensions.
[[nodiscard]] std::vector<Peak> find_peaks(const WeightedPoints& points, double radius,
                                           double least, std::size_t most);

// dE76, squared, of a point (three dimensions) from a peak.
[[nodiscard]] double squared_distance(const WeightedPoints& points, std::size_t i,
                                      const Peak& peak);

// The place in `peaks` of the one nearest to a colour in the steps of a LabBand, peaks.size() where
// none is within `reach` (dE76).
[[nodiscard]] std::size_t nearest_peak(const std::vector<Peak>& peaks, const LabSteps& colour,
                                       double reach);

}  // namespace tincture
