#include "cluster/search.h"

#include <algorithm>
#include <numeric>

#include "cluster/kmeans.h"
#include "cluster/split.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// All figures here were found by trial on photograph-like pictures, against the best of ten random
// starts.
constexpr LloydLimits settled = {30, 5e-4};
constexpr LloydLimits glance = {4, 1e-3};
constexpr int exchange_rounds = 4;
constexpr std::size_t exchange_choices = 6;  // centres and splits that are paired
constexpr std::size_t exchange_ways = 36;    // pairs that are glanced at
constexpr std::size_t exchange_settled = 4;  // pairs that may settle
constexpr double exchange_estimate = -0.6;   // of the objective: a pair that starts worse is not
constexpr double exchange_glance = 1.02;     // times the objective: after a glance likewise
constexpr int exchange_up_to = 40;           // colours: with more, none matters much

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

// The points of a kept centre may all lie in one place beside it: that place is worth a centre.
Split split_from_kept(const WeightedPoints& points, const Members& members, std::size_t cluster) {
    Split split;
    split.gain = members.scatter[cluster];
    const std::size_t i = members.index[members.start[cluster]];
    for (int d = 0; d < points.dims; ++d) split.low.push_back(points.plane(d)[i]);
    split.high = split.low;
    return split;
}

// The clusters whose split gains most, at most `wanted`, best first.
std::vector<BestSplit> best_splits(const WeightedPoints& points, const Centres& centres, int kept,
                                   const Members& members, std::size_t wanted) {
    std::vector<BestSplit> best;
    for (int k = 0; k < centres.count; ++k) {
        const auto at = static_cast<std::size_t>(k);
        // A cluster cannot gain more than its scatter.
        if (best.size() == wanted && members.scatter[at] <= best.back().split.gain) continue;
        Split split = split_cluster(points, members.index.data() + members.start[at],
                                    members.start[at + 1] - members.start[at]);
        if (split.gain <= 0 && k < kept && members.scatter[at] > 0) {
            split = split_from_kept(points, members, at);
        }
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
    const std::vector<BestSplit> splits =
        best_splits(points, centres, kept, members, exchange_choices);
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
// best two settle.
double exchange(const WeightedPoints& points, Centres& centres, int kept, double current) {
    if (centres.count > exchange_up_to) return current;
    for (int round = 0; round < exchange_rounds; ++round) {
        const std::vector<Exchange> ways = exchanges(points, centres, kept, current);
        if (ways.empty()) break;
        std::vector<Candidate> trials(ways.size());
        parallel_for(ways.size(), [&](std::size_t i) {
            trials[i].centres = centres;
            apply_split(trials[i].centres, ways[i].split, kept, ways[i].spare);
            trials[i].objective = lloyd(points, trials[i].centres, kept, glance);
        });
        std::stable_sort(trials.begin(), trials.end(),
                         [](const Candidate& one, const Candidate& two) {
                             return one.objective < two.objective;
                         });
        if (trials.size() > exchange_settled) trials.resize(exchange_settled);
        bool lowered = false;
        for (Candidate& trial : trials) {
            if (lowered || trial.objective > current * exchange_glance) break;
            trial.objective = lloyd(points, trial.centres, kept, settled);
            if (trial.objective >= current * (1 - 1e-5)) continue;
            centres = std::move(trial.centres);
            current = trial.objective;
            lowered = true;
        }
        if (!lowered) break;
    }
    return current;
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
    to.objective = lloyd(points, to.centres, kept, settled);
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
    to.objective = lloyd(points, to.centres, kept, settled);
    to.objective = exchange(points, to.centres, kept, to.objective);
    return to;
}

}  // namespace

bool add_centre(const WeightedPoints& points, Centres& centres, int kept) {
    const std::vector<BestSplit> best =
        best_splits(points, centres, kept, members_of(points, centres), 1);
    if (best.empty()) return false;
    apply_split(centres, best.front(), kept, -1);
    return true;
}

std::vector<Centres> search_counts(const WeightedPoints& points, const Centres& kept_centres,
                                   int max_count, const std::function<void(double)>& progress) {
    const int kept = kept_centres.count;
    std::vector<Candidate> found(1);
    found[0].centres = kept > 0 ? kept_centres : mean_of(points);
    found[0].objective = objective(points, found[0].centres);
    Candidate next;
    while (found.back().centres.count < max_count && step_up(points, found.back(), kept, next)) {
        found.push_back(next);
        progress(static_cast<double>(next.centres.count) / max_count);
    }
    const auto improve = [](Candidate& current, Candidate&& other) {
        const bool better = other.objective < current.objective;
        if (better) current = std::move(other);
        return better;
    };
    std::vector<bool> changed(found.size(), false);
    for (std::size_t i = found.size(); i-- > 2;) {
        changed[i - 1] = improve(found[i - 1], step_down(points, found[i], kept));
    }
    for (std::size_t i = 2; i < found.size(); ++i) {
        if (changed[i - 1] && step_up(points, found[i - 1], kept, next)) {
            changed[i] = improve(found[i], std::move(next)) || changed[i];
        }
    }
    std::vector<Centres> centres;
    for (Candidate& candidate : found) centres.push_back(std::move(candidate.centres));
    return centres;
}

}  // namespace tincture
