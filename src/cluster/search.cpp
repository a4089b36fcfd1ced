#include "cluster/search.h"

#include <algorithm>
#include <cmath>

#include "cluster/kmeans.h"
#include "cluster/moves.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// All figures here were found by trial on photograph-like pictures, against the best of ten random
// starts.
constexpr LloydLimits settled = {20, 1e-3};
constexpr int exchange_rounds = 4;
constexpr std::size_t exchange_trials = 6;  // pairs of moves that settle
constexpr double exchange_estimate = 0.02;  // of the objective: pairs that look worse do not
constexpr int exchange_up_to = 40;          // colours: with more, none matters much
constexpr double worth_a_look = 1.005;      // times the objective: where exchanges may yet help
constexpr double the_same = 1e-5;           // of the objective

// The best solution of a count so far, and where it leads to.
struct Place {
    Solution solution;
    Moves moves;
};

// A centre that goes and a split, which together keep the count.
struct Exchange {
    const Move* without;
    const Move* with;
    double change;  // of the objective, if the two do not touch each other
};

std::vector<Exchange> exchanges(const Place& place) {
    std::vector<Exchange> found;
    for (const Move& without : place.moves.without) {
        for (const Move& with : place.moves.with) {
            const double change = without.change + with.change;
            if (without.cluster == with.cluster) continue;
            if (change < exchange_estimate * place.solution.objective) {
                found.push_back({&without, &with, change});
            }
        }
    }
    std::stable_sort(found.begin(), found.end(), [](const Exchange& one, const Exchange& two) {
        return one.change < two.change;
    });
    if (found.size() > exchange_trials) found.resize(exchange_trials);
    return found;
}

// Settles the most promising exchanges and takes the best; false where none lowers the objective.
bool exchange(const WeightedPoints& points, Place& place, int kept) {
    const std::vector<Exchange> ways = exchanges(place);
    if (ways.empty()) return false;
    std::vector<Solution> trials;
    for (const Exchange& way : ways) trials.push_back(way.with->solution);
    parallel_for(ways.size(), [&](std::size_t i) {
        drop_centre(trials[i], ways[i].without->cluster);
        settle(points, trials[i], kept, settled);
    });
    const auto best = std::min_element(
        trials.begin(), trials.end(),
        [](const Solution& one, const Solution& two) { return one.objective < two.objective; });
    if (best->objective >= place.solution.objective * (1 - the_same)) return false;
    place.solution = std::move(*best);
    return true;
}

// A settled solution, bettered by exchanges as long as these help, and its moves.
Place explore(const WeightedPoints& points, Solution solution, int kept) {
    Place place{std::move(solution), {}};
    place.moves = moves_of(points, place.solution, kept);
    if (place.solution.centres.count > exchange_up_to) return place;
    for (int round = 0; round < exchange_rounds && exchange(points, place, kept); ++round) {
        place.moves = moves_of(points, place.solution, kept);
    }
    return place;
}

Place first_place(const WeightedPoints& points, const Centres& kept_centres) {
    Centres centres = kept_centres;
    if (centres.count == 0) {
        centres = {points.dims, 1, std::vector<float>(static_cast<std::size_t>(points.dims), 0.0F)};
    }
    Solution solution{centres, Partition(points, centres.count), 0};
    settle(points, solution, kept_centres.count, {1, 0});
    return explore(points, std::move(solution), kept_centres.count);
}

const Solution& best_of(const std::vector<Move>& moves) {
    return std::min_element(moves.begin(), moves.end(),
                            [](const Move& one, const Move& two) {
                                return one.solution.objective < two.solution.objective;
                            })
        ->solution;
}

// What the best of a neighbour's moves leads to takes the place of what is there, where it is
// better.
bool improve(const WeightedPoints& points, Place& place, const std::vector<Move>& moves, int kept) {
    if (moves.empty()) return false;
    Solution start = best_of(moves);
    settle(points, start, kept, settled);
    const double current = place.solution.objective;
    if (start.objective > current * worth_a_look) return false;
    if (std::abs(start.objective - current) <= current * the_same) return false;
    Place other = explore(points, std::move(start), kept);
    if (other.solution.objective >= current * (1 - the_same)) return false;
    place = std::move(other);
    return true;
}

}  // namespace

std::vector<Centres> search_counts(const WeightedPoints& points, const Centres& kept_centres,
                                   int max_count, const std::function<void(double)>& progress) {
    const int kept = kept_centres.count;
    std::vector<Place> found;
    found.push_back(first_place(points, kept_centres));
    while (found.back().solution.centres.count < max_count && !found.back().moves.with.empty()) {
        Solution next = best_of(found.back().moves.with);
        settle(points, next, kept, settled);
        found.push_back(explore(points, std::move(next), kept));
        progress(static_cast<double>(found.back().solution.centres.count) / max_count);
    }
    std::vector<bool> changed(found.size(), false);
    for (std::size_t i = found.size(); i-- > 2;) {
        changed[i - 1] = improve(points, found[i - 1], found[i].moves.without, kept);
    }
    for (std::size_t i = 2; i < found.size(); ++i) {
        if (!changed[i - 1]) continue;
        changed[i] = improve(points, found[i], found[i - 1].moves.with, kept) || changed[i];
    }
    std::vector<Centres> centres;
    for (Place& place : found) centres.push_back(std::move(place.solution.centres));
    return centres;
}

}  // namespace tincture
