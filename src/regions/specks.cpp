#include "regions/specks.h"

#include <algorithm>
#include <array>
#include <cstddef>
#include <tuple>
#include <vector>

#include "colour/delta_e.h"
#include "regions/components.h"
#include "regions/runs.h"
#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

constexpr std::uint32_t none = 0xFFFF'FFFF;
constexpr int none_yet = -1;
constexpr std::size_t specks_at_once = 4096;

struct SpeckRun {
    std::uint32_t speck;
    std::uint32_t run;
    std::uint32_t row;
};

class Tidying {
  public:
    Tidying(const Runs& runs, const Palette& palette, std::uint32_t smallest)
        : runs_(runs), palette_(palette), transparent_(palette.count) {
        const std::vector<std::uint32_t> component =
            find_components(runs, Connectivity::sides_and_corners);
        collect(component, component_areas(runs, component), smallest);
    }

    void run() {
        std::vector<std::uint32_t> waiting(specks());
        for (std::uint32_t s = 0; s < specks(); ++s) waiting[s] = s;
        join_in_rounds(waiting);
        join_islands();
    }

    // Writes the labels that changed; returns to how many pixels.
    std::uint64_t write(std::uint8_t* labels) const {
        std::uint64_t changed = 0;
        for (const SpeckRun& s : speck_runs_) {
            if (label_[s.speck] == runs_.label[s.run]) continue;
            const std::uint32_t begin = runs_.begin[s.run];
            const std::uint32_t n = runs_.end(s.run, s.row) - begin;
            std::fill_n(labels + std::size_t{s.row} * runs_.width + begin, n, label_[s.speck]);
            changed += n;
        }
        return changed;
    }

  private:
    [[nodiscard]] std::uint32_t specks() const { return static_cast<std::uint32_t>(area_.size()); }

    // Numbers the specks from the top and lists their runs, speck by speck.
    void collect(const std::vector<std::uint32_t>& component,
                 const std::vector<std::uint64_t>& area, std::uint32_t smallest) {
        speck_of_.assign(runs_.size(), none);
        std::vector<SpeckRun> from_the_top;
        for (std::uint32_t y = 0; y < runs_.rows(); ++y) {
            for (std::uint32_t r = runs_.row_start[y]; r < runs_.row_start[y + 1]; ++r) {
                const std::uint32_t first = component[r];
                if (runs_.label[r] == transparent_ || area[first] >= smallest) continue;
                if (first == r) {
                    speck_of_[r] = specks();
                    area_.push_back(area[r]);
                    label_.push_back(runs_.label[r]);
                } else {
                    speck_of_[r] = speck_of_[first];
                }
                from_the_top.push_back({speck_of_[r], r, y});
            }
        }
        start_.assign(std::size_t{specks()} + 1, 0);
        for (const SpeckRun& s : from_the_top) ++start_[s.speck + 1];
        for (std::size_t s = 1; s < start_.size(); ++s) start_[s] += start_[s - 1];
        speck_runs_.resize(from_the_top.size());
        std::vector<std::size_t> next(start_.begin(), start_.end() - 1);
        for (const SpeckRun& s : from_the_top) speck_runs_[next[s.speck]++] = s;
        settled_.assign(specks(), 0);
    }

    // Calls body(run, shared sides) for what lies beside the runs of a speck, some of them its own.
    template <typename Body>
    void for_neighbours(std::uint32_t speck, const Body& body) const {
        for (std::size_t i = start_[speck]; i < start_[speck + 1]; ++i) {
            const auto [unused, r, y] = speck_runs_[i];
            const std::uint32_t begin = runs_.begin[r];
            const std::uint32_t end = runs_.end(r, y);
            if (r > runs_.row_start[y]) body(r - 1, 1);
            if (r + 1 < runs_.row_start[y + 1]) body(r + 1, 1);
            if (y > 0) for_runs_over(runs_, y - 1, begin, end, body);
            if (y + 1 < runs_.rows()) for_runs_over(runs_, y + 1, begin, end, body);
        }
    }

    // The label that a speck joins, that of a swatch; none_yet while nothing beside it has settled.
    [[nodiscard]] int choice(std::uint32_t speck) const {
        std::array<std::uint64_t, 256> border;  // of the swatches and of what is transparent
        std::fill_n(border.begin(), std::min<std::size_t>(palette_.swatches.size() + 1, 256), 0U);
        for_neighbours(speck, [&](std::uint32_t r, std::uint32_t sides) {
            const std::uint32_t other = speck_of_[r];
            if (other == none)
                border[runs_.label[r]] += sides;
            else if (settled_[other] != 0)
                border[label_[other]] += sides;
        });
        int best = none_yet;
        for (std::size_t l = 0; l < palette_.swatches.size(); ++l) {
            if (border[l] == 0) continue;
            const auto label = static_cast<int>(l);
            if (best == none_yet || border[l] > border[static_cast<std::size_t>(best)] ||
                (border[l] == border[static_cast<std::size_t>(best)] &&
                 away(speck, label) < away(speck, best))) {
                best = label;
            }
        }
        return best;
    }

    [[nodiscard]] double away(std::uint32_t speck, int label) const {
        return delta_e_76(palette_.swatches[label_[speck]].lab,
                          palette_.swatches[static_cast<std::size_t>(label)].lab);
    }

    // Settles specks round by round: all of a round look at what had settled before it.
    void join_in_rounds(std::vector<std::uint32_t> waiting) {
        std::vector<int> joined;
        while (!waiting.empty()) {
            joined.resize(waiting.size());
            parallel_for(
                (waiting.size() + specks_at_once - 1) / specks_at_once, [&](std::size_t block) {
                    throw_if_cancelled();
                    const std::size_t first = block * specks_at_once;
                    const std::size_t end = std::min(first + specks_at_once, waiting.size());
                    for (std::size_t i = first; i < end; ++i) {
                        joined[i] = choice(waiting[i]);
                    }
                });
            std::vector<std::uint32_t> next;
            for (std::size_t i = 0; i < waiting.size(); ++i) {
                if (joined[i] == none_yet) continue;
                label_[waiting[i]] = static_cast<std::uint8_t>(joined[i]);
                settled_[waiting[i]] = 1;
            }
            for (std::size_t i = 0; i < waiting.size(); ++i) {
                if (joined[i] != none_yet) add_waiting_neighbours(waiting[i], next);
            }
            std::sort(next.begin(), next.end());
            next.erase(std::unique(next.begin(), next.end()), next.end());
            waiting.swap(next);
        }
    }

    void add_waiting_neighbours(std::uint32_t speck, std::vector<std::uint32_t>& next) const {
        for_neighbours(speck, [&](std::uint32_t r, std::uint32_t) {
            const std::uint32_t other = speck_of_[r];
            if (other != none && settled_[other] == 0) next.push_back(other);
        });
    }

    // What hangs together in specks alone.
    void join_islands() {
        std::vector<std::uint32_t> left;
        for (std::uint32_t s = 0; s < specks(); ++s) {
            if (settled_[s] == 0) left.push_back(s);
        }
        std::sort(left.begin(), left.end(), [&](std::uint32_t a, std::uint32_t b) {
            return std::tuple(~area_[a], label_[a], a) < std::tuple(~area_[b], label_[b], b);
        });
        for (const std::uint32_t s : left) {
            if (settled_[s] != 0) continue;
            settled_[s] = 1;
            std::vector<std::uint32_t> waiting;
            add_waiting_neighbours(s, waiting);
            std::sort(waiting.begin(), waiting.end());
            waiting.erase(std::unique(waiting.begin(), waiting.end()), waiting.end());
            join_in_rounds(std::move(waiting));
        }
    }

    const Runs& runs_;
    const Palette& palette_;
    int transparent_;
    std::vector<std::uint32_t> speck_of_;  // each run's, or none
    std::vector<SpeckRun> speck_runs_;
    std::vector<std::size_t> start_;  // of each speck in speck_runs_
    std::vector<std::uint64_t> area_;
    std::vector<std::uint8_t> label_;  // of each speck: its own until it settles
    std::vector<std::uint8_t> settled_;
};

}  // namespace

std::uint64_t tidy_specks(Samples<std::uint8_t>& labels, std::uint32_t width, std::uint32_t height,
                          const Palette& palette, std::uint32_t smallest) {
    if (smallest < 2 || width == 0 || height == 0) return 0;
    const Runs runs = find_runs(labels.data(), width, height);
    Tidying tidying(runs, palette, smallest);
    tidying.run();
    return tidying.write(labels.data());
}

}  // namespace tincture
