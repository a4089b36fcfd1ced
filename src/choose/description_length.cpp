#include <algorithm>

#include "choose/code_length.h"
#include "choose/criteria.h"
#include "support/format.h"
#include "support/maths.h"

namespace tincture {
namespace {

constexpr double nats_a_bit = 0.693147180559945309;

// Neighbouring pixels are no independent witnesses: a picture of any size counts as so many pixels
// that are. With all of them, every colour more would be worth its bits. This and the precision
// were found by trial on drawn posters.
constexpr double sampled_pixels = 1000;
constexpr double bits_a_colour = 24;  // three bytes

// How finely it is described how far a pixel is off its colour, as a mean squared dE76: what
// nobody sees in a flat area, and what is left of the noise there.
double precision(const Study& study) {
    constexpr double unseen = 2;
    const double noise_left = 0.3 * study.evidence.noise.value_or(0);
    return unseen + noise_left * noise_left;
}

struct Description {
    double labels = 0;   // bits for which colour each pixel has
    double offsets = 0;  // bits for how far each pixel is off it
    double palette = 0;
    [[nodiscard]] double bits() const { return labels + offsets + palette; }
};

std::vector<Description> descriptions(std::span<const CurvePoint> curve, const Study& study) {
    const double n = std::min(sampled_pixels, static_cast<double>(study.picture.opaque_pixels));
    const std::vector<double> complexity =
        log_label_complexity(curve.back().count, static_cast<std::uint64_t>(n));
    const double floor = precision(study);
    std::vector<Description> found;
    for (const CurvePoint& point : curve) {
        Description description;
        description.labels = n * point.label_bits +
                             complexity[static_cast<std::size_t>(point.count) - 1] / nats_a_bit;
        // Gaussian in three dimensions; what is below the precision costs next to nothing.
        description.offsets = n * 1.5 * natural_log(1 + point.evidence_mse / floor) / nats_a_bit;
        description.palette = bits_a_colour * point.count;
        found.push_back(description);
    }
    return found;
}

}  // namespace

// The shortest description of data and model (Rissanen 1978, Automatica 14:465-471), with labels in
// the normalised maximum likelihood code (Kontkanen et al. 2005, see code_length.h).
Vote description_length_vote(const Study& study) {
    constexpr const char* criterion = "description length";
    const std::span<const CurvePoint> curve = swept(study);
    if (curve.size() < 2) {
        return {criterion, std::nullopt, "there are no two counts to compare"};
    }
    const std::vector<Description> found = descriptions(curve, study);
    const auto shortest = std::min_element(
        found.begin(), found.end(),
        [](const Description& one, const Description& two) { return one.bits() < two.bits(); });
    const CurvePoint& at = curve[static_cast<std::size_t>(shortest - found.begin())];
    if (shortest + 1 == found.end() && at.evidence_mse > 0) {
        return {criterion, std::nullopt,
                "up to the end of the curve every colour more saves more bits than it costs"};
    }
    const double n = std::min(sampled_pixels, static_cast<double>(study.picture.opaque_pixels));
    return {criterion, at.count,
            "with " + colours(at.count) + ", the fewest bits describe " + fixed(n, 0) +
                " pixels: " + fixed(shortest->labels, 0) + " for which colour each has, " +
                fixed(shortest->offsets, 0) + " for how far off it is beyond the noise, " +
                fixed(shortest->palette, 0) + " for the palette"};
}

}  // namespace tincture
