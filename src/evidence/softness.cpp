#include "evidence/softness.h"

#include <algorithm>
#include <cmath>
#include <cstddef>

namespace tincture {
namespace {

constexpr std::uint32_t sampled_rows = 128;
constexpr double heavy_share = 0.01;
constexpr double least_contrast = 25;  // L*
constexpr std::size_t longest = 12;    // of a transition, in pixels
constexpr double only_noise = 0.03;    // t (1 - t) below it
constexpr std::size_t least_transitions = 20;
constexpr double root_of_pi = 1.7724538509055159;

struct Widths {
    double sum = 0;
    std::size_t n = 0;
};

// From the last pixel of one peak to the first of another.
void add_transition(const LabBand& row, std::size_t from, std::size_t to, double start, double end,
                    Widths& widths) {
    if (std::abs(end - start) < least_contrast) return;
    double width = 0;
    for (std::size_t x = from; x <= to; ++x) {
        const double L = static_cast<double>(row.L[x]) / lab_band_steps;
        const double t = std::clamp((L - start) / (end - start), 0.0, 1.0);
        if (t * (1 - t) > only_noise) width += t * (1 - t);
    }
    widths.sum += width;
    ++widths.n;
}

}  // namespace

double measure_softness(const PixelLab& pixels, const PeakPlaces& places,
                        const std::vector<Peak>& peaks, double all) {
    Widths widths;
    LabBand row;
    const std::uint32_t step = std::max(1U, pixels.height() / sampled_rows);
    for (std::uint32_t y = step / 2; y < pixels.height(); y += step) {
        pixels.read(y, 1, row);
        std::size_t last = peaks.size();
        std::size_t last_x = 0;
        for (std::size_t x = 0; x < pixels.width(); ++x) {
            const std::size_t peak = places.peak_at(x, y);
            if (peak >= peaks.size() || peaks[peak].weight < heavy_share * all) continue;
            if (last < peaks.size() && peak != last && x - last_x <= longest) {
                add_transition(row, last_x, x, peaks[last].L, peaks[peak].L, widths);
            }
            last = peak;
            last_x = x;
        }
    }
    if (widths.n < least_transitions) return 0;
    return root_of_pi * widths.sum / static_cast<double>(widths.n);
}

}  // namespace tincture
