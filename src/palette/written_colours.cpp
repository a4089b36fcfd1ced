#include "palette/written_colours.h"

#include <algorithm>
#include <array>
#include <numeric>
#include <set>
#include <utility>

#include "colour/delta_e.h"
#include "palette/names.h"

namespace tincture {
namespace {

// sRGB form and colour differ by rounding alone up to about this; beyond, sRGB cannot hold it.
constexpr double rounding_de00 = 0.5;

// A colour with its distance to the one that is wanted; the nearer first, equally near ones by
// colour.
using Reached = std::pair<double, Rgb8>;

// The 27 colours that differ from `from` by at most one step a channel, it among them; at a wall of
// the space some come twice.
std::array<Rgb8, 27> neighbours(Rgb8 from) {
    const auto stepped = [](std::uint8_t value, int step) {
        return static_cast<std::uint8_t>(std::clamp(value + step, 0, 255));
    };
    std::array<Rgb8, 27> found;
    for (int i = 0; i < 27; ++i) {
        found[static_cast<std::size_t>(i)] = {
            stepped(from.r, i % 3 - 1), stepped(from.g, i / 3 % 3 - 1), stepped(from.b, i / 9 - 1)};
    }
    return found;
}

// Rounding device values is not yet the nearest in Lab, and a profile's way back from Lab may be
// coarse: walk downhill from there.
Rgb8 nearest_of_all(const Lab& wanted, const ColourSpace& space) {
    const auto reached = [&](Rgb8 colour) {
        return Reached(delta_e_76(space.lab_of(colour), wanted), colour);
    };
    Reached at = reached(space.to_rgb8(wanted));
    while (true) {
        Reached next = at;
        for (const Rgb8 colour : neighbours(at.second)) next = std::min(next, reached(colour));
        if (next == at) return at.second;
        at = next;
    }
}

// The nearest that is not taken: outward from the nearest of all, the nearer ones first.
Rgb8 nearest_free(const Lab& wanted, const ColourSpace& space, const std::set<Rgb8>& taken) {
    std::set<Reached> front = {{0.0, nearest_of_all(wanted, space)}};
    std::set<Rgb8> seen = {front.begin()->second};
    while (taken.contains(front.begin()->second)) {
        const Rgb8 at = front.begin()->second;
        front.erase(front.begin());
        for (const Rgb8 colour : neighbours(at)) {
            if (!seen.insert(colour).second) continue;
            front.insert({delta_e_76(space.lab_of(colour), wanted), colour});
        }
    }
    return front.begin()->second;
}

}  // namespace

std::vector<Rgb8> written_colours(std::span<const Lab> wanted, const ColourSpace& space) {
    std::vector<Rgb8> written;
    std::set<Rgb8> taken;
    for (const Lab& lab : wanted) {
        written.push_back(nearest_free(lab, space, taken));
        taken.insert(written.back());
    }
    return written;
}

Palette make_palette(std::span<const Rgb8> written, std::span<const Lab> lab,
                     std::span<const std::uint64_t> pixels, int kept, const ColourSpace& space,
                     const ColourSpace& srgb) {
    std::vector<std::size_t> order(written.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::sort(order.begin(), order.end(), [&](std::size_t one, std::size_t two) {
        return pixels[one] != pixels[two] ? pixels[one] > pixels[two] : written[one] < written[two];
    });
    const auto all =
        static_cast<double>(std::accumulate(pixels.begin(), pixels.end(), std::uint64_t{0}));

    Palette palette;
    palette.count = static_cast<int>(written.size());
    std::vector<Lab> labs;
    for (const std::size_t i : order) {
        Swatch swatch;
        swatch.written = written[i];
        swatch.lab = lab[i];
        swatch.pixels = pixels[i];
        swatch.share = static_cast<double>(pixels[i]) / all;
        swatch.kept = i < static_cast<std::size_t>(kept);
        swatch.srgb = written[i];
        if (!space.is_standard()) {
            swatch.srgb = nearest_of_all(lab[i], srgb);
            const double off = delta_e_2000(lab[i], srgb.lab_of(swatch.srgb));
            if (off > rounding_de00) swatch.hex_de00 = off;
        }
        labs.push_back(lab[i]);
        palette.swatches.push_back(std::move(swatch));
    }
    std::vector<std::string> names = name_colours(labs);
    for (std::size_t i = 0; i < names.size(); ++i) palette.swatches[i].name = std::move(names[i]);
    return palette;
}

}  // namespace tincture
