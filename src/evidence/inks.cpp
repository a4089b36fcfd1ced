#include "evidence/inks.h"

#include <algorithm>
#include <cstddef>

namespace tincture {
namespace {

// All figures here were found by trial on drawn posters.
constexpr double never_a_blend = 0.001;  // of the pixels: blends gather less in one colour
constexpr double least_ink = 0.0002;     // of the pixels
constexpr double least_stroke = 0.0004;  // of the pixels, for what does not stand out
constexpr double tube = 0.2;             // how far off the line mixes lie, of its length
constexpr double tube_de = 4;            // at least
constexpr double beyond = 1.6;           // how far strokes are drawn out beyond what was found

double smooth_step(double value, double low, double high) {
    const double t = std::clamp((value - low) / (high - low), 0.0, 1.0);
    return t * t * (3 - 2 * t);
}

struct Vector {
    double L, a, b;
};
Vector between(const Peak& from, const Peak& to) {
    return {to.L - from.L, to.a - from.a, to.b - from.b};
}
double dot(const Vector& one, const Vector& two) {
    return one.L * two.L + one.a * two.a + one.b * two.b;
}

// Whether `peak` lies along the line from one ink to another, up to `end` times its length.
bool is_mix(const Peak& peak, const Peak& one, const Peak& two, double end) {
    const Vector line = between(one, two);
    const Vector offset = between(one, peak);
    const double length = dot(line, line);
    const double along = dot(offset, line);
    if (length <= 0 || along < 0 || along > end * length) return false;
    const double off = dot(offset, offset) - along * along / length;
    return off <= std::max(tube * tube * length, tube_de * tube_de);
}

class Inks {
  public:
    Inks(const std::vector<Peak>& peaks, double radius)
        : peaks_(peaks), radius_(radius), weight_(peaks.size(), 0.0) {}

    void accept(std::size_t i, double weight) {
        weight_[i] = weight;
        accepted_.push_back(i);
    }

    // Whether two inks, both heavier than the peak, explain it.
    [[nodiscard]] bool explained(std::size_t i, double end) const {
        for (const std::size_t one : accepted_) {
            for (const std::size_t two : accepted_) {
                if (one == two) continue;
                const bool lighter = peaks_[one].weight > peaks_[i].weight &&
                                     (end > 1 || peaks_[two].weight > peaks_[i].weight);
                if (lighter && is_mix(peaks_[i], peaks_[one], peaks_[two], end)) return true;
            }
        }
        return false;
    }

    [[nodiscard]] bool near_an_ink(std::size_t i) const {
        return std::any_of(accepted_.begin(), accepted_.end(), [&](std::size_t other) {
            const Vector offset = between(peaks_[other], peaks_[i]);
            return dot(offset, offset) <= 9 * radius_ * radius_;
        });
    }

    [[nodiscard]] const std::vector<double>& weights() const { return weight_; }

  private:
    const std::vector<Peak>& peaks_;
    double radius_;
    std::vector<double> weight_;
    std::vector<std::size_t> accepted_;
};

}  // namespace

std::vector<double> ink_weights(const std::vector<Peak>& peaks, double pixels, double radius) {
    Inks inks(peaks, radius);
    std::vector<std::size_t> order(peaks.size());
    for (std::size_t i = 0; i < order.size(); ++i) order[i] = i;
    std::stable_sort(order.begin(), order.end(), [&](std::size_t one, std::size_t two) {
        return peaks[one].weight > peaks[two].weight;
    });
    const auto standing_out = [&](std::size_t i) {
        return smooth_step(peaks[i].prominence, 0.5, 0.75);
    };
    for (const std::size_t i : order) {
        if (standing_out(i) <= 0 || peaks[i].weight < least_ink * pixels) continue;
        if (peaks[i].weight < never_a_blend * pixels && inks.explained(i, 1)) continue;
        inks.accept(i, standing_out(i));
    }
    for (const std::size_t i : order) {
        if (standing_out(i) > 0 || peaks[i].weight < least_stroke * pixels) continue;
        if (inks.near_an_ink(i) || inks.explained(i, beyond)) continue;
        inks.accept(i, 1);
    }
    return inks.weights();
}

}  // namespace tincture
