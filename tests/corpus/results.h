// What was found for each picture, and the tables of it.
#pragma once

#include <cstdint>
#include <optional>
#include <ostream>
#include <span>
#include <vector>

#include "choose/study.h"
#include "tests/corpus/measures.h"
#include "tests/corpus/pictures.h"
#include "tests/corpus/wear.h"

namespace tincture::corpus {

struct Result {
    Kind kind = Kind::poster;
    State state = State::clean;
    std::uint64_t seed = 0;
    int truth = 0;  // 0: no count is natural
    Proposal proposal;
    // At the true count, where the picture kept its size.
    std::optional<double> halo;
    std::optional<double> halo_of_inks;  // with the true palette
    std::vector<double> palette_errors;
    StrokeTally strokes;
    StrokeTally strokes_at_best;         // by labels_of_those_near()
    std::optional<double> accent_error;  // CIEDE2000 of the nearest of 6 swatches

    [[nodiscard]] bool exact() const { return proposal.count == truth; }
    [[nodiscard]] bool within_one() const {
        return proposal.count >= truth - 1 && proposal.count <= truth + 1;
    }
};

using Results = std::vector<Result>;

// The figures of posters that are quoted, in one table, and the same of placards.
void print_summary(std::ostream& out, const Results& results);

// Markdown. Each prints nothing where the results hold nothing for it.
void print_counts(std::ostream& out, const Results& results);       // a table a kind
void print_labels(std::ostream& out, const Results& results);       // halos, palettes, strokes
void print_calibration(std::ostream& out, const Results& results);  // does the confidence hold
void print_stability(std::ostream& out, const Results& results);    // half size, recompressed
void print_unnatural(std::ostream& out, const Results& results);    // what photographs get
void print_accents(std::ostream& out, const Results& results);
void print_misses(std::ostream& out, const Results& results);

}  // namespace tincture::corpus
