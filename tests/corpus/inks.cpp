#include "tests/corpus/inks.h"

#include <algorithm>

#include "colour/colour_space.h"
#include "colour/delta_e.h"
#include "tests/corpus/canvas.h"

namespace tincture::corpus {
namespace {

// Hue in turns, saturation and value in 0..1. In braces random numbers come in a known order.
struct Hue {
    double hue;
    double saturation;
    double value;
};

Rgb8 from_hue(const Hue& colour) {
    const auto channel = [&](double offset) {
        double h = colour.hue + offset;
        h = (h - std::floor(h)) * 6;
        const double pure = std::clamp(std::abs(h - 3) - 1, 0.0, 1.0);
        return to_byte(255 * colour.value * (1 - colour.saturation + colour.saturation * pure));
    };
    return {channel(0), channel(2.0 / 3), channel(1.0 / 3)};
}

}  // namespace

Lab lab_of(Rgb8 colour) {
    static const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    return srgb.lab_of(colour);
}

double difference(Rgb8 one, Rgb8 two) {
    return delta_e_2000(lab_of(one), lab_of(two));
}

Rgb8 any_ink(Random& random) {
    const double hue = random.unit();
    const double kind = random.unit();
    if (kind < 0.06) return {0, 0, 0};
    if (kind < 0.14) return from_hue({hue, random.between(0, 0.8), random.between(0.05, 0.25)});
    if (kind < 0.26) return from_hue({hue, random.between(0, 0.12), random.between(0.3, 0.85)});
    if (kind < 0.40) return from_hue({hue, random.between(0.05, 0.3), random.between(0.88, 1)});
    if (kind < 0.65) return from_hue({hue, random.between(0.3, 0.7), random.between(0.35, 0.9)});
    return from_hue({hue, random.between(0.65, 1), random.between(0.45, 1)});
}

Rgb8 any_paper(Random& random) {
    const double kind = random.unit();
    if (kind < 0.3) return {255, 255, 255};
    if (kind < 0.55) {
        return from_hue(
            {random.between(0.07, 0.16), random.between(0.03, 0.15), random.between(0.94, 1)});
    }
    if (kind < 0.7) {
        return from_hue({random.unit(), random.between(0.05, 0.25), random.between(0.85, 1)});
    }
    return any_ink(random);
}

bool add_if_apart(std::vector<Rgb8>& inks, Rgb8 ink, double apart) {
    for (const Rgb8 other : inks) {
        if (difference(ink, other) < apart) return false;
    }
    inks.push_back(ink);
    return true;
}

std::vector<Rgb8> choose_inks(Random& random, int n, double apart) {
    std::vector<Rgb8> inks = {any_paper(random)};
    while (static_cast<int>(inks.size()) < n) {
        // One in twenty of a dozen would be hard to place: tries are cheap.
        static_cast<void>(add_if_apart(inks, any_ink(random), apart));
    }
    return inks;
}

bool bring_near(Random& random, std::vector<Rgb8>& inks, std::size_t moved, std::size_t from,
                double nearest, double farthest) {
    const Light start = light_of(inks[from]);
    for (int tries = 0; tries < 2000; ++tries) {
        const Rgb8 candidate{to_byte(start.r + random.between(-70, 70)),
                             to_byte(start.g + random.between(-70, 70)),
                             to_byte(start.b + random.between(-70, 70))};
        bool fits = true;
        for (std::size_t i = 0; i < inks.size() && fits; ++i) {
            if (i == moved) continue;
            const double away = difference(candidate, inks[i]);
            fits = i == from ? away >= nearest && away < farthest : away >= farthest;
        }
        if (!fits) continue;
        inks[moved] = candidate;
        return true;
    }
    return false;
}

}  // namespace tincture::corpus
