#include "tests/corpus/judge.h"

#include <algorithm>

#include "choose/measure.h"
#include "choose/proposal.h"
#include "cluster/sweep.h"
#include "colour/colour_space.h"
#include "evidence/accents.h"
#include "evidence/evidence.h"
#include "histogram/colour_table.h"
#include "label/label_map.h"
#include "palette/written_colours.h"
#include "regions/tidy_labels.h"

namespace tincture::corpus {
namespace {

// In the order that they are given in.
Palette palette_of(std::span<const Rgb8> inks, const ColourSpace& space) {
    Palette palette;
    palette.count = static_cast<int>(inks.size());
    for (const Rgb8 ink : inks) {
        Swatch swatch;
        swatch.written = swatch.srgb = ink;
        swatch.lab = space.lab_of(ink);
        palette.swatches.push_back(swatch);
    }
    return palette;
}

}  // namespace

Judgement judge(const Picture& picture, std::span<const Rgb8> inks) {
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const ColourTable table = count_colours(picture, space);
    Study study;
    study.picture.opaque_pixels = table.opaque_pixels;
    study.picture.distinct_colours = table.size();
    const Evidence evidence = weigh_evidence(picture, table, space);
    study.evidence = evidence.facts;
    const Sweep sweep = sweep_counts(evidence.points, {});
    measure_curve(study, table, sweep, space);
    measure_stability(study, sweep);
    Judgement judgement;
    judgement.proposal = propose(study);
    if (inks.empty()) return judgement;

    const auto labelled = [&](const Palette& palette) {
        Samples<std::uint8_t> labels = label_pixels(picture, table, space, palette);
        tidy_labels(labels, picture, table, space, palette, study.evidence, std::nullopt);
        return std::vector<std::uint8_t>(labels.data(), labels.data() + labels.size());
    };
    judgement.labels_of_inks = labelled(palette_of(inks, space));
    const int count = static_cast<int>(inks.size());
    const auto found = std::find_if(study.palettes.begin(), study.palettes.end(),
                                    [&](const Palette& p) { return p.count == count; });
    if (found == study.palettes.end()) return judgement;
    for (const Swatch& swatch : found->swatches) judgement.palette.push_back(swatch.written);
    judgement.labels = labelled(*found);
    return judgement;
}

std::vector<Rgb8> accent_palette(const Picture& picture, int count) {
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    const ColourTable table = count_colours(picture, space);
    const Evidence evidence = weigh_evidence(picture, table, space);
    SweepOptions options;
    options.max_count = count;
    const Sweep sweep =
        sweep_counts(emphasised(evidence.points, accents_of(evidence, Emphasis::accent)), options);
    std::vector<Lab> labs;
    for (int k = 0; k < sweep.centres.back().count; ++k) {
        const float* row = sweep.centres.back().row(k);
        labs.push_back({row[0], row[1], row[2]});
    }
    return written_colours(labs, space);
}

}  // namespace tincture::corpus
