#include "evidence/inks.h"

#include <gtest/gtest.h>

#include <algorithm>

namespace tincture {
namespace {

constexpr double pixels = 1e6;
constexpr double radius = 2;

const Peak paper{92, 0, 4, 600'000, 1};
const Peak black{18, 2, -2, 300'000, 1};
const Peak red{50, 60, 40, 50'000, 1};

Peak between(const Peak& one, const Peak& two, double share, double weight, double prominence) {
    const auto mix = [share](double from, double to) { return from + share * (to - from); };
    return {mix(one.L, two.L), mix(one.a, two.a), mix(one.b, two.b), weight, prominence};
}

// Where the last peak lies: in a picture of paper on the left and black on the right.
enum class Place { spot, edge, stroke, in_detail, fade };

constexpr int width = 140;
constexpr int height = 60;
constexpr int middle = 60;  // between paper and black, which leave two columns free

class FlatScene {
  public:
    FlatScene() : map_{width, height, {}} { map_.colour.assign(width * height, 0); }

    void fill(const Peak& peak, int x, int y, int w, int h) {
        const LabSteps lab = {lab_step(static_cast<float>(peak.L)),
                              lab_step(static_cast<float>(peak.a)),
                              lab_step(static_cast<float>(peak.b))};
        paint(FlatMap::pack(lab), x, y, w, h);
    }
    void clear(int x, int y, int w, int h) { paint(FlatMap::not_flat, x, y, w, h); }
    [[nodiscard]] const FlatMap& map() const { return map_; }

  private:
    void paint(std::uint32_t colour, int x, int y, int w, int h) {
        for (int row = y; row < y + h; ++row) {
            for (int column = x; column < x + w; ++column) {
                map_.colour[static_cast<std::size_t>(row * width + column)] = colour;
            }
        }
    }
    FlatMap map_;
};

FlatScene scene(const Peak& one, const Peak& two, const Peak& last, Place place) {
    FlatScene scene;
    scene.fill(one, 0, 0, middle, height);
    scene.fill(two, middle + 2, 0, width - middle - 2, height);
    const Peak elsewhere{70, 90, -90, 0, 0};
    switch (place) {
        case Place::spot:
            scene.clear(8, 8, 16, 16);
            scene.fill(last, 10, 10, 12, 12);
            break;
        case Place::edge:
            scene.fill(last, middle, 5, 2, 50);
            break;
        case Place::stroke:
            scene.clear(8, 5, 6, 50);
            scene.fill(last, 10, 5, 2, 50);
            break;
        case Place::in_detail:
            scene.clear(2, 2, 32, 32);
            scene.fill(last, 12, 12, 12, 12);
            break;
        case Place::fade:
            scene.clear(2, 2, 32, 24);
            scene.fill(elsewhere, 4, 8, 28, 12);
            scene.fill(last, 12, 8, 12, 12);
            break;
    }
    return scene;
}

struct Wanted {
    Place place = Place::spot;
    double softness = 0.3;
    double of_pixels = pixels;
    double found_with = radius;
};

double weight_of(const Peak& one, const Peak& two, const Peak& last, const Wanted& wanted = {}) {
    const std::vector<Peak> peaks = {one, two, last};
    const FlatScene drawn = scene(one, two, last, wanted.place);
    const PeakPlaces places(drawn.map(), peaks, wanted.found_with);
    const std::vector<double> weights =
        ink_weights(peaks, places, wanted.softness, wanted.of_pixels, wanted.found_with).weight;
    EXPECT_EQ(weights.size(), 3U);
    EXPECT_EQ(weights[0], 1);
    EXPECT_EQ(weights[1], 1);
    return weights[2];
}
double weight_of(const Peak& last, const Wanted& wanted = {}) {
    return weight_of(paper, black, last, wanted);
}

TEST(InkWeights, AreThePeaksThatStandOut) {
    EXPECT_EQ(weight_of(red), 1);
    const PeakPlaces nowhere(FlatMap{}, {}, radius);
    EXPECT_TRUE(ink_weights({}, nowhere, 0, pixels, radius).weight.empty());
    EXPECT_EQ(ink_weights({red}, nowhere, 0, pixels, radius).weight, (std::vector<double>{1}));
}

TEST(InkWeights, AreNoBlendsAlongEdges) {
    for (const double share : {0.1, 0.3, 0.5, 0.7, 0.9}) {
        const Peak mix = between(paper, black, share, 5000, 1);
        EXPECT_EQ(weight_of(mix, {.place = Place::edge}), 0) << share;
        // The same colour elsewhere is one that somebody chose: a tint.
        EXPECT_EQ(weight_of(mix, {.place = Place::spot}), 1) << share;
    }
    // What covers this much is no blend, wherever it lies; nor is what no two inks mix to.
    EXPECT_EQ(weight_of(between(paper, black, 0.5, 21'000, 1), {.place = Place::edge}), 1);
    EXPECT_EQ(weight_of({50, 60, 40, 5000, 1}, {.place = Place::edge}), 1);
    EXPECT_EQ(weight_of(between(paper, black, 1.15, 5000, 1), {.place = Place::edge}), 1);
    EXPECT_EQ(weight_of(between(paper, black, -0.1, 5000, 1), {.place = Place::edge}), 1);
}

TEST(InkWeights, AreNoStrokesThatABlurHasThinned) {
    const Peak thinned = between(paper, black, 0.6, 5000, 1);
    EXPECT_EQ(weight_of(thinned, {.place = Place::stroke, .softness = 1}), 0);
    EXPECT_EQ(weight_of(thinned, {.place = Place::stroke, .softness = 0.3}), 1);
    EXPECT_EQ(weight_of(thinned, {.place = Place::spot, .softness = 1}), 1);
    // Next to nothing in strokes alone is not trusted, however sharp.
    EXPECT_EQ(weight_of(between(paper, black, 0.6, 1000, 1), {.place = Place::stroke}), 0);
}

TEST(InkWeights, AreNoDetailLostInABlur) {
    EXPECT_EQ(weight_of(between(paper, black, 0.5, 1000, 1), {.place = Place::in_detail}), 0);
    EXPECT_EQ(weight_of(between(paper, black, 0.5, 1000, 1), {.place = Place::spot}), 1);
    EXPECT_EQ(weight_of(between(paper, black, 0.5, 1500, 1), {.place = Place::in_detail}), 1);
    EXPECT_EQ(weight_of({50, 60, 40, 1000, 1}, {.place = Place::in_detail}), 1);
}

TEST(InkWeights, AreNoPiecesOfAFade) {
    const Peak piece{50, 60, 40, 300, 0.7};
    EXPECT_EQ(weight_of(piece, {.place = Place::fade}), 0);
    EXPECT_GT(weight_of(piece, {.place = Place::spot}), 0.8);
    // Nor is it the ink of strokes, which end in edges.
    EXPECT_EQ(weight_of({50, 60, 40, 5000, 0.4}, {.place = Place::fade}), 0);
    // An ink from which a fade starts stands out far more.
    EXPECT_EQ(weight_of({50, 60, 40, 300, 0.95}, {.place = Place::fade}), 1);
}

// A light peak between a heavy ink and one that is lighter than itself is no blend of them.
TEST(InkWeights, AreExplainedByHeavierOnesOnly) {
    const Peak spot{18, 2, -2, 300, 1};
    const Peak heavier{18, 2, -2, 700, 1};
    const Peak mix = between(paper, spot, 0.5, 500, 1);
    EXPECT_EQ(weight_of(paper, spot, mix, {.place = Place::edge}), 1);
    EXPECT_EQ(weight_of(paper, heavier, mix, {.place = Place::edge}), 0);
}

TEST(InkWeights, AreNotTiny) {
    EXPECT_EQ(weight_of({50, 60, 40, 101, 1}), 1);
    EXPECT_EQ(weight_of({50, 60, 40, 99, 1}), 0);
    EXPECT_EQ(weight_of({50, 60, 40, 101, 1}, {.of_pixels = 1.1 * pixels}), 0);
}

TEST(InkWeights, WeighMoreTheMoreTheyStandOut) {
    double last = 0;
    for (const double prominence : {0.5, 0.55, 0.6, 0.65, 0.7, 0.75, 0.9}) {
        // Too light to be the ink of a stroke.
        const double weight = weight_of({50, 60, 40, 300, prominence});
        EXPECT_GE(weight, last);
        EXPECT_LE(weight, 1);
        last = weight;
    }
    EXPECT_EQ(weight_of({50, 60, 40, 300, 0.5}), 0);
    EXPECT_NEAR(weight_of({50, 60, 40, 300, 0.625}), 0.5, 1e-12);
    EXPECT_EQ(weight_of({50, 60, 40, 300, 0.75}), 1);
}

// Blends of an ink can lie so near to it in colour that it does not stand out there.
TEST(InkWeights, MayStandOutByTheirShape) {
    const Peak mix = between(paper, black, 0.3, 1100, 0.2);
    EXPECT_EQ(weight_of(mix, {.place = Place::spot}), 1);
    EXPECT_EQ(weight_of(mix, {.place = Place::stroke}), 0);
    EXPECT_EQ(weight_of(mix, {.place = Place::fade}), 0);
    EXPECT_EQ(weight_of(between(paper, black, 0.3, 900, 0.2), {.place = Place::spot}), 0);
}

TEST(InkWeights, OfThinStrokesAreOffEveryLine) {
    const Wanted in_stroke = {.place = Place::stroke};
    EXPECT_EQ(weight_of({50, 60, 40, 5000, 0.4}, in_stroke), 1);
    EXPECT_EQ(weight_of({50, 60, 40, 350, 0.4}, in_stroke), 0);
    EXPECT_EQ(weight_of(between(paper, black, 0.5, 5000, 0.4), in_stroke), 0);
    // Nor on one that is drawn out beyond its end.
    EXPECT_EQ(weight_of(paper, red, between(paper, red, 1.4, 5000, 0.4), in_stroke), 0);
    EXPECT_EQ(weight_of(paper, red, between(paper, red, 2.2, 5000, 0.4), in_stroke), 1);
}

// The skirt of an ink, within three radii of it, is none.
TEST(InkWeights, OfThinStrokesAreFarFromOthers) {
    const PeakPlaces nowhere(FlatMap{}, {}, radius);
    const auto beside_red = [&](double prominence, double found_with) {
        return ink_weights({red, {50, 60, 47, 5000, prominence}}, nowhere, 0.3, pixels, found_with)
            .weight[1];
    };
    EXPECT_EQ(beside_red(0.4, 2.2), 1);
    EXPECT_EQ(beside_red(0.4, 2.4), 0);
    // What stands out is, however near.
    EXPECT_EQ(beside_red(1, 2.4), 1);
}

TEST(InkWeights, AreTheSameInAnyOrder) {
    const Peak mix = between(paper, black, 0.5, 500, 1);
    const FlatScene drawn = scene(paper, black, mix, Place::edge);
    std::vector<Peak> peaks = {red, mix, paper, {40, -50, 20, 5000, 0.3}, black};
    const std::vector<double> wanted = {1, 0, 1, 1, 1};
    EXPECT_EQ(
        ink_weights(peaks, PeakPlaces(drawn.map(), peaks, radius), 0.3, pixels, radius).weight,
        wanted);
    std::reverse(peaks.begin(), peaks.end());
    std::vector<double> weights =
        ink_weights(peaks, PeakPlaces(drawn.map(), peaks, radius), 0.3, pixels, radius).weight;
    std::reverse(weights.begin(), weights.end());
    EXPECT_EQ(weights, wanted);
}

}  // namespace
}  // namespace tincture
