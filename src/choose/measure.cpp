#include "choose/measure.h"

#include <algorithm>
#include <cmath>

#include "choose/code_length.h"
#include "choose/error_curve.h"
#include "choose/prediction_strength.h"
#include "palette/written_colours.h"
#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

constexpr double bit = 0.693147180559945309;  // in nats

std::vector<Lab> labs_of(const Centres& centres) {
    std::vector<Lab> labs;
    for (int k = 0; k < centres.count; ++k) {
        const float* row = centres.row(k);
        labs.push_back({row[0], row[1], row[2]});
    }
    return labs;
}

}  // namespace

void measure_curve(Study& study, const ColourTable& table, const Sweep& sweep,
                   const ColourSpace& written_space) {
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    study.curve.assign(sweep.centres.size(), {});
    study.palettes.assign(sweep.centres.size(), {});
    parallel_for(sweep.centres.size(), [&](std::size_t i) {
        throw_if_cancelled();
        const std::size_t at = sweep.centres.size() - 1 - i;  // the longest first
        const std::vector<Rgb8> written =
            written_colours(labs_of(sweep.centres[at]), written_space);
        std::vector<Lab> labs;
        for (const Rgb8 colour : written) labs.push_back(written_space.lab_of(colour));
        const PaletteCost cost = measure_cost(table, labs);
        study.palettes[at] =
            make_palette(written, labs, cost.pixels, sweep.kept, written_space, srgb);
        const std::vector<double>& weights = sweep.weights[at];
        const double evidence = sweep.objective[at] / sweep.weight;
        study.curve[at] = {sweep.centres[at].count,
                           evidence,
                           cost.mse,
                           cost.mean_de00,
                           cost.p95_de00,
                           cost.max_de00,
                           closest_pair(labs),
                           *std::min_element(weights.begin(), weights.end()) / sweep.weight,
                           label_entropy(weights) / bit,
                           std::nullopt};
    });
}

void measure_stability(Study& study, const Sweep& sweep, std::uint64_t seed) {
    constexpr std::size_t most_counts = 25;  // more colours than that are not told apart by halves
    // Found by trial on drawn posters.
    constexpr double units_a_cell = 40;
    constexpr double unseen = 2;  // mean squared dE76 that nobody sees in a flat area
    const double noise = study.evidence.noise.value_or(0);
    Halving halving;
    halving.seed = seed;
    halving.units_a_cell = units_a_cell;
    halving.blur = std::sqrt((unseen + noise * noise) / 3);
    const std::size_t counts = std::min(sweep.centres.size(), most_counts);
    const std::vector<double> strengths = prediction_strengths(
        sweep.coarse, counts, halving, grown_from({sweep.centres.data(), counts}, sweep.kept));
    for (std::size_t i = 0; i < counts; ++i) study.curve[i].prediction_strength = strengths[i];
}

}  // namespace tincture
