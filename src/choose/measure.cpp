#include "choose/measure.h"

#include <algorithm>
#include <cmath>

#include "choose/code_length.h"
#include "choose/count_loss.h"
#include "choose/error_curve.h"
#include "choose/prediction_strength.h"
#include "palette/source_colours.h"
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

WrittenColours written_of(const Centres& centres, int kept, const ColourTable& table,
                          const ColourSpace& space) {
    WrittenColours written;
    written.rgb = written_colours(moved_to_source(labs_of(centres), kept, table), space);
    for (const Rgb8 colour : written.rgb) written.lab.push_back(space.lab_of(colour));
    return written;
}

std::size_t place_of(Rgb8 colour, const Palette& palette) {
    const auto found = std::find_if(palette.swatches.begin(), palette.swatches.end(),
                                    [&](const Swatch& swatch) { return swatch.written == colour; });
    return static_cast<std::size_t>(found - palette.swatches.begin());
}

// What is measured of the palette of one count.
struct Measured {
    WrittenColours written;
    std::vector<PixelCost> colours;  // in the order of `written`
    std::optional<LostColour> lost;
};

CurvePoint point_of(const Sweep& sweep, std::size_t at, const PaletteCost& cost,
                    const WrittenColours& written) {
    const std::vector<double>& weights = sweep.weights[at];
    CurvePoint point;
    point.count = sweep.centres[at].count;
    point.evidence_mse = sweep.objective[at] / sweep.weight;
    point.mse = cost.mse;
    point.mean_de00 = cost.mean_de00;
    point.p95_de00 = cost.p95_de00;
    point.max_de00 = cost.max_de00;
    point.closest_pair_de00 = closest_pair(written.lab);
    point.least_evidence_share = *std::min_element(weights.begin(), weights.end()) / sweep.weight;
    point.label_bits = label_entropy(weights) / bit;
    return point;
}

CountLoss loss_of(const LostColour& lost, const Measured& more, const Palette& more_palette,
                  const Measured& fewer, const Palette& fewer_palette) {
    CountLoss loss;
    loss.colour = place_of(more.written.rgb[lost.colour], more_palette);
    loss.into = place_of(fewer.written.rgb[lost.into], fewer_palette);
    loss.pixels = lost.cost.pixels;
    loss.share = more_palette.swatches[loss.colour].share;
    if (loss.pixels == 0) return loss;
    const auto pixels = static_cast<double>(loss.pixels);
    loss.into_share = static_cast<double>(lost.into_pixels) / pixels;
    loss.mean_de00 = lost.cost.de00 / pixels;
    loss.max_de00 = lost.cost.worst;
    loss.mean_de00_before = more.colours[lost.colour].de00 / pixels;
    loss.max_de00_before = more.colours[lost.colour].worst;
    return loss;
}

}  // namespace

void measure_curve(Study& study, const ColourTable& table, const Sweep& sweep,
                   const ColourSpace& written_space) {
    // Neighbouring counts are measured together, as each needs the labels of the one above it.
    constexpr std::size_t together = 2;
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    const std::size_t counts = sweep.centres.size();
    study.curve.assign(counts, {});
    study.palettes.assign(counts, {});
    std::vector<Measured> measured(counts);
    parallel_for(counts, [&](std::size_t i) {
        measured[i].written = written_of(sweep.centres[i], sweep.kept, table, written_space);
    });
    const auto has_next = [&](std::size_t at) {
        return at + 1 < counts && sweep.centres[at + 1].count == sweep.centres[at].count + 1;
    };
    parallel_for((counts + together - 1) / together, [&](std::size_t task) {
        TableLabels labels;
        const std::size_t end = counts - task * together;  // the longest first
        for (std::size_t at = end; at-- > 0 && at + together >= end;) {
            throw_if_cancelled();
            Measured& here = measured[at];
            if (!has_next(at)) labels.clear();
            if (has_next(at) && labels.empty()) {
                labels = nearest_of_table(table, measured[at + 1].written.lab);
            }
            const std::size_t labelled = has_next(at) ? here.written.lab.size() + 1 : 1;
            const PaletteCost cost = measure_cost(table, here.written.lab, labels, labelled);
            study.palettes[at] = make_palette(here.written.rgb, here.written.lab, cost.pixels,
                                              sweep.kept, written_space, srgb);
            study.curve[at] = point_of(sweep, at, cost, here.written);
            here.colours = cost.crossing.sums();
            if (!has_next(at)) continue;
            here.lost = lost_colour(measured[at + 1].written, here.written, cost.crossing);
        }
    });
    for (std::size_t at = 0; at + 1 < counts; ++at) {
        if (!measured[at].lost) continue;
        study.curve[at].loss = loss_of(*measured[at].lost, measured[at + 1], study.palettes[at + 1],
                                       measured[at], study.palettes[at]);
    }
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

double mse_with(const WeightedPoints& points, const SweepOptions& options, int count,
                const ColourTable& table, const ColourSpace& written_space) {
    const Sweep sweep = sweep_counts(points, options);
    const auto found = std::find_if(sweep.centres.begin(), sweep.centres.end(),
                                    [count](const Centres& c) { return c.count == count; });
    const Centres& centres = found != sweep.centres.end() ? *found : sweep.centres.back();
    return measure_cost(table, written_of(centres, sweep.kept, table, written_space).lab).mse;
}

}  // namespace tincture
