#include "label/refit.h"

#include <algorithm>
#include <array>
#include <cstdint>

namespace tincture {
namespace {

// Tuned on drawn posters (seeds below 1000 of tests/corpus).
constexpr float border_price = 1.2F;                     // between neighbours side by side
constexpr float corner_price = 0.84F;                    // between neighbours across a corner
constexpr std::array<float, 4> rise = {0, 0.65F, 1, 1};  // of the price, pass by pass
constexpr float least_gain = 1e-3F;
constexpr int stroke_rounds = 2;
constexpr int most_passes = 4;  // after each of them
constexpr int window = BlurFit::window;
constexpr std::size_t all_colours_up_to = 32;

// Neighbours in a map of some width.
struct Neighbours {
    explicit Neighbours(int width) {
        std::size_t n = 0;
        for (int y = -1; y <= 1; ++y) {
            for (int x = -1; x <= 1; ++x) {
                if (x == 0 && y == 0) continue;
                step[n] = std::ptrdiff_t{y} * width + x;
                price[n++] = x != 0 && y != 0 ? corner_price : border_price;
            }
        }
    }
    std::array<std::ptrdiff_t, 8> step{};
    std::array<float, 8> price{};
};

class Refit {
  public:
    Refit(const std::vector<Mixed>& palette, EdgeBand& band, BlurFit& fit)
        : palette_(palette), band_(band), fit_(fit), around_(band.width) {}

    void run() {
        for (const float part : rise) {
            fit_.touch_all();
            if (!pass_over_pixels(part) && part >= 1) break;
        }
        for (int round = 0; round < stroke_rounds; ++round) {
            if (!pass_over_strokes()) break;
            for (int i = 0; i < most_passes && pass_over_pixels(1); ++i) {
            }
        }
    }

  private:
    // Calls body(label) for the labels that a pixel may get: all of a small palette, those in the
    // 5 x 5 around it of a large one.
    template <typename Body>
    void for_candidates(std::size_t i, const Body& body) const {
        if (palette_.size() <= all_colours_up_to) {
            for (std::size_t m = 0; m < palette_.size(); ++m) body(static_cast<std::uint8_t>(m));
            return;
        }
        std::array<bool, 256> seen{};
        fit_.for_square(i, 2, [&](std::size_t q) {
            const std::uint8_t l = band_.label[q];
            if (l == band_.transparent || seen[l]) return;
            seen[l] = true;
            body(l);
        });
    }

    bool pass_over_pixels(float price) {
        bool changed = false;
        std::array<float, 256> same{};  // price saved by having the label of neighbours
        for (const std::size_t i : fit_.active()) {
            if (!fit_.take_touched(i)) continue;
            const Pull pull = fit_.pull_at(i);
            const std::uint8_t now = band_.label[i];
            for (std::size_t n = 0; n < 8; ++n) {
                same[band_.label[moved(i, around_.step[n])]] += price * around_.price[n];
            }
            std::uint8_t best = now;
            float least = -least_gain;
            for_candidates(i, [&](std::uint8_t m) {
                if (m == now) return;
                const float cost = pull.cost(palette_[m] - palette_[now]) + same[now] - same[m];
                if (cost >= least) return;
                least = cost;
                best = m;
            });
            for (std::size_t n = 0; n < 8; ++n) same[band_.label[moved(i, around_.step[n])]] = 0;
            if (best == now) continue;
            fit_.relabel(i, best);
            changed = true;
        }
        return changed;
    }

    [[nodiscard]] bool is_core(std::size_t i) const {
        return std::all_of(around_.step.begin(), around_.step.end(), [&](std::ptrdiff_t step) {
            return band_.label[moved(i, step)] == band_.label[i];
        });
    }

    // The pixels of one label that hang together with `middle` in the window around it; empty
    // where they belong to something thicker than a stroke.
    struct Piece {
        std::array<std::uint8_t, window * window> inside{};
        std::vector<std::size_t> places;  // in the window
    };
    [[nodiscard]] bool find_piece(std::size_t middle, Piece& piece) const {
        piece.inside.fill(0);
        piece.places.clear();
        constexpr int centre = window / 2;
        piece.places.push_back(centre * window + centre);
        piece.inside[piece.places[0]] = 1;
        for (std::size_t next = 0; next < piece.places.size(); ++next) {
            const int px = static_cast<int>(piece.places[next]) % window;
            const int py = static_cast<int>(piece.places[next]) / window;
            if (is_core(pixel_of(middle, piece.places[next]))) return false;
            for (int y = std::max(py - 1, 0); y <= std::min(py + 1, window - 1); ++y) {
                for (int x = std::max(px - 1, 0); x <= std::min(px + 1, window - 1); ++x) {
                    const auto place = static_cast<std::size_t>(y * window + x);
                    if (piece.inside[place] != 0) continue;
                    if (band_.label[pixel_of(middle, place)] != band_.label[middle]) continue;
                    piece.inside[place] = 1;
                    piece.places.push_back(place);
                }
            }
        }
        return true;
    }

    [[nodiscard]] std::size_t pixel_of(std::size_t middle, std::size_t place) const {
        const int x = static_cast<int>(place) % window - window / 2;
        const int y = static_cast<int>(place) / window - window / 2;
        return moved(middle, std::ptrdiff_t{y} * band_.width + x);
    }

    bool pass_over_strokes() {
        bool changed = false;
        Piece piece;
        for (const std::size_t i : fit_.active()) {
            // Every other pixel is enough: a piece is found from each of its own.
            if ((i + i / static_cast<std::size_t>(band_.width)) % 2 == 1) continue;
            if (is_core(i) || !find_piece(i, piece)) continue;
            changed |= relabel_piece(i, piece);
        }
        return changed;
    }

    bool relabel_piece(std::size_t middle, const Piece& piece) {
        std::array<float, 256> same{};
        for (const std::size_t place : piece.places) {
            const std::size_t q = pixel_of(middle, place);
            if (!fit_.is_weighed(q)) return false;
            for (std::size_t n = 0; n < 8; ++n) {
                same[band_.label[moved(q, around_.step[n])]] += around_.price[n];
            }
        }
        const std::uint8_t now = band_.label[middle];
        // Borders inside the piece stay none: only those to the same label outside it count.
        float own = same[now];
        for (const std::size_t place : piece.places) {
            own -= inner_price(place, piece);
        }
        same[now] = own;
        const Pull pull = fit_.pull_of(middle, piece.places);
        std::uint8_t best = now;
        float least = -least_gain;
        for_candidates(middle, [&](std::uint8_t m) {
            if (m == now) return;
            const float cost = pull.cost(palette_[m] - palette_[now]) + same[now] - same[m];
            if (cost >= least) return;
            least = cost;
            best = m;
        });
        if (best == now) return false;
        for (const std::size_t place : piece.places) fit_.relabel(pixel_of(middle, place), best);
        return true;
    }

    // The price of the borders between a place and the others of its piece, were there any.
    [[nodiscard]] static float inner_price(std::size_t place, const Piece& piece) {
        const int px = static_cast<int>(place) % window;
        const int py = static_cast<int>(place) / window;
        float sum = 0;
        for (int y = std::max(py - 1, 0); y <= std::min(py + 1, window - 1); ++y) {
            for (int x = std::max(px - 1, 0); x <= std::min(px + 1, window - 1); ++x) {
                if ((x == px && y == py) ||
                    piece.inside[static_cast<std::size_t>(y * window + x)] == 0)
                    continue;
                sum += x != px && y != py ? corner_price : border_price;
            }
        }
        return sum;
    }

    const std::vector<Mixed>& palette_;
    EdgeBand& band_;
    BlurFit& fit_;
    Neighbours around_;
};

}  // namespace

void refit_labels(const std::vector<Mixed>& palette, const EdgeBlur& blur, float noise,
                  EdgeBand& band, BlurFitMemory& memory) {
    BlurFit fit(palette, blur, noise, band, memory);
    Refit(palette, band, fit).run();
}

}  // namespace tincture
