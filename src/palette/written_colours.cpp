#include "palette/written_colours.h"

#include <algorithm>
#include <numeric>
#include <set>

#include "colour/delta_e.h"
#include "palette/names.h"

namespace tincture {
namespace {

// sRGB form and colour differ by rounding alone up to about this; beyond, sRGB cannot hold it.
constexpr double rounding_de00 = 0.5;

// The colour nearest to `wanted` among the 27 that differ from `from` by at most one step a channel
// and are not taken; `from` itself if all are.
Rgb8 nearest_neighbour(Rgb8 from, const Lab& wanted, const ColourSpace& space,
                       const std::set<Rgb8>& taken) {
    Rgb8 best = from;
    double least = -1;
    const auto stepped = [](std::uint8_t value, int step) {
        return static_cast<std::uint8_t>(std::clamp(value + step, 0, 255));
    };
    for (int i = 0; i < 27; ++i) {
        const Rgb8 candidate = {stepped(from.r, i % 3 - 1), stepped(from.g, i / 3 % 3 - 1),
                                stepped(from.b, i / 9 - 1)};
        if (taken.contains(candidate)) continue;
        const double difference = delta_e_76(space.lab_of(candidate), wanted);
        if (least < 0 || difference < least || (difference == least && candidate < best)) {
            least = difference;
            best = candidate;
        }
    }
    return best;
}

// Rounding device values is not yet the nearest in Lab, and a profile's way back from Lab may be
// coarse: walk downhill from there.
Rgb8 nearest_free(const Lab& wanted, const ColourSpace& space, const std::set<Rgb8>& taken) {
    constexpr int longest_walk = 1024;  // for where all around is taken; else it ends at the bottom
    Rgb8 at = space.to_rgb8(wanted);
    for (int step = 0; step < longest_walk; ++step) {
        const Rgb8 next = nearest_neighbour(at, wanted, space, taken);
        if (next == at && !taken.contains(at)) break;
        at = next;
    }
    return at;
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
            swatch.srgb = nearest_free(lab[i], srgb, {});
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
