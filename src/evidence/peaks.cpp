#include "evidence/peaks.h"

#include <algorithm>
#include <cstddef>
#include <numeric>

namespace tincture {
namespace {

constexpr int shifts = 4;  // towards the mean of what is near

// Moves a peak to the mean of the free points around it (mean shift; Fukunaga, Hostetler 1975, IEEE
// Trans. Information Theory 21:32-40) and weighs it.
void settle_peak(const WeightedPoints& points, const std::vector<bool>& taken, double radius,
                 Peak& peak) {
    for (int shift = 0; shift <= shifts; ++shift) {
        double weight = 0;
        double L = 0;
        double a = 0;
        double b = 0;
        for (std::size_t i = 0; i < points.n; ++i) {
            if (taken[i] || squared_distance(points, i, peak) > radius * radius) continue;
            weight += points.weight[i];
            L += points.weight[i] * static_cast<double>(points.plane(0)[i]);
            a += points.weight[i] * static_cast<double>(points.plane(1)[i]);
            b += points.weight[i] * static_cast<double>(points.plane(2)[i]);
        }
        if (weight <= 0) return;
        const Peak moved = {L / weight, a / weight, b / weight, weight, 0};
        const bool settled = moved.L == peak.L && moved.a == peak.a && moved.b == peak.b;
        peak = moved;
        if (settled) return;
    }
}

}  // namespace

double squared_distance(const WeightedPoints& points, std::size_t i, const Peak& peak) {
    const double L = static_cast<double>(points.plane(0)[i]) - peak.L;
    const double a = static_cast<double>(points.plane(1)[i]) - peak.a;
    const double b = static_cast<double>(points.plane(2)[i]) - peak.b;
    return L * L + a * a + b * b;
}

std::vector<Peak> find_peaks(const WeightedPoints& points, double radius, double least,
                             std::size_t most) {
    std::vector<std::size_t> order(points.n);
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::stable_sort(order.begin(), order.end(), [&](std::size_t one, std::size_t two) {
        return points.weight[one] > points.weight[two];
    });
    std::vector<bool> taken(points.n, false);
    std::vector<Peak> peaks;
    std::size_t tries = 0;
    for (const std::size_t start : order) {
        if (taken[start]) continue;
        if (peaks.size() == most || ++tries > 2 * most) break;
        Peak peak{static_cast<double>(points.plane(0)[start]),
                  static_cast<double>(points.plane(1)[start]),
                  static_cast<double>(points.plane(2)[start]), 0, 0};
        settle_peak(points, taken, radius, peak);
        double around = 0;
        for (std::size_t i = 0; i < points.n; ++i) {
            const double squared = squared_distance(points, i, peak);
            if (squared <= 4 * radius * radius) around += points.weight[i];
            if (squared <= radius * radius) taken[i] = true;
        }
        taken[start] = true;
        if (peak.weight < least) continue;
        peak.prominence = peak.weight / around;
        peaks.push_back(peak);
    }
    return peaks;
}

std::size_t nearest_peak(const std::vector<Peak>& peaks, const LabSteps& colour, double reach) {
    std::size_t best = peaks.size();
    double nearest = reach * reach;
    for (std::size_t p = 0; p < peaks.size(); ++p) {
        const double L = static_cast<double>(colour.L) / lab_band_steps - peaks[p].L;
        const double a = static_cast<double>(colour.a) / lab_band_steps - peaks[p].a;
        const double b = static_cast<double>(colour.b) / lab_band_steps - peaks[p].b;
        const double squared = L * L + a * a + b * b;
        if (squared > nearest) continue;
        nearest = squared;
        best = p;
    }
    return best;
}

}  // namespace tincture
