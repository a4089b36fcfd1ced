// Labels of whole posters in four states of wear, against their truth.
#include <gtest/gtest.h>

#include "label/edges.h"
#include "label/label_map.h"
#include "tests/corpus/measures.h"
#include "tests/corpus/pictures.h"
#include "tests/corpus/wear.h"

namespace tincture {
namespace {

using corpus::Sample;
using corpus::State;

struct Tally {
    double halo = 0;  // mean share of the pixels
    corpus::StrokeTally strokes;

    [[nodiscard]] double kept() const {
        return static_cast<double>(strokes.kept) / static_cast<double>(strokes.pixels);
    }
    [[nodiscard]] double whole() const {
        return static_cast<double>(strokes.connected) / strokes.strokes;
    }
};

struct BeforeAndAfter {
    Tally nearest;
    Tally settled;
};

BeforeAndAfter measure(State state, double noise_de) {
    constexpr int posters = 8;
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    BeforeAndAfter result;
    for (std::uint64_t seed = 500; seed < 500 + posters; ++seed) {
        const Sample sample = corpus::draw_sample(corpus::Kind::poster, seed);
        const Picture picture = corpus::worn(sample.picture, state, seed);
        Palette palette;
        palette.count = sample.count();
        for (const Rgb8 ink : sample.inks) {
            palette.swatches.emplace_back();
            palette.swatches.back().lab = space.lab_of(ink);
        }
        const ColourTable table = count_colours(picture, space);
        Samples<std::uint8_t> labels = label_pixels(picture, table, space, palette);
        const auto add = [&](Tally& tally) {
            const std::vector<std::uint8_t> got(labels.data(), labels.data() + labels.size());
            tally.halo += corpus::halo_share(sample, got) / posters;
            tally.strokes.add(corpus::tally_strokes(sample, got));
        };
        add(result.nearest);
        labels = settled_edges(labels, PixelLab(picture, table, space), palette, noise_de);
        add(result.settled);
    }
    return result;
}

// Bounds on both sides: one that lies far from what is reached would hide a loss.
struct Bounds {
    double least_halo_before;
    double most_halo;
    double least_kept, most_kept;
    double least_whole, most_whole;
};

void check(State state, double noise_de, const Bounds& bounds) {
    const BeforeAndAfter measured = measure(state, noise_de);
    EXPECT_GE(measured.nearest.halo, bounds.least_halo_before);
    EXPECT_LE(measured.settled.halo, bounds.most_halo);
    EXPECT_GE(measured.settled.kept(), bounds.least_kept);
    EXPECT_LE(measured.settled.kept(), bounds.most_kept);
    EXPECT_GE(measured.settled.whole(), bounds.least_whole);
    EXPECT_LE(measured.settled.whole(), bounds.most_whole);
}

TEST(Posters, Clean) {
    check(State::clean, 0, {0.006, 0.00007, 0.995, 1, 0.99, 1});
}
TEST(Posters, Jpeg) {
    check(State::jpeg75, 1, {0.016, 0.0005, 0.96, 0.985, 0.9, 0.98});
}
TEST(Posters, Noise) {
    check(State::noise, 2.6, {0.006, 0.0001, 0.99, 1, 0.98, 1});
}
TEST(Posters, Scan) {
    check(State::scan, 1.2, {0.025, 0.0008, 0.9, 0.96, 0.72, 0.85});
}

}  // namespace
}  // namespace tincture
