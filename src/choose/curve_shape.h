// What can be read off the shape of a falling curve.
#pragma once

#include <span>
#include <vector>

namespace tincture {

// y[i-1] - 2 y[i] + y[i+1] for each inner i, so that result[0] belongs to y[1]: where it is largest
// the curve bends most (the automatic reading of a scree plot; Cattell 1966 for the plot).
[[nodiscard]] std::vector<double> second_differences(std::span<const double> y);

// The difference curve of Kneedle for a falling convex curve: with x and y scaled to 0..1, how far
// y lies below the chord that joins the ends, measured along y. Satopaa, Albrecht, Irwin, Raghavan,
// "Finding a Kneedle in a Haystack", ICDCSW 2011. x rises; all zero where x or y does not vary.
[[nodiscard]] std::vector<double> below_chord(std::span<const double> x, std::span<const double> y);

}  // namespace tincture
