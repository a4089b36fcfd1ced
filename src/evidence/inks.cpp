#include "evidence/inks.h"

#include <algorithm>
#include <cstddef>

#include "support/maths.h"

namespace tincture {
namespace {

// All figures here were found by trial on drawn posters.
constexpr double least_ink = 0.0001;     // of the pixels
constexpr double stands_out_from = 0.5;  // prominence: of an ink perhaps, and for certain
constexpr double stands_out_whole = 0.75;
constexpr double more_for_open = 0.3;  // prominence wanted of what goes on beyond its borders
constexpr double more_for_open_whole = 0.15;
constexpr double open_from = 0.4;  // of the borders
constexpr double open_whole = 0.5;

// What stands by its shape: a body with edges, though blends of it lie near in colour.
constexpr double least_by_shape = 0.001;  // of the pixels
constexpr double solid_share = 0.3;       // of its own
constexpr double closed = 0.3;            // open borders at most

constexpr std::size_t least_solid = 18;    // pixels, in what is more than a stroke
constexpr double perhaps_a_blend = 0.02;   // of the pixels: blends gather less in one colour
constexpr double perhaps_detail = 0.0013;  // of the pixels: what is lost in a blur is less
constexpr double hardly_stands_out = 0.6;  // weight of a mix that is not looked for
constexpr double soft_px = 0.8;            // softer edges have thinned the strokes
constexpr int along_edges_px = 4;          // inks lie so near to the pixels of their blend,
constexpr double along_edges_share = 0.5;  // to such a part of them
constexpr int beside_ink_px = 6;           // what lies further from any ink
constexpr double beside_ink_share = 0.25;  // but for such a part is detail in a blur
constexpr double least_stroke = 0.0004;    // of the pixels, for what does not stand out
constexpr double tube = 0.2;               // how far off the line mixes lie, of its length
constexpr double tube_de = 4;              // at least
constexpr double beyond = 1.6;             // how far strokes are drawn out beyond what was found

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

// 0 to 1: by colour alone, or by its shape where blends of it blur its peak; no piece of a fade.
double standing_out(const Peak& peak, const PeakBody& body, double share) {
    const double open = smooth_step(body.open, open_from, open_whole);
    const double by_colour = smooth_step(peak.prominence, stands_out_from + more_for_open * open,
                                         stands_out_whole + more_for_open_whole * open);
    const bool by_shape =
        share >= least_by_shape && body.solid >= least_solid && body.open <= closed &&
        static_cast<double>(body.solid) >= solid_share * static_cast<double>(body.pixels);
    return by_shape ? 1 : by_colour;
}

class Inks {
  public:
    Inks(const std::vector<Peak>& peaks, const PeakPlaces& places, double softness, double radius)
        : peaks_(peaks),
          places_(places),
          softness_(softness),
          radius_(radius),
          weight_(peaks.size(), 0.0) {}

    void accept(std::size_t i, double weight) {
        weight_[i] = weight;
        accepted_.push_back(i);
    }

    // Whether the peak is a mix of two inks, both heavier, and lies as one would: nowhere wider
    // than a stroke, which wear has thinned; between the two along their edges; or away from all
    // inks, where detail is too fine to be seen.
    [[nodiscard]] bool is_blend(std::size_t i, const PeakBody& body, double share,
                                double weight) const {
        if (share > perhaps_a_blend || !explained(i, 1)) return false;
        if (weight < hardly_stands_out) return true;
        if (lies_along_edges(i)) return true;
        if (body.solid < least_solid && (softness_ >= soft_px || share < perhaps_detail))
            return true;
        return share < perhaps_detail && lies_beside_no_ink(i);
    }

    // Whether two inks, both heavier than the peak, explain it.
    [[nodiscard]] bool explained(std::size_t i, double end) const {
        for (const std::size_t one : accepted_) {
            for (const std::size_t two : accepted_) {
                if (one != two && could_be_mix(i, one, two, end)) return true;
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
    [[nodiscard]] bool lies_along_edges(std::size_t i) const {
        const std::vector<std::uint64_t> near = places_.peaks_near(i, along_edges_px);
        for (const std::size_t one : accepted_) {
            for (const std::size_t two : accepted_) {
                const std::uint64_t both = bit(one) | bit(two);
                const auto has_both = [both](std::uint64_t there) {
                    return (there & both) == both;
                };
                if (one < two && could_be_mix(i, one, two, 1) &&
                    share(near, has_both) >= along_edges_share) {
                    return true;
                }
            }
        }
        return false;
    }

    [[nodiscard]] bool lies_beside_no_ink(std::size_t i) const {
        std::uint64_t inks = 0;
        for (const std::size_t ink : accepted_) inks |= bit(ink);
        const auto has_ink = [inks](std::uint64_t there) { return (there & inks) != 0; };
        return share(places_.peaks_near_rim(i, beside_ink_px), has_ink) < beside_ink_share;
    }

    [[nodiscard]] static std::uint64_t bit(std::size_t peak) {
        return peak < PeakPlaces::most_peaks ? std::uint64_t{1} << peak : 0;
    }

    template <typename Test>
    [[nodiscard]] static double share(const std::vector<std::uint64_t>& near, const Test& test) {
        if (near.empty()) return 0;
        const auto n = std::count_if(near.begin(), near.end(), test);
        return static_cast<double>(n) / static_cast<double>(near.size());
    }

    // Whether two inks, both heavier than the peak, explain it.
    [[nodiscard]] bool could_be_mix(std::size_t i, std::size_t one, std::size_t two,
                                    double end) const {
        const bool lighter = peaks_[one].weight > peaks_[i].weight &&
                             (end > 1 || peaks_[two].weight > peaks_[i].weight);
        return lighter && is_mix(peaks_[i], peaks_[one], peaks_[two], end);
    }

    const std::vector<Peak>& peaks_;
    const PeakPlaces& places_;
    double softness_;
    double radius_;
    std::vector<double> weight_;
    std::vector<std::size_t> accepted_;
};

}  // namespace

InkWeights ink_weights(const std::vector<Peak>& peaks, const PeakPlaces& places, double softness,
                       double pixels, double radius) {
    InkWeights result;
    Inks inks(peaks, places, softness, radius);
    std::vector<std::size_t> order(peaks.size());
    for (std::size_t i = 0; i < order.size(); ++i) order[i] = i;
    std::stable_sort(order.begin(), order.end(), [&](std::size_t one, std::size_t two) {
        return peaks[one].weight > peaks[two].weight;
    });
    std::vector<bool> perhaps_stroke(peaks.size(), false);
    for (const std::size_t i : order) {
        if (peaks[i].weight < least_ink * pixels) continue;
        const PeakBody body = places.body(i);
        const double weight = standing_out(peaks[i], body, peaks[i].weight / pixels);
        perhaps_stroke[i] = weight <= 0 && body.open < open_from;
        if (weight <= 0) continue;
        const double share = peaks[i].weight / pixels;
        if (inks.is_blend(i, body, share, weight)) {
            result.perhaps_more += weight >= hardly_stands_out ? 1 : 0;
            continue;
        }
        inks.accept(i, weight);
    }
    for (const std::size_t i : order) {
        if (!perhaps_stroke[i] || peaks[i].weight < least_stroke * pixels) continue;
        if (inks.near_an_ink(i) || inks.explained(i, beyond)) continue;
        inks.accept(i, 1);
    }
    result.weight = inks.weights();
    return result;
}

}  // namespace tincture
