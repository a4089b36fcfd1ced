#include "evidence/evidence.h"

#include <algorithm>
#include <cmath>
#include <unordered_map>

#include "evidence/flat_areas.h"
#include "evidence/inks.h"
#include "evidence/noise.h"
#include "evidence/peak_places.h"
#include "evidence/peaks.h"
#include "evidence/softness.h"
#include "histogram/cells.h"
#include "histogram/pixel_lab.h"
#include "support/maths.h"

namespace tincture {
namespace {

// Weights are whole numbers, so that sums of them are exact: this is one pixel's.
constexpr double whole = 4096;

// Blends, which weigh next to nothing, are merged into coarse cells where they are more than this.
constexpr std::size_t many_points = 4096;
constexpr std::size_t few_colours = 65'536;
constexpr double blend_cell_de = 4;

// Flat colours gather within this of a peak: clean ones, worn ones, noisy ones.
constexpr double clean_peak_de = 2;
constexpr double peak_de = 5;
constexpr double peak_noise = 0.9;
constexpr double clean_noise = 0.4;
constexpr double least_peak_share = 0.0001;
constexpr std::size_t most_peaks = PeakPlaces::most_peaks;
constexpr double an_ink = 0.25;  // of full weight

constexpr double enough_pixels = 2e6;

std::uint32_t stride_for(const Picture& picture) {
    const double stride = std::sqrt(static_cast<double>(picture.pixel_count()) / enough_pixels);
    return std::max(1U, static_cast<std::uint32_t>(std::ceil(stride)));
}

// How much a picture is flat art, from the share of its pixels that lie flat in inks.
double flatness(double flat_share) {
    return smooth_step(flat_share, 0.4, 0.6);
}

WeightedPoints points_from(const std::vector<ColourCount>& colours) {
    WeightedPoints points;
    points.n = colours.size();
    points.x.resize(3 * points.n);
    points.weight.resize(points.n);
    for (std::size_t i = 0; i < points.n; ++i) {
        const LabSteps lab = lab_of_key(colours[i].key);
        points.x[i] = static_cast<float>(lab.L) / lab_band_steps;
        points.x[points.n + i] = static_cast<float>(lab.a) / lab_band_steps;
        points.x[2 * points.n + i] = static_cast<float>(lab.b) / lab_band_steps;
        points.weight[i] = static_cast<double>(colours[i].count);
        points.total_weight += points.weight[i];
    }
    return points;
}

// The weight of each flat colour: that of the peak it belongs to, none where it belongs to none.
std::vector<double> colour_weights(const std::vector<ColourCount>& flat,
                                   const std::vector<Peak>& peaks,
                                   const std::vector<double>& of_peak, double radius) {
    std::vector<double> weights(flat.size(), 0.0);
    for (std::size_t i = 0; i < flat.size(); ++i) {
        const std::size_t peak = nearest_peak(peaks, lab_of_key(flat[i].key), 1.5 * radius);
        if (peak < peaks.size()) weights[i] = of_peak[peak];
    }
    return weights;
}

// The points with new weights, without those that weigh nothing; inner scatter is left to the
// caller.
WeightedPoints reweighted(const WeightedPoints& points, const std::vector<double>& weights) {
    WeightedPoints result;
    std::vector<std::size_t> kept;
    for (std::size_t i = 0; i < points.n; ++i) {
        if (weights[i] <= 0) continue;
        kept.push_back(i);
        result.weight.push_back(weights[i]);
        result.total_weight += weights[i];
    }
    result.n = kept.size();
    for (int d = 0; d < 3; ++d) {
        for (const std::size_t i : kept) result.x.push_back(points.plane(d)[i]);
    }
    return result;
}

WeightedPoints joined(const WeightedPoints& one, const WeightedPoints& two) {
    WeightedPoints all;
    all.n = one.n + two.n;
    for (int d = 0; d < 3; ++d) {
        all.x.insert(all.x.end(), one.plane(d), one.plane(d) + one.n);
        all.x.insert(all.x.end(), two.plane(d), two.plane(d) + two.n);
    }
    all.weight = one.weight;
    all.weight.insert(all.weight.end(), two.weight.begin(), two.weight.end());
    all.total_weight = one.total_weight + two.total_weight;
    all.inner_scatter = one.inner_scatter + two.inner_scatter;
    return all;
}

// The colours of the table, each with `everywhere` for each of its pixels and with what it weighs
// as a flat colour; what is no flat colour may be merged.
WeightedPoints with_exact_colours(const ColourTable& table, const std::vector<ColourCount>& flat,
                                  const std::vector<double>& flat_weights, double everywhere) {
    std::unordered_map<std::uint64_t, std::size_t> place;
    const WeightedPoints all = points_of(table);
    for (std::size_t i = 0; i < table.size(); ++i) {
        place.emplace(lab_key(lab_step(table.L[i]), lab_step(table.a[i]), lab_step(table.b[i])), i);
    }
    std::vector<double> speaking(table.size(), 0.0);
    for (std::size_t f = 0; f < flat.size(); ++f) {
        if (flat_weights[f] > 0) speaking[place.at(flat[f].key)] += flat_weights[f];
    }
    std::vector<double> silent(table.size());
    for (std::size_t i = 0; i < table.size(); ++i) {
        silent[i] = everywhere * all.weight[i];
        if (speaking[i] <= 0) continue;
        speaking[i] += silent[i];
        silent[i] = 0;
    }
    WeightedPoints blends = reweighted(all, silent);
    if (everywhere <= 1 && blends.n > many_points) blends = merge_into_cells(blends, blend_cell_de);
    return joined(reweighted(all, speaking), blends);
}

// Flat colours that were smoothed or rounded are points of their own.
WeightedPoints with_smoothed_colours(const ColourTable& table, const WeightedPoints& flat,
                                     const std::vector<double>& flat_weights, double everywhere) {
    const WeightedPoints speaking = reweighted(flat, flat_weights);
    WeightedPoints blends = points_of(table);
    for (double& weight : blends.weight) weight *= everywhere;
    blends.total_weight *= everywhere;
    blends.inner_scatter *= everywhere;
    if (everywhere <= 1 && blends.n > many_points) blends = merge_into_cells(blends, blend_cell_de);
    return joined(speaking, blends);
}

// A quick look at all pixels' colours, before any is looked at where it stands: in flat art some
// gather, even where it is worn; where none do, there is nothing to find.
bool nothing_gathers(const ColourTable& table, double noise) {
    constexpr double cell_de = 2;
    constexpr double gathered_share = 0.4;
    constexpr std::size_t peaks_to_try = 24;
    constexpr double gathers = 0.65;  // prominence
    const WeightedPoints cells = merge_into_cells(points_of(table), cell_de);
    const double radius = std::max(peak_de, 1.5 * noise);
    double gathered = 0;
    for (const Peak& peak : find_peaks(cells, radius, 0, peaks_to_try)) {
        if (peak.prominence >= gathers) gathered += peak.weight;
    }
    return gathered < gathered_share * cells.total_weight;
}

}  // namespace

Evidence equal_evidence(const ColourTable& table) {
    return {points_of(table), {}};
}

Evidence weigh_evidence(const Picture& picture, const ColourTable& table,
                        const ColourSpace& space) {
    Evidence evidence;
    const std::uint32_t stride = stride_for(picture);
    const PixelLab pixels(picture, table, space, stride);
    const double noise = measure_noise(pixels);
    if (nothing_gathers(table, noise)) {
        evidence.points = points_of(table);
        evidence.facts = {"continuous tone", 0.0, noise, 0, 0};
        return evidence;
    }
    const FlatColours colours = count_flat_colours(pixels, noise, table.size() <= few_colours);
    const WeightedPoints flat = points_from(colours.colours);
    const WeightedPoints cells = merge_into_cells(flat, 1);
    const double radius =
        noise < clean_noise ? clean_peak_de : std::max(peak_de, peak_noise * noise);
    const auto all = static_cast<double>(table.opaque_pixels) / (stride * stride);
    const std::vector<Peak> peaks =
        find_peaks(cells, radius, std::max(4.0, least_peak_share * all), most_peaks);
    const PeakPlaces places(colours.map, peaks, radius);
    const double softness = measure_softness(pixels, places, peaks, all);
    const InkWeights found = ink_weights(peaks, places, softness, all, radius);
    const std::vector<double>& inks = found.weight;
    std::vector<double> weights = colour_weights(colours.colours, peaks, inks, radius);
    double in_peaks = 0;
    for (std::size_t i = 0; i < flat.n; ++i) in_peaks += flat.weight[i] * weights[i];
    const double flat_share = in_peaks / all;
    const double art = flatness(flat_share);

    evidence.facts.kind = art >= 0.5 ? "flat art" : "continuous tone";
    evidence.facts.flat_share = flat_share;
    evidence.facts.noise = noise;
    evidence.facts.inks = static_cast<int>(
        std::count_if(inks.begin(), inks.end(), [](double weight) { return weight >= an_ink; }));
    evidence.facts.perhaps_more_inks = found.perhaps_more;
    if (std::round(art * whole) < 1) {
        evidence.points = points_of(table);
        return evidence;
    }
    for (std::size_t i = 0; i < flat.n; ++i) {
        weights[i] = std::round(weights[i] * art * whole) * flat.weight[i] * stride * stride;
    }
    const double everywhere = std::max(1.0, std::round((1 - art) * whole));
    evidence.points = colours.exact
                          ? with_exact_colours(table, colours.colours, weights, everywhere)
                          : with_smoothed_colours(table, flat, weights, everywhere);
    return evidence;
}

}  // namespace tincture
