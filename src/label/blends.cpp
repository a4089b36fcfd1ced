#include "label/blends.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdint>
#include <limits>
#include <utility>

namespace tincture {
namespace {

// Tuned on drawn posters (seeds below 1000 of tests/corpus).
constexpr int reach = 3;                   // flat colours are looked for this far away, in pixels
constexpr float slack = 3;                 // of a colour from its explanation
constexpr float slack_per_noise = 1.5F;    // more, a unit of noise
constexpr float slack_per_length = 0.06F;  // more, a unit of the two colours' distance
constexpr float dilution_cost = 0.1F;      // a stroke that is a weak mixture is less likely
constexpr float highest_cost = 60;         // of one pixel: a few wild ones have no say
constexpr int rounds = 3;                  // in which sure colours spread by a pixel
constexpr float stroke_from = 0.45F;       // part of the stroke's colour in a pixel of it

constexpr std::array<int, 8> dx = {1, 1, 0, -1, -1, -1, 0, 1};
constexpr std::array<int, 8> dy = {0, 1, 1, 1, 0, -1, -1, -1};

struct Fit {
    float away;  // from the line
    float part;  // of the second colour, 0..1
};

Fit fit(const Mixed& one, const Mixed& two, const Mixed& colour) {
    const Mixed line = two - one;
    const float squared = dot(line, line);
    const Mixed offset = colour - one;
    const float part = squared > 0 ? std::clamp(dot(offset, line) / squared, 0.0F, 1.0F) : 0.0F;
    const Mixed rest = {offset.y - line.y * part, offset.u - line.u * part,
                        offset.v - line.v * part};
    return {std::sqrt(dot(rest, rest)), part};
}

float distance(const Mixed& one, const Mixed& two) {
    const Mixed d = one - two;
    return std::sqrt(dot(d, d));
}

// Labels that are flat near a pixel.
struct Flats {
    std::array<std::uint8_t, 8> label{};
    std::size_t count = 0;

    void add(std::uint8_t l) {
        const auto end = label.begin() + static_cast<std::ptrdiff_t>(count);
        if (std::find(label.begin(), end, l) == end) label[count++] = l;
    }
};

Flats flats_around(const EdgeBand& band, std::size_t i) {
    Flats flats;
    for (std::size_t d = 0; d < dx.size(); ++d) {
        const std::ptrdiff_t step = std::ptrdiff_t{dy[d]} * band.width + dx[d];
        std::size_t q = i;
        for (int r = 1; r <= reach; ++r) {
            q += static_cast<std::size_t>(step);
            if (band.core[q] == 0) continue;
            if (band.label[q] != band.transparent) flats.add(band.label[q]);
            break;
        }
    }
    return flats;
}

constexpr std::uint32_t none = 0xFFFF'FFFF;

class Settling {
  public:
    Settling(const std::vector<Mixed>& palette, float noise, EdgeBand& band)
        : palette_(palette),
          slack_(slack + slack_per_noise * noise),
          noisy_(noise > 0),
          band_(band) {}

    void run() {
        settled_.reserve(band_.edges.size());
        unexplained_.assign(band_.edges.size(), none);
        for (std::size_t e = 0; e < band_.edges.size(); ++e) settled_.push_back(explained(e));
        for (int round = 0; round < rounds; ++round) explain_by_neighbours();
        costs_.assign(flats_.size() * palette_.size(), highest_cost);
        for_unexplained([&](std::size_t e) { find_stroke_costs(e); });
        std::vector<std::uint8_t> labels = settled_;
        for_unexplained([&](std::size_t e) { labels[e] = stroke_or_flat(e); });
        settled_ = labels;
        for_unexplained([&](std::size_t e) { labels[e] = edge_of_stroke(e); });
        for (std::size_t e = 0; e < settled_.size(); ++e) {
            band_.label[band_.edges[e]] =
                unexplained_[e] == none ? beside_stroke(labels, e) : labels[e];
        }
    }

  private:
    template <typename Body>
    void for_unexplained(const Body& body) const {
        for (std::size_t e = 0; e < unexplained_.size(); ++e) {
            if (unexplained_[e] != none) body(e);
        }
    }

    struct Explanation {
        float excess = std::numeric_limits<float>::infinity();  // above 0: there is none
        std::uint8_t label = 0;

        void offer(float other_excess, std::uint8_t other) {
            if (other_excess >= excess) return;
            excess = other_excess;
            label = other;
        }
    };

    [[nodiscard]] Explanation explain(const Flats& flats, const Mixed& colour) const {
        Explanation best;
        for (std::size_t f = 0; f < flats.count; ++f) {
            const std::uint8_t one = flats.label[f];
            best.offer(distance(palette_[one], colour) - slack_, one);
            for (std::size_t g = f + 1; g < flats.count; ++g) {
                const std::uint8_t two = flats.label[g];
                const Fit mixture = fit(palette_[one], palette_[two], colour);
                const float length = distance(palette_[one], palette_[two]);
                best.offer(mixture.away - slack_ - slack_per_length * length,
                           mixture.part < 0.5F ? one : two);
            }
        }
        return best;
    }

    // The label of an edge that the flat colours around it give, well or badly.
    std::uint8_t explained(std::size_t e) {
        const Mixed colour = band_.colour(band_.edges[e]);
        const std::uint8_t before = band_.label[band_.edges[e]];
        const Flats flats = flats_around(band_, band_.edges[e]);
        const Explanation best = explain(flats, colour);
        if (flats.count > 0 && best.excess <= 0) return best.label;
        if (palette_.size() > most_colours_for_strokes) return before;
        unexplained_[e] = static_cast<std::uint32_t>(flats_.size());
        flats_.push_back(flats);
        return flats.count > 0 ? best.label : before;
    }

    // Explained pixels that are sure of their colour explain what is beside them.
    void explain_by_neighbours() {
        std::vector<std::pair<std::size_t, std::uint8_t>> found;
        for (std::size_t e = 0; e < settled_.size(); ++e) {
            if (unexplained_[e] == none) continue;
            Flats& flats = flats_[unexplained_[e]];
            const std::size_t before = flats.count;
            for_edges_around(band_.edges[e], 1, [&](std::uint32_t other) {
                if (unexplained_[other] != none || flats.count == flats.label.size()) return;
                const Mixed& ink = palette_[settled_[other]];
                if (distance(ink, band_.colour(band_.edges[other])) <= slack_) {
                    flats.add(settled_[other]);
                }
            });
            if (flats.count == before) continue;
            const Explanation best = explain(flats, band_.colour(band_.edges[e]));
            if (best.excess <= 0) found.emplace_back(e, best.label);
        }
        for (const auto& [e, label] : found) {
            unexplained_[e] = none;
            settled_[e] = label;
        }
    }

    // Calls body(edge) for the edges in a square around a pixel.
    template <typename Body>
    void for_edges_around(std::size_t pixel, int radius, const Body& body) const {
        for (int y = -radius; y <= radius; ++y) {
            for (int x = -radius; x <= radius; ++x) {
                const std::ptrdiff_t step = std::ptrdiff_t{y} * band_.width + x;
                const std::uint32_t e = band_.edge_at(pixel + static_cast<std::size_t>(step));
                if (e != EdgeBand::no_edge) body(e);
            }
        }
    }

    // How badly each label fits as that of a stroke on one of the flat colours.
    void find_stroke_costs(std::size_t e) {
        const Mixed colour = band_.colour(band_.edges[e]);
        const Flats& flats = flats_[unexplained_[e]];
        float* cost = &costs_[unexplained_[e] * palette_.size()];
        for (std::size_t m = 0; m < palette_.size(); ++m) {
            if (flats.count == 0) cost[m] = std::min(cost[m], distance(palette_[m], colour));
            for (std::size_t f = 0; f < flats.count; ++f) {
                const Mixed& ground = palette_[flats.label[f]];
                const Fit mixture = fit(ground, palette_[m], colour);
                const float length = distance(ground, palette_[m]);
                cost[m] =
                    std::min(cost[m], mixture.away + dilution_cost * (1 - mixture.part) * length);
            }
        }
    }

    [[nodiscard]] std::uint8_t stroke_or_flat(std::size_t e) const {
        const Flats& flats = flats_[unexplained_[e]];
        if (flats.count == 0) return settled_[e];
        const std::size_t pixel = band_.edges[e];
        std::array<float, most_colours_for_strokes> sum{};
        for_edges_around(pixel, 2, [&](std::uint32_t other) {
            if (unexplained_[other] == none) return;
            const float* cost = &costs_[unexplained_[other] * palette_.size()];
            for (std::size_t m = 0; m < palette_.size(); ++m) sum[m] += cost[m];
        });
        const auto sums_end = sum.begin() + static_cast<std::ptrdiff_t>(palette_.size());
        const auto stroke =
            static_cast<std::uint8_t>(std::min_element(sum.begin(), sums_end) - sum.begin());
        const Mixed colour = band_.colour(pixel);
        const auto flats_end = flats.label.begin() + static_cast<std::ptrdiff_t>(flats.count);
        const std::uint8_t flat = *std::min_element(
            flats.label.begin(), flats_end, [&](std::uint8_t one, std::uint8_t two) {
                return distance(palette_[one], colour) < distance(palette_[two], colour);
            });
        if (flat == stroke || is_lone_noise(e, flat)) return flat;
        return fit(palette_[flat], palette_[stroke], colour).part < stroke_from ? flat : stroke;
    }

    // A pixel that is alone in being somewhat off, where there is noise.
    [[nodiscard]] bool is_lone_noise(std::size_t e, std::uint8_t flat) const {
        const std::size_t pixel = band_.edges[e];
        if (!noisy_ || distance(palette_[flat], band_.colour(pixel)) > 2 * slack_) return false;
        int others = 0;
        for_edges_around(pixel, 1, [&](std::uint32_t other) {
            others += other != e && unexplained_[other] != none ? 1 : 0;
        });
        return others == 0;
    }

    // A stroke has edges as well: a pixel of another label than the sure one beside it may be a
    // blend of that and the ground.
    [[nodiscard]] std::uint8_t edge_of_stroke(std::size_t e) const {
        const Mixed colour = band_.colour(band_.edges[e]);
        const Flats& flats = flats_[unexplained_[e]];
        Explanation best{0, settled_[e]};
        for_edges_around(band_.edges[e], 1, [&](std::uint32_t other) {
            const std::uint8_t stroke = settled_[other];
            if (unexplained_[other] == none || stroke == settled_[e]) return;
            const Mixed& ink = palette_[stroke];
            if (distance(ink, band_.colour(band_.edges[other])) > slack_) return;
            for (std::size_t f = 0; f < flats.count; ++f) {
                const Mixed& ground = palette_[flats.label[f]];
                const Fit mixture = fit(ground, ink, colour);
                best.offer(mixture.away - slack_ - slack_per_length * distance(ground, ink),
                           mixture.part < stroke_from ? flats.label[f] : stroke);
            }
        });
        return best.label;
    }

    // An explained pixel beside a stroke may be more of the stroke than of what explains it.
    [[nodiscard]] std::uint8_t beside_stroke(const std::vector<std::uint8_t>& labels,
                                             std::size_t e) const {
        const Mixed colour = band_.colour(band_.edges[e]);
        Explanation best{distance(palette_[labels[e]], colour), labels[e]};
        for_edges_around(band_.edges[e], 1, [&](std::uint32_t other) {
            if (unexplained_[other] == none) return;
            best.offer(distance(palette_[labels[other]], colour), labels[other]);
        });
        return best.label;
    }

    const std::vector<Mixed>& palette_;
    float slack_;
    bool noisy_;
    EdgeBand& band_;
    std::vector<std::uint8_t> settled_;       // of each edge
    std::vector<std::uint32_t> unexplained_;  // of each edge its number among these, or none
    std::vector<Flats> flats_;                // of the unexplained
    std::vector<float> costs_;                // of the unexplained, palette_.size() each
};

}  // namespace

void settle_blends(const std::vector<Mixed>& palette, float noise, EdgeBand& band) {
    Settling(palette, noise, band).run();
}

}  // namespace tincture
