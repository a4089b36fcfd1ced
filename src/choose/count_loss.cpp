#include "choose/count_loss.h"

#include <algorithm>

#include "colour/delta_e.h"

namespace tincture {
namespace {

// Colours that are still without a partner, and how they find one.
class Partners {
  public:
    Partners(const WrittenColours& more, const WrittenColours& fewer)
        : more_(more), fewer_(fewer), had_(more.rgb.size()), has_(fewer.rgb.size()) {}

    void join_same() {
        for (std::size_t i = 0; i < had_.size(); ++i) {
            for (std::size_t j = 0; j < has_.size(); ++j) {
                if (more_.rgb[i] == fewer_.rgb[j]) join(i, j);
            }
        }
    }

    void join_by_pixels(const Crossing& crossing) {
        struct Shared {
            std::uint64_t pixels;
            double distance;
            std::size_t i, j;
        };
        std::vector<Shared> all;
        for (std::size_t i = 0; i < had_.size(); ++i) {
            for (std::size_t j = 0; j < has_.size(); ++j) {
                const std::uint64_t pixels = crossing.at(i, j).pixels;
                if (pixels > 0) all.push_back({pixels, distance(i, j), i, j});
            }
        }
        std::stable_sort(all.begin(), all.end(), [](const Shared& one, const Shared& two) {
            return one.pixels != two.pixels ? one.pixels > two.pixels : one.distance < two.distance;
        });
        for (const Shared& shared : all) join(shared.i, shared.j);
    }

    // Each colour of the smaller palette that is left takes the nearest that is left.
    void join_by_distance() {
        for (std::size_t j = 0; j < has_.size(); ++j) {
            if (has_[j]) continue;
            std::size_t nearest = had_.size();
            for (std::size_t i = 0; i < had_.size(); ++i) {
                if (had_[i]) continue;
                if (nearest == had_.size() || distance(i, j) < distance(nearest, j)) nearest = i;
            }
            join(nearest, j);
        }
    }

    [[nodiscard]] std::size_t without() const {
        return static_cast<std::size_t>(std::find(had_.begin(), had_.end(), false) - had_.begin());
    }

    [[nodiscard]] double distance(std::size_t i, std::size_t j) const {
        return delta_e_76(more_.lab[i], fewer_.lab[j]);
    }

  private:
    void join(std::size_t i, std::size_t j) {
        if (had_[i] || has_[j]) return;
        had_[i] = has_[j] = true;
    }

    const WrittenColours& more_;
    const WrittenColours& fewer_;
    std::vector<bool> had_, has_;  // a partner
};

}  // namespace

LostColour lost_colour(const WrittenColours& more, const WrittenColours& fewer,
                       const Crossing& crossing) {
    Partners partners(more, fewer);
    partners.join_same();
    partners.join_by_pixels(crossing);
    partners.join_by_distance();

    LostColour lost;
    lost.colour = partners.without();
    lost.into_pixels = crossing.at(lost.colour, 0).pixels;
    for (std::size_t j = 0; j < crossing.into; ++j) {
        const PixelCost& there = crossing.at(lost.colour, j);
        lost.cost.add(there);
        const bool nearer =
            partners.distance(lost.colour, j) < partners.distance(lost.colour, lost.into);
        if (there.pixels < lost.into_pixels || (there.pixels == lost.into_pixels && !nearer)) {
            continue;
        }
        lost.into = j;
        lost.into_pixels = there.pixels;
    }
    return lost;
}

}  // namespace tincture
