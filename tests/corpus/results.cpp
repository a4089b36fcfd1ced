#include "tests/corpus/results.h"

#include <algorithm>
#include <array>
#include <cstdio>
#include <functional>
#include <map>
#include <string>

namespace tincture::corpus {
namespace {

using Pick = std::function<bool(const Result&)>;
using Cell = std::function<std::string(std::span<const Result* const>)>;

std::string number(double value, int decimals) {
    std::array<char, 32> text{};
    std::snprintf(text.data(), text.size(), "%.*f", decimals, value);
    return text.data();
}

double part(std::size_t some, std::size_t all) {
    return all == 0 ? 0 : static_cast<double>(some) / static_cast<double>(all);
}

std::vector<const Result*> picked(const Results& results, const Pick& pick) {
    std::vector<const Result*> found;
    for (const Result& result : results) {
        if (pick(result)) found.push_back(&result);
    }
    return found;
}

std::vector<State> states_of(const Results& results) {
    std::vector<State> found;
    for (const State state : all_states()) {
        if (!picked(results, [&](const Result& r) { return r.state == state; }).empty()) {
            found.push_back(state);
        }
    }
    return found;
}

void print_head(std::ostream& out, const std::string& first, std::span<const State> states) {
    out << "| " << first << " |";
    for (const State state : states) out << ' ' << name_of(state) << " |";
    out << "\n|---|";
    for (std::size_t i = 0; i < states.size(); ++i) out << "---|";
    out << '\n';
}

// A row a kind that `wanted` finds, a column a state.
void print_by_kind(std::ostream& out, const Results& results, const Pick& wanted,
                   const Cell& cell) {
    const std::vector<State> states = states_of(results);
    print_head(out, "kind", states);
    for (const Kind kind : all_kinds()) {
        const auto of_kind = [&](const Result& r) { return r.kind == kind && wanted(r); };
        if (picked(results, of_kind).empty()) continue;
        out << "| " << name_of(kind) << " |";
        for (const State state : states) {
            const auto found =
                picked(results, [&](const Result& r) { return of_kind(r) && r.state == state; });
            out << ' ' << (found.empty() ? "" : cell(found)) << " |";
        }
        out << '\n';
    }
    out << '\n';
}

// Exact / within one, and how many abstain.
std::string count_cell(std::span<const Result* const> results,
                       const std::function<std::optional<int>(const Result&)>& says) {
    std::size_t exact = 0;
    std::size_t within = 0;
    std::size_t silent = 0;
    for (const Result* r : results) {
        const std::optional<int> count = says(*r);
        if (!count)
            ++silent;
        else if (*count == r->truth)
            ++exact;
        if (count && std::abs(*count - r->truth) <= 1) ++within;
    }
    std::string cell =
        number(part(exact, results.size()), 3) + " / " + number(part(within, results.size()), 3);
    if (silent > 0) cell += " (" + number(part(silent, results.size()), 2) + ")";
    return cell;
}

std::optional<int> vote_of(const Result& result, const std::string& criterion) {
    for (const Vote& vote : result.proposal.votes) {
        if (vote.criterion == criterion) return vote.count;
    }
    return std::nullopt;
}

std::vector<std::string> criteria_of(const Results& results) {
    std::vector<std::string> names;
    for (const Result& result : results) {
        for (const Vote& vote : result.proposal.votes) {
            if (std::find(names.begin(), names.end(), vote.criterion) == names.end()) {
                names.push_back(vote.criterion);
            }
        }
    }
    return names;
}

bool has_labels(const Result& r) {
    return r.halo.has_value();
}

using Halo = std::optional<double> Result::*;

std::string halo_cell(std::span<const Result* const> results, Halo which) {
    double sum = 0;
    double worst = 0;
    std::size_t n = 0;
    for (const Result* r : results) {
        if (!(r->*which)) continue;
        sum += *(r->*which);
        worst = std::max(worst, *(r->*which));
        ++n;
    }
    if (n == 0) return "";
    return number(100 * sum / static_cast<double>(n), 3) + " / " + number(100 * worst, 2);
}

std::string palette_cell(std::span<const Result* const> results) {
    std::vector<double> errors;
    double sum = 0;
    double worst_sum = 0;
    std::size_t pictures = 0;
    for (const Result* r : results) {
        if (r->palette_errors.empty()) continue;
        for (const double e : r->palette_errors) sum += e;
        errors.insert(errors.end(), r->palette_errors.begin(), r->palette_errors.end());
        worst_sum += *std::max_element(r->palette_errors.begin(), r->palette_errors.end());
        ++pictures;
    }
    if (errors.empty()) return "";
    std::sort(errors.begin(), errors.end());
    return number(sum / static_cast<double>(errors.size()), 2) + " / " +
           number(worst_sum / static_cast<double>(pictures), 2) + " / " +
           number(errors[errors.size() * 99 / 100], 1) + " / " + number(errors.back(), 1);
}

std::string stroke_cell(std::span<const Result* const> results, StrokeTally Result::*which) {
    StrokeTally all;
    for (const Result* r : results) all.add(r->*which);
    if (all.strokes == 0) return "";
    return number(100 * part(all.kept, all.pixels), 1) + " / " +
           number(100 * part(static_cast<std::size_t>(all.connected),
                             static_cast<std::size_t>(all.strokes)),
                  1);
}

std::optional<int> proposed(const Result& r) {
    return r.proposal.count;
}

void print_summary_of(std::ostream& out, const Results& results, Kind kind,
                      const std::string& title) {
    const std::vector<State> states = states_of(results);
    const auto of_state = [&](State state) {
        return picked(results, [&](const Result& r) { return r.kind == kind && r.state == state; });
    };
    if (states.empty() || of_state(states.front()).empty()) return;
    const std::array<std::pair<const char*, Cell>, 6> rows = {{
        {"proposal exact / within one",
         [](const auto& found) { return count_cell(found, proposed); }},
        {"halo pixels, %: mean / worst picture",
         [](const auto& found) { return halo_cell(found, &Result::halo); }},
        {"the same, given the true inks",
         [](const auto& found) { return halo_cell(found, &Result::halo_of_inks); }},
        {"palette off by, CIEDE2000: mean / mean of the worst / 99 of 100 / worst", palette_cell},
        {"strokes of two pixels, %: area kept / connected",
         [](const auto& found) { return stroke_cell(found, &Result::strokes); }},
        {"what colour alone could keep of them",
         [](const auto& found) { return stroke_cell(found, &Result::strokes_at_best); }},
    }};
    out << "## " << title << ", " << of_state(states.front()).size() << " a state\n\n";
    print_head(out, "", states);
    for (const auto& [name, cell] : rows) {
        out << "| " << name << " |";
        for (const State state : states) out << ' ' << cell(of_state(state)) << " |";
        out << '\n';
    }
    out << '\n';
}

}  // namespace

void print_summary(std::ostream& out, const Results& results) {
    print_summary_of(out, results, Kind::poster, "Posters");
    print_summary_of(out, results, Kind::placard, "Placards: posters by another hand");
}

void print_counts(std::ostream& out, const Results& results) {
    const std::vector<State> states = states_of(results);
    for (const Kind kind : all_kinds()) {
        const auto of_kind = [&](const Result& r) { return r.kind == kind && r.truth > 0; };
        const std::vector<const Result*> all = picked(results, of_kind);
        if (all.empty()) continue;
        out << "## Counts: " << name_of(kind)
            << "\n\nExact / within one of the truth (abstaining), " << all.size() / states.size()
            << " pictures a state\n\n";
        print_head(out, "", states);
        std::vector<std::string> rows = criteria_of(results);
        rows.insert(rows.begin(), "**proposal**");
        for (const std::string& row : rows) {
            out << "| " << row << " |";
            for (const State state : states) {
                const auto found = picked(
                    results, [&](const Result& r) { return of_kind(r) && r.state == state; });
                out << ' ' << count_cell(found, [&](const Result& r) {
                    return row == rows.front() ? r.proposal.count : vote_of(r, row);
                }) << " |";
            }
            out << '\n';
        }
        out << '\n';
    }
}

void print_labels(std::ostream& out, const Results& results) {
    if (picked(results, has_labels).empty()) return;
    out << "## Halos\n\nPixels with an ink that is not there, % at the true count: mean / worst "
           "picture\n\n";
    print_by_kind(out, results, has_labels,
                  [](const auto& found) { return halo_cell(found, &Result::halo); });
    out << "The same, given the true inks as the palette\n\n";
    print_by_kind(out, results, has_labels,
                  [](const auto& found) { return halo_cell(found, &Result::halo_of_inks); });
    out << "## Palette colours\n\nCIEDE2000 of inks over 1 %, at the true count: mean / mean over "
           "pictures of the worst ink / 99 of 100 inks are below / worst of all\n\n";
    print_by_kind(out, results, has_labels, palette_cell);
    out << "## Strokes of two pixels\n\nArea kept, % / strokes still connected, %\n\n";
    const auto with_strokes = [](const Result& r) { return r.strokes.strokes > 0; };
    print_by_kind(out, results, with_strokes,
                  [](const auto& found) { return stroke_cell(found, &Result::strokes); });
    out << "What colour alone could keep of them, where it is known which inks are near\n\n";
    print_by_kind(out, results, with_strokes,
                  [](const auto& found) { return stroke_cell(found, &Result::strokes_at_best); });
}

void print_calibration(std::ostream& out, const Results& results) {
    constexpr std::array edges = {0.0, 0.3, 0.5, 0.7, 0.8, 0.9, 0.95, 1.01};
    out << "## Confidence\n\n| said | posters | mean said | exact | within one | other kinds | "
           "mean "
           "said | exact | within one |\n|---|---|---|---|---|---|---|---|---|\n";
    for (std::size_t i = 0; i + 1 < edges.size(); ++i) {
        out << "| " << number(edges[i], 2) << " to " << number(std::min(edges[i + 1], 1.0), 2)
            << " |";
        for (const bool posters : {true, false}) {
            const auto found = picked(results, [&](const Result& r) {
                const double said = r.proposal.confidence;
                return r.truth > 0 && (r.kind == Kind::poster) == posters && said >= edges[i] &&
                       said < edges[i + 1];
            });
            double said = 0;
            std::size_t exact = 0;
            std::size_t within = 0;
            for (const Result* r : found) {
                said += r->proposal.confidence;
                exact += r->exact() ? 1 : 0;
                within += r->within_one() ? 1 : 0;
            }
            out << ' ' << found.size() << " |";
            if (found.empty()) {
                out << " | | |";
                continue;
            }
            out << ' ' << number(said / static_cast<double>(found.size()), 2) << " | "
                << number(part(exact, found.size()), 3) << " | "
                << number(part(within, found.size()), 3) << " |";
        }
        out << '\n';
    }
    out << '\n';
}

void print_stability(std::ostream& out, const Results& results) {
    std::map<std::pair<Kind, std::uint64_t>, int> clean;
    for (const Result& r : results) {
        if (r.state == State::clean) clean[{r.kind, r.seed}] = r.proposal.count;
    }
    const auto cell = [&](std::span<const Result* const> found) {
        std::size_t still = 0;
        std::size_t within = 0;
        for (const Result* r : found) {
            const int moved = std::abs(r->proposal.count - clean[{r->kind, r->seed}]);
            still += moved == 0 ? 1 : 0;
            within += moved <= 1 ? 1 : 0;
        }
        return number(part(still, found.size()), 3) + " / " + number(part(within, found.size()), 3);
    };
    Results moved;
    for (const Result& r : results) {
        const bool asked = r.state == State::half || r.state == State::recompressed;
        if (asked && clean.contains({r.kind, r.seed})) moved.push_back(r);
    }
    if (moved.empty()) return;
    out << "## Stability\n\nThe proposal against that for the clean picture: the same / moved by "
           "at "
           "most one\n\n";
    print_by_kind(
        out, moved, [](const Result&) { return true; }, cell);
    std::vector<const Result*> all;
    for (const Result& r : moved) all.push_back(&r);
    out << "All of them: " << cell(all) << "\n\n";
}

void print_unnatural(std::ostream& out, const Results& results) {
    const auto unnatural = [](const Result& r) { return r.truth == 0; };
    if (picked(results, unnatural).empty()) return;
    out << "## Pictures without a natural count\n\nProposals: least / mean / most, mean "
           "confidence\n\n";
    print_by_kind(out, results, unnatural, [](std::span<const Result* const> found) {
        int least = 1000;
        int most = 0;
        double sum = 0;
        double said = 0;
        for (const Result* r : found) {
            least = std::min(least, r->proposal.count);
            most = std::max(most, r->proposal.count);
            sum += r->proposal.count;
            said += r->proposal.confidence;
        }
        const double n = static_cast<double>(found.size());
        return std::to_string(least) + " / " + number(sum / n, 1) + " / " + std::to_string(most) +
               ", " + number(said / n, 2);
    });
}

void print_accents(std::ostream& out, const Results& results) {
    const auto measured = [](const Result& r) { return r.accent_error.has_value(); };
    if (picked(results, measured).empty()) return;
    out << "## Planted accents\n\nPart with a swatch within 5 CIEDE2000, at 6 colours\n\n";
    print_by_kind(out, results, measured, [](std::span<const Result* const> found) {
        std::size_t near = 0;
        for (const Result* r : found) near += *r->accent_error <= 5 ? 1 : 0;
        return number(part(near, found.size()), 3);
    });
}

void print_misses(std::ostream& out, const Results& results) {
    for (const Result& r : results) {
        if (r.truth == 0 || r.exact()) continue;
        out << name_of(r.kind) << ' ' << r.seed << ' ' << name_of(r.state) << ": truth " << r.truth
            << ", proposed " << r.proposal.count << " (" << r.proposal.low << " to "
            << r.proposal.high << ", " << number(r.proposal.confidence, 2) << ");";
        for (const Vote& vote : r.proposal.votes) {
            out << ' ' << vote.criterion << ' ' << (vote.count ? std::to_string(*vote.count) : "-");
        }
        out << '\n';
    }
}

}  // namespace tincture::corpus
