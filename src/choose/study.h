// Everything that was measured about a picture: the only thing that the criteria and the output
// take.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "evidence/evidence_facts.h"
#include "palette/palette.h"
#include "picture/picture.h"

namespace tincture {

// What was read. Texts are valid UTF-8; what is unknown is empty.
struct PictureFacts {
    std::string file;  // base name
    std::uint32_t width = 0;
    std::uint32_t height = 0;
    int channels = 0;  // as stored: alpha not counted
    int bits = 8;
    std::optional<std::string> profile;  // the ICC profile's own description
    std::optional<Resolution> resolution;
    std::uint64_t opaque_pixels = 0;
    // Exact, unless colour_cell_de is set: then so many cells of that edge (dE76) stand for them.
    std::uint64_t distinct_colours = 0;
    std::optional<double> colour_cell_de;
};

// What got worse by dropping to a count from the one above it. The colours of the two palettes are
// partners by the pixels that they share; the one that stays without a partner is the one that was
// lost. All figures are over the pixels that were nearest to it.
struct CountLoss {
    std::size_t colour = 0;    // its place in the palette of one colour more
    std::size_t into = 0;      // place in this palette of the colour that most of its pixels get
    std::uint64_t pixels = 0;  // that were nearest to it
    double share = 0;          // pixels / opaque pixels
    double into_share = 0;     // part of them that gets `into`
    double mean_de00 = 0;      // against the colours that they get
    double max_de00 = 0;
    double mean_de00_before = 0;  // against the colour that was lost
    double max_de00_before = 0;
};

// One row of the error curve. All but evidence_mse are over every opaque pixel, each against the
// written palette colour nearest to it in CIELAB.
struct CurvePoint {
    int count = 0;
    double evidence_mse = 0;  // what clustering minimised: mean squared dE76, exact centres
    double mse = 0;           // mean squared dE76
    double mean_de00 = 0;
    double p95_de00 = 0;  // the smallest difference that covers 95 % of the pixels
    double max_de00 = 0;
    std::optional<double> closest_pair_de00;  // between two palette colours; unset below 2 colours
    double least_evidence_share = 1;  // the smallest part of the evidence that one colour is for
    double label_bits = 0;  // entropy of which colour a pixel of the evidence is for, bits a pixel
    // How far halves of the evidence agree, 0 to 1; unset for large counts.
    std::optional<double> prediction_strength{};
    std::optional<CountLoss> loss{};  // unset where one colour more was not measured
};

// What one criterion says of the count, with its reason in words and its figure.
struct Vote {
    std::string criterion;
    std::optional<int> count;  // unset: it abstains
    std::string reason;
};

struct Proposal {
    int count = 0;
    int low = 0;  // the defensible range, low <= count <= high
    int high = 0;
    double confidence = 0;  // 0 to 1
    std::string sentence;
    std::vector<Vote> votes;
};

// The label map of the reduced picture.
struct LabelFacts {
    std::vector<double> shares;  // per swatch of the palette that was used
    double tidied_share = 0;     // part of the opaque pixels that tidying moved to another label
};

// Small colours that were given more weight than their area.
struct AccentFacts {
    std::vector<Lab> colours;
    double mse_by_area = 0;  // mean squared dE76 at the count used, had areas alone been weighed
};

struct Study {
    PictureFacts picture;
    EvidenceFacts evidence;
    std::optional<AccentFacts> accents;  // unset: areas alone were weighed
    double tolerance = 3.0;              // CIEDE2000 at the 95th percentile
    int at_least = 2;                    // the range that is proposed from and listed
    int at_most = 24;
    // Counts rise; one step apart up to the end of the sweep, then perhaps the count asked for.
    std::vector<CurvePoint> curve;
    std::vector<Palette> palettes;  // one for each point of the curve, same order
    Proposal proposal;
    int count = 0;  // used for the reduced picture
    bool count_was_given = false;
    LabelFacts labels;
};

// The point of the curve, or the palette, of `count`; throws std::out_of_range where there is none.
[[nodiscard]] const CurvePoint& curve_at(const Study& study, int count);
[[nodiscard]] const Palette& palette_at(const Study& study, int count);

}  // namespace tincture
