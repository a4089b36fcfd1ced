#include "cluster/sweep.h"

#include <algorithm>
#include <atomic>
#include <mutex>
#include <numeric>
#include <stdexcept>

#include "cluster/kmeans.h"
#include "cluster/split.h"
#include "histogram/cells.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// The search wants many cheap passes: this many points are enough to find where centres belong, and
// the polish below puts right what they are too coarse for. All figures here were found by trial on
// photograph-like pictures, against the best of ten random starts.
constexpr std::size_t search_points = 4000;
constexpr LloydLimits search_limits = {30, 1e-4};
constexpr LloydLimits glance_limits = {4, 1e-3};
constexpr LloydLimits polish_limits = {6, 2e-4};
constexpr int exchange_rounds = 4;
constexpr std::size_t exchange_choices = 3;  // centres and splits that are paired
constexpr std::size_t exchange_ways = 6;     // pairs that are tried
constexpr double exchange_estimate = -0.2;   // of the objective: a pair that starts worse is not
constexpr double exchange_glance = 1.01;     // times the objective: after a glance likewise

// The finest cells that are no more than search_points.
WeightedPoints coarse_points(const WeightedPoints& points) {
    WeightedPoints coarse = points;
    for (double edge = 2; coarse.dims == 3 && coarse.n > search_points && edge <= 16; edge *= 1.5) {
        coarse = merge_into_cells(points, edge);
    }
    return coarse;
}

void put_row(Centres& centres, int k, const std::vector<float>& row) {
    std::copy(row.begin(), row.end(), centres.row(k));
}

void append_row(Centres& centres, const float* row) {
    centres.x.insert(centres.x.end(), row, row + centres.dims);
    ++centres.count;
}

struct BestSplit {
    int cluster = -1;
    Split split;
};
// The clusters whose split gains most, at most `wanted`, best first.
std::vector<BestSplit> best_splits(const WeightedPoints& points, const Centres& centres,
                                   const Members& members, std::size_t wanted) {
    std::vector<BestSplit> best;
    for (int k = 0; k < centres.count; ++k) {
        const auto at = static_cast<std::size_t>(k);
        // A cluster cannot gain more than its scatter.
        if (best.size() == wanted && members.scatter[at] <= best.back().split.gain) continue;
        Split split = split_cluster(points, members.index.data() + members.start[at],
                                    members.start[at + 1] - members.start[at]);
        if (split.gain <= 0) continue;
        const auto place = std::find_if(best.begin(), best.end(), [&](const BestSplit& other) {
            return split.gain > other.split.gain;
        });
        best.insert(place, BestSplit{k, std::move(split)});
        if (best.size() > wanted) best.pop_back();
    }
    return best;
}

// Puts the halves of a split in place of its cluster: one takes the cluster's row, the other goes
// to `spare`, or to a new row where that is negative. A kept centre stays; then only the half that
// lies further from it is used.
void apply_split(Centres& centres, const BestSplit& best, int kept, int spare) {
    const std::vector<float>* second = &best.split.high;
    if (best.cluster < kept) {
        const auto squared_to_kept = [&](const std::vector<float>& half) {
            float sum = 0;
            for (std::size_t d = 0; d < half.size(); ++d) {
                const float delta = half[d] - centres.row(best.cluster)[d];
                sum += delta * delta;
            }
            return sum;
        };
        if (squared_to_kept(best.split.low) > squared_to_kept(*second)) second = &best.split.low;
    } else {
        put_row(centres, best.cluster, best.split.low);
    }
    if (spare >= 0) {
        put_row(centres, spare, *second);
    } else {
        append_row(centres, second->data());
    }
}

// The free centres whose points would suffer least without them, at most `wanted`, least first.
std::vector<int> least_missed(const Members& members, int kept, std::size_t wanted) {
    std::vector<int> order(members.removal_cost.size() - static_cast<std::size_t>(kept));
    std::iota(order.begin(), order.end(), kept);
    std::stable_sort(order.begin(), order.end(), [&](int one, int two) {
        return members.removal_cost[static_cast<std::size_t>(one)] <
               members.removal_cost[static_cast<std::size_t>(two)];
    });
    if (order.size() > wanted) order.resize(wanted);
    return order;
}

// Centres of one count and their objective on the points of the search.
struct Candidate {
    Centres centres;
    double objective = 0;
};

struct Exchange {
    double estimate;  // of what it lowers the objective by, before anything settles
    int spare;        // the centre that goes
    BestSplit split;  // where it goes to
};

// Ways to take one of the few centres that are missed least and give it to one of the few clusters
// whose split gains most, the most promising first.
std::vector<Exchange> exchanges(const WeightedPoints& points, const Centres& centres, int kept,
                                double current) {
    const Members members = members_of(points, centres);
    const std::vector<int> spares = least_missed(members, kept, exchange_choices);
    const std::vector<BestSplit> splits = best_splits(points, centres, members, exchange_choices);
    std::vector<Exchange> found;
    for (const int spare : spares) {
        for (const BestSplit& split : splits) {
            if (split.cluster == spare) continue;
            const double estimate =
                split.split.gain - members.removal_cost[static_cast<std::size_t>(spare)];
            if (estimate > exchange_estimate * current) found.push_back({estimate, spare, split});
        }
    }
    std::stable_sort(found.begin(), found.end(), [](const Exchange& one, const Exchange& two) {
        return one.estimate > two.estimate;
    });
    if (found.size() > exchange_ways) found.resize(exchange_ways);
    return found;
}

// Exchanges centres as long as that lowers the objective: every promising way is glanced at, the
// best one settles.
double exchange(const WeightedPoints& points, Centres& centres, int kept, double current) {
    for (int round = 0; round < exchange_rounds; ++round) {
        const std::vector<Exchange> ways = exchanges(points, centres, kept, current);
        if (ways.empty()) break;
        std::vector<Candidate> trials(ways.size());
        parallel_for(ways.size(), [&](std::size_t i) {
            trials[i].centres = centres;
            apply_split(trials[i].centres, ways[i].split, kept, ways[i].spare);
            trials[i].objective = lloyd(points, trials[i].centres, kept, glance_limits);
        });
        Candidate& best = *std::min_element(trials.begin(), trials.end(),
                                            [](const Candidate& one, const Candidate& two) {
                                                return one.objective < two.objective;
                                            });
        if (best.objective > current * exchange_glance) break;
        best.objective = lloyd(points, best.centres, kept, search_limits);
        if (best.objective >= current * (1 - 1e-5)) break;
        centres = std::move(best.centres);
        current = best.objective;
    }
    return current;
}

// One more centre; false where no cluster can be split.
bool add_centre(const WeightedPoints& points, Centres& centres, int kept) {
    const std::vector<BestSplit> best =
        best_splits(points, centres, members_of(points, centres), 1);
    if (best.empty()) return false;
    apply_split(centres, best.front(), kept, -1);
    return true;
}

Centres mean_of(const WeightedPoints& points) {
    Centres centres{points.dims, 1,
                    std::vector<float>(static_cast<std::size_t>(points.dims), 0.0F)};
    lloyd(points, centres, 0, {1, 0});
    return centres;
}

// From a count to the next: split, let it settle, exchange.
bool step_up(const WeightedPoints& points, const Candidate& from, int kept, Candidate& to) {
    to = from;
    if (!add_centre(points, to.centres, kept)) return false;
    to.objective = lloyd(points, to.centres, kept, search_limits);
    to.objective = exchange(points, to.centres, kept, to.objective);
    return true;
}

// From a count to the one below: the centre that is missed least goes, the rest settles.
Candidate step_down(const WeightedPoints& points, const Candidate& from, int kept) {
    Candidate to = from;
    const int gone = least_missed(members_of(points, from.centres), kept, 1).front();
    const auto row = to.centres.x.begin() + gone * to.centres.dims;
    to.centres.x.erase(row, row + to.centres.dims);
    --to.centres.count;
    to.objective = lloyd(points, to.centres, kept, search_limits);
    to.objective = exchange(points, to.centres, kept, to.objective);
    return to;
}

// Centres for rising counts, found on the coarse points: once up, once down and once up again, each
// count taking the better of what it has and what its neighbour leads to.
std::vector<Candidate> search(const WeightedPoints& coarse, const SweepOptions& options,
                              const std::function<void(double)>& progress) {
    const int kept = options.kept.count;
    std::vector<Candidate> found(1);
    found[0].centres = kept > 0 ? options.kept : mean_of(coarse);
    found[0].objective = objective(coarse, found[0].centres);
    Candidate next;
    while (found.back().centres.count < options.max_count &&
           step_up(coarse, found.back(), kept, next)) {
        found.push_back(next);
        progress(0.5 * next.centres.count / options.max_count);
    }
    const auto improve = [](Candidate& current, Candidate&& other) {
        const bool better = other.objective < current.objective;
        if (better) current = std::move(other);
        return better;
    };
    for (std::size_t i = found.size(); i-- > 2;) {
        improve(found[i - 1], step_down(coarse, found[i], kept));
    }
    for (std::size_t i = 1; i < found.size(); ++i) {
        if (step_up(coarse, found[i - 1], kept, next)) improve(found[i], std::move(next));
    }
    return found;
}

// The search ends early where coarse cells run out before the points do.
void grow_to(const WeightedPoints& points, std::vector<Centres>& found,
             const SweepOptions& options) {
    const auto grow = [&](int count) {
        Centres centres = found.back();
        while (centres.count < count && add_centre(points, centres, options.kept.count)) {
            lloyd(points, centres, options.kept.count, search_limits);
            if (centres.count <= options.max_count) found.push_back(centres);
        }
        if (centres.count > found.back().count) found.push_back(centres);
    };
    if (found.back().count < options.max_count) grow(options.max_count);
    if (found.back().count < options.extra_count) grow(options.extra_count);
}

// A result that is worse than the count before it starts from that instead, with one centre more.
void mend_rises(const WeightedPoints& points, Sweep& sweep) {
    for (std::size_t i = 1; i < sweep.centres.size(); ++i) {
        if (sweep.objective[i] <= sweep.objective[i - 1]) continue;
        Centres centres = sweep.centres[i - 1];
        while (centres.count < sweep.centres[i].count && add_centre(points, centres, sweep.kept)) {
        }
        if (centres.count < sweep.centres[i].count) continue;
        const double mended = lloyd(points, centres, sweep.kept, polish_limits);
        sweep.centres[i] = std::move(centres);
        sweep.objective[i] = mended;
    }
}

}  // namespace

Sweep sweep_counts(const WeightedPoints& points, const SweepOptions& options) {
    if (points.n == 0) throw std::invalid_argument("nothing to cluster");
    const auto report = [&](double part) {
        if (options.progress) options.progress(part);
    };
    Sweep sweep;
    sweep.kept = options.kept.count;
    {
        const WeightedPoints coarse = coarse_points(points);
        for (Candidate& candidate :
             search(coarse, options, [&](double part) { report(part * 0.3); })) {
            sweep.centres.push_back(std::move(candidate.centres));
        }
    }
    grow_to(points, sweep.centres, options);

    sweep.objective.resize(sweep.centres.size());
    std::atomic<std::size_t> done{0};
    std::mutex reporting;
    // The largest counts take longest: they go first, so that the threads end together.
    parallel_for(sweep.centres.size(), [&](std::size_t i) {
        const std::size_t at = sweep.centres.size() - 1 - i;
        sweep.objective[at] = lloyd(points, sweep.centres[at], sweep.kept, polish_limits);
        const std::lock_guard<std::mutex> lock(reporting);
        report(0.3 + 0.7 * static_cast<double>(++done) / static_cast<double>(sweep.centres.size()));
    });
    mend_rises(points, sweep);
    return sweep;
}

}  // namespace tincture
