#include "choose/curve_shape.h"

#include <algorithm>

namespace tincture {

std::vector<double> second_differences(std::span<const double> y) {
    std::vector<double> bend;
    for (std::size_t i = 1; i + 1 < y.size(); ++i) bend.push_back(y[i - 1] - 2 * y[i] + y[i + 1]);
    return bend;
}

std::vector<double> below_chord(std::span<const double> x, std::span<const double> y) {
    std::vector<double> below(y.size(), 0.0);
    if (y.empty()) return below;
    const auto [low, high] = std::minmax_element(y.begin(), y.end());
    const double height = *high - *low;
    const double width = x.back() - x.front();
    if (height <= 0 || width <= 0) return below;
    for (std::size_t i = 0; i < y.size(); ++i) {
        below[i] = 1 - (y[i] - *low) / height - (x[i] - x.front()) / width;
    }
    return below;
}

}  // namespace tincture
