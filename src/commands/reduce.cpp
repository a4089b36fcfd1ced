#include "commands/reduce.h"

#include <algorithm>
#include <iostream>

#include "choose/measure.h"
#include "choose/proposal.h"
#include "cluster/sweep.h"
#include "commands/progress_bar.h"
#include "commands/summary.h"
#include "evidence/accents.h"
#include "evidence/evidence.h"
#include "histogram/colour_table.h"
#include "label/label_map.h"
#include "output/curve_csv.h"
#include "output/curve_svg.h"
#include "output/output_set.h"
#include "output/study_json.h"
#include "output/swatch_csv.h"
#include "output/swatch_sheet.h"
#include "output/swatch_tokens.h"
#include "palette/written_colours.h"
#include "picture/picture_space.h"
#include "picture/read.h"
#include "picture/write_indexed_png.h"
#include "regions/tidy_labels.h"
#include "support/error.h"
#include "support/parallel.h"
#include "support/text.h"
#include "support/version.h"

namespace tincture {
namespace {

// The sweep reaches at least this far, so that a knee does not move with the range asked for.
constexpr int shortest_sweep = 24;

OutputPlan output_plan(const ReduceOptions& options) {
    OutputPlan plan;
    plan.folder = options.common.out
                      ? *options.common.out
                      : std::filesystem::path(options.picture.stem().string() + "-tincture");
    plan.names = {"reduced.png",          "swatches.csv", "swatches.svg", "swatches.png",
                  "swatches.tokens.json", "curve.csv",    "curve.svg",    "study.json"};
    plan.inputs = {options.picture};
    if (options.profile) plan.inputs.push_back(*options.profile);
    plan.command = "reduce";
    plan.version = tincture_version;
    plan.force = options.common.force;
    return plan;
}

PictureFacts facts_of(const Picture& picture, const ColourSpace& space, const ColourTable& table) {
    PictureFacts facts;
    facts.file = valid_utf8(picture.file_name);
    facts.width = picture.width;
    facts.height = picture.height;
    facts.channels = channel_count(picture.model);
    facts.bits = picture.bits;
    if (!space.is_standard()) facts.profile = valid_utf8(space.description());
    facts.resolution = picture.resolution;
    facts.opaque_pixels = table.opaque_pixels;
    facts.distinct_colours = table.size();
    if (table.cell_de > 0) facts.colour_cell_de = table.cell_de;
    return facts;
}

ColourTable count_opaque_colours(const Picture& picture, const ColourSpace& space,
                                 const std::string& subject) {
    ColourTable table = count_colours(picture, space);
    if (table.size() == 0) {
        throw Error(ErrorKind::input, subject,
                    "is transparent everywhere: there is no colour to find; give it a background");
    }
    return table;
}

// The kept colours as centres, each once and as it will be written.
Centres kept_centres(const std::vector<ColourText>& keep, const ColourSpace& space) {
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    std::vector<Lab> wanted;
    for (const ColourText& colour : keep) {
        const Rgb8* rgb = std::get_if<Rgb8>(&colour);
        const Lab lab = rgb != nullptr ? srgb.lab_of(*rgb) : std::get<Lab>(colour);
        const auto same = [&](const Lab& other) {
            return other.L == lab.L && other.a == lab.a && other.b == lab.b;
        };
        if (std::none_of(wanted.begin(), wanted.end(), same)) wanted.push_back(lab);
    }
    Centres centres;
    for (const Rgb8 colour : written_colours(wanted, space)) {
        const Lab lab = space.lab_of(colour);
        centres.x.insert(centres.x.end(), {static_cast<float>(lab.L), static_cast<float>(lab.a),
                                           static_cast<float>(lab.b)});
        ++centres.count;
    }
    return centres;
}

SweepOptions sweep_options(const ChoosingOptions& choosing, Centres kept, ProgressBar& progress) {
    SweepOptions options;
    options.max_count = std::max(shortest_sweep, choosing.at_most) + 1;
    options.extra_count =
        choosing.count && *choosing.count > options.max_count ? *choosing.count : 0;
    options.kept = std::move(kept);
    options.progress = [&progress](double part) { progress.part(part); };
    return options;
}

AccentFacts accent_facts(const std::vector<Peak>& accents, double mse_by_area) {
    AccentFacts facts;
    for (const Peak& accent : accents) facts.colours.push_back({accent.L, accent.a, accent.b});
    facts.mse_by_area = mse_by_area;
    return facts;
}

struct NamedFile {
    std::string name;
    std::string bytes;
};

// What shows the study, not the picture.
std::vector<NamedFile> drawings_of(const Study& study) {
    const std::vector<std::uint8_t> chips = swatches_png(study);
    return {{"swatches.csv", swatch_csv(study)},
            {"swatches.svg", swatches_svg(study)},
            {"swatches.png", {chips.begin(), chips.end()}},
            {"swatches.tokens.json", swatch_tokens(study)},
            {"curve.csv", curve_csv(study)},
            {"curve.svg", curve_svg(study)}};
}

// The palette as written, with one more colour for what is transparent.
std::vector<Rgb8> written_palette(const Palette& palette, bool transparency) {
    std::vector<Rgb8> colours;
    for (const Swatch& swatch : palette.swatches) colours.push_back(swatch.written);
    if (transparency) colours.push_back({});
    return colours;
}

// Labels the pixels and stages the picture in its palette.
LabelFacts write_reduced(OutputSet& files, const Study& study, const Picture& picture,
                         const ColourTable& table, const ColourSpace& space,
                         const ColourSpace& written, std::optional<std::uint32_t> speck) {
    const Palette& palette = palette_at(study, study.count);
    Samples<std::uint8_t> labels = label_pixels(picture, table, space, palette);
    const std::uint64_t tidied =
        tidy_labels(labels, picture, table, space, palette, study.evidence, speck);
    const auto share = [&](std::uint64_t pixels) {
        return static_cast<double>(pixels) / static_cast<double>(table.opaque_pixels);
    };
    LabelFacts facts;
    for (const std::uint64_t n : count_labels(labels, study.count)) {
        facts.shares.push_back(share(n));
    }
    facts.tidied_share = share(tidied);
    const bool transparency = !picture.opaque.empty();
    const std::vector<Rgb8> colours = written_palette(palette, transparency);
    IndexedPicture reduced{picture.width, picture.height, labels.data(),     colours,
                           std::nullopt,  written.icc(),  picture.resolution};
    if (transparency) reduced.transparent_index = static_cast<std::uint8_t>(study.count);
    files.write("reduced.png",
                [&](const std::filesystem::path& path) { write_indexed_png(path, reduced); });
    return facts;
}

// The count to use, which is at most what the picture holds.
void settle_count(Study& study, const std::optional<int>& asked, bool transparency) {
    study.count_was_given = asked.has_value();
    study.count = std::min(asked.value_or(study.proposal.count), study.curve.back().count);
    study.count = std::max(study.count, study.curve.front().count);
    if (study.count > 255 && transparency) {
        throw Error(ErrorKind::usage, "",
                    "--count 256: transparency takes one place of 256 here; give at most 255");
    }
}

}  // namespace

void run_reduce(const ReduceOptions& options, const Terminal& terminal) {
    set_thread_count(options.common.threads);
    start_threads();
    OutputSet files(output_plan(options));
    ProgressBar progress(terminal.progress && !options.common.quiet);
    const std::string subject = options.picture.string();

    progress.stage("reading", 0, 0.3);
    const Picture picture = read_picture(options.picture, {options.max_pixels});
    const ColourSpace space = picture_space(picture, subject, options.profile);
    const ColourSpace written = written_space(picture, subject, options.profile);

    progress.stage("counting colours", 0.3, 0.4);
    const ColourTable table = count_opaque_colours(picture, space, subject);
    Study study;
    study.picture = facts_of(picture, space, table);
    study.tolerance = options.choosing.tolerance;
    study.at_least = options.choosing.at_least;
    study.at_most = options.choosing.at_most;

    progress.stage("weighing the evidence", 0.4, 0.5);
    const Evidence evidence = options.choosing.every_pixel_alike
                                  ? equal_evidence(table)
                                  : weigh_evidence(picture, table, space);
    study.evidence = evidence.facts;
    const std::vector<Peak> accents = accents_of(evidence, options.choosing.emphasis);

    progress.stage("clustering", 0.5, 0.8);
    const SweepOptions how =
        sweep_options(options.choosing, kept_centres(options.choosing.keep, written), progress);
    const Sweep sweep = accents.empty() ? sweep_counts(evidence.points, how)
                                        : sweep_counts(emphasised(evidence.points, accents), how);

    progress.stage("measuring", 0.8, 0.9);
    measure_curve(study, table, sweep, written);
    measure_stability(study, sweep);
    study.proposal = propose(study);
    settle_count(study, options.choosing.count, !picture.opaque.empty());
    if (!accents.empty()) {
        study.accents =
            accent_facts(accents, mse_with(evidence.points, how, study.count, table, written));
    }

    progress.stage("writing", 0.9, 1);
    LabelFacts labels;
    std::vector<NamedFile> drawings;
    run_both(
        [&] {
            labels = write_reduced(files, study, picture, table, space, written, options.speck);
        },
        [&] { drawings = drawings_of(study); });
    study.labels = std::move(labels);
    for (const NamedFile& file : drawings) files.add(file.name, file.bytes);
    const std::string json = study_json(study, tincture_version);
    files.add("study.json", json);
    files.commit();
    progress.clear();

    if (options.common.json) {
        std::cout << json;
    } else if (!options.common.quiet) {
        std::cout << summary(study, options.choosing.count, terminal,
                             output_plan(options).folder.string());
    }
}

}  // namespace tincture
