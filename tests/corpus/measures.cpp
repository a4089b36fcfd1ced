#include "tests/corpus/measures.h"

#include <algorithm>
#include <limits>
#include <map>

#include "colour/delta_e.h"
#include "tests/corpus/inks.h"

namespace tincture::corpus {
namespace {

struct Grid {
    int width;
    int height;
    // Calls visit(index) for the pixel and its neighbours; stops at the first that says true.
    template <typename Visit>
    bool any_around(int at, const Visit& visit) const {
        const int x = at % width;
        const int y = at / width;
        for (int j = std::max(0, y - 1); j <= std::min(height - 1, y + 1); ++j) {
            for (int i = std::max(0, x - 1); i <= std::min(width - 1, x + 1); ++i) {
                if (visit(j * width + i)) return true;
            }
        }
        return false;
    }
};

Grid grid_of(const Sample& sample) {
    return {static_cast<int>(sample.picture.width), static_cast<int>(sample.picture.height)};
}

// Some pixels, ascending, cut into what is 8-connected: the component of each.
std::vector<int> components(const Grid& grid, std::span<const int> pixels) {
    std::vector<int> component(pixels.size(), -1);
    int n = 0;
    std::vector<std::size_t> open;
    for (std::size_t first = 0; first < pixels.size(); ++first) {
        if (component[first] >= 0) continue;
        open.push_back(first);
        component[first] = n;
        while (!open.empty()) {
            const std::size_t at = open.back();
            open.pop_back();
            grid.any_around(pixels[at], [&](int near) {
                const auto found = std::lower_bound(pixels.begin(), pixels.end(), near);
                if (found == pixels.end() || *found != near) return false;
                const auto place = static_cast<std::size_t>(found - pixels.begin());
                if (component[place] < 0) {
                    component[place] = n;
                    open.push_back(place);
                }
                return false;
            });
        }
        ++n;
    }
    return component;
}

bool one_component(const Grid& grid, std::span<const int> pixels) {
    const std::vector<int> component = components(grid, pixels);
    return std::all_of(component.begin(), component.end(), [](int c) { return c == 0; });
}

// Whether one component of `got` comes within one pixel of all of `stroke`; both ascending.
bool covered(const Grid& grid, std::span<const int> stroke, std::span<const int> got) {
    const std::vector<int> component = components(grid, got);
    const int n = component.empty() ? 0 : *std::max_element(component.begin(), component.end()) + 1;
    for (int c = 0; c < n; ++c) {
        const auto of_component = [&](int near) {
            const auto found = std::lower_bound(got.begin(), got.end(), near);
            return found != got.end() && *found == near &&
                   component[static_cast<std::size_t>(found - got.begin())] == c;
        };
        if (std::all_of(stroke.begin(), stroke.end(),
                        [&](int at) { return grid.any_around(at, of_component); })) {
            return true;
        }
    }
    return false;
}

}  // namespace

std::vector<std::uint8_t> nearest_inks(std::span<const Rgb8> palette, std::span<const Rgb8> inks) {
    std::vector<std::uint8_t> nearest;
    for (const Rgb8 colour : palette) {
        std::vector<double> away;
        for (const Rgb8 ink : inks) away.push_back(difference(colour, ink));
        nearest.push_back(
            static_cast<std::uint8_t>(std::min_element(away.begin(), away.end()) - away.begin()));
    }
    return nearest;
}

double halo_share(const Sample& sample, std::span<const std::uint8_t> got_inks) {
    const Grid grid = grid_of(sample);
    std::size_t halo = 0;
    for (int at = 0; at < grid.width * grid.height; ++at) {
        const std::uint8_t got = got_inks[static_cast<std::size_t>(at)];
        if (!grid.any_around(at, [&](int near) {
                return sample.truth[static_cast<std::size_t>(near)] == got;
            })) {
            ++halo;
        }
    }
    return static_cast<double>(halo) / static_cast<double>(got_inks.size());
}

std::vector<std::uint8_t> labels_of_those_near(const Sample& sample, const Picture& worn) {
    const Grid grid = grid_of(sample);
    std::vector<Lab> inks;
    for (const Rgb8 ink : sample.inks) inks.push_back(lab_of(ink));
    std::vector<std::uint8_t> labels(sample.truth);
    for (int at = 0; at < grid.width * grid.height; ++at) {
        const auto pixel = static_cast<std::size_t>(at);
        const std::uint8_t own = sample.truth[pixel];
        const auto other = [&](int near) {
            return sample.truth[static_cast<std::size_t>(near)] != own;
        };
        if (!grid.any_around(at, other)) continue;
        const std::uint8_t* c = worn.samples8.data() + 3 * pixel;
        const Lab colour = lab_of({c[0], c[1], c[2]});
        double best = std::numeric_limits<double>::max();
        grid.any_around(at, [&](int near) {
            const std::uint8_t ink = sample.truth[static_cast<std::size_t>(near)];
            const double away = delta_e_76(colour, inks[ink]);
            if (away < best) {
                best = away;
                labels[pixel] = ink;
            }
            return false;
        });
    }
    return labels;
}

std::vector<double> palette_errors(const Sample& sample, std::span<const Rgb8> palette) {
    // best[set]: the smallest sum for the first inks and a set of as many palette colours.
    const std::size_t n = sample.inks.size();
    constexpr double unreached = std::numeric_limits<double>::max();
    std::vector<double> best(std::size_t{1} << n, unreached);
    std::vector<std::uint8_t> last(best.size());
    std::vector<double> away(n * n);
    for (std::size_t i = 0; i < n; ++i) {
        for (std::size_t j = 0; j < n; ++j) {
            away[i * n + j] = difference(sample.inks[i], palette[j]);
        }
    }
    best[0] = 0;
    for (std::size_t set = 0; set + 1 < best.size(); ++set) {
        const auto ink = static_cast<std::size_t>(__builtin_popcountll(set));
        for (std::size_t j = 0; j < n; ++j) {
            const std::size_t with = set | std::size_t{1} << j;
            if (with == set || best[set] + away[ink * n + j] >= best[with]) continue;
            best[with] = best[set] + away[ink * n + j];
            last[with] = static_cast<std::uint8_t>(j);
        }
    }
    std::vector<double> errors;
    std::size_t set = best.size() - 1;
    for (std::size_t ink = n; ink-- > 0;) {
        if (sample.shares[ink] > 0.01) errors.push_back(away[ink * n + last[set]]);
        set &= ~(std::size_t{1} << last[set]);
    }
    std::reverse(errors.begin(), errors.end());  // found from the last ink on
    return errors;
}

void StrokeTally::add(const StrokeTally& other) {
    pixels += other.pixels;
    kept += other.kept;
    strokes += other.strokes;
    connected += other.connected;
}

StrokeTally tally_strokes(const Sample& sample, std::span<const std::uint8_t> got_inks) {
    const Grid grid = grid_of(sample);
    std::map<std::uint16_t, std::vector<int>> strokes;
    for (std::size_t at = 0; at < sample.strokes.size(); ++at) {
        if (sample.strokes[at] != 0) strokes[sample.strokes[at]].push_back(static_cast<int>(at));
    }
    StrokeTally tally;
    for (const auto& [stroke, pixels] : strokes) {
        // What was drawn over and came apart is no stroke any more, nor is a rest of one.
        if (pixels.size() < 16 || !one_component(grid, pixels)) continue;
        const std::uint8_t ink = sample.truth[static_cast<std::size_t>(pixels.front())];
        std::vector<int> got;
        for (const int at : pixels) {
            tally.pixels += 1;
            if (got_inks[static_cast<std::size_t>(at)] == ink) tally.kept += 1;
            grid.any_around(at, [&](int near) {
                if (got_inks[static_cast<std::size_t>(near)] == ink) got.push_back(near);
                return false;
            });
        }
        std::sort(got.begin(), got.end());
        got.erase(std::unique(got.begin(), got.end()), got.end());
        ++tally.strokes;
        if (covered(grid, pixels, got)) ++tally.connected;
    }
    return tally;
}

}  // namespace tincture::corpus
