// What must hold from a picture's pixels to its labels.
#include <gtest/gtest.h>

#include "choose/measure.h"
#include "choose/proposal.h"
#include "cluster/sweep.h"
#include "label/label_map.h"
#include "picture/picture_space.h"
#include "tests/support/pictures.h"
#include "tests/support/profiles.h"

namespace tincture {
namespace {

using test_support::Random;

struct Outcome {
    Study study;
    std::vector<std::vector<std::uint8_t>> labels;  // for each count
};

Outcome run(const Picture& picture) {
    const ColourSpace space = picture_space(picture, "", {});
    const ColourTable table = count_colours(picture, space);
    SweepOptions options;
    Outcome result;
    result.study.picture.distinct_colours = table.size();
    measure_curve(result.study, table, sweep_counts(points_of(table), options),
                  written_space(picture, "", {}));
    result.study.proposal = propose(result.study);
    for (const Palette& palette : result.study.palettes) {
        const Samples<std::uint8_t> labels = label_pixels(picture, table, space, palette);
        result.labels.emplace_back(labels.data(), labels.data() + labels.size());
    }
    return result;
}

std::vector<Picture> some_pictures(Random& random) {
    std::vector<Picture> pictures;
    pictures.push_back(test_support::photograph_like(random, 8, {130, 90}));
    pictures.push_back(test_support::photograph_like(random, 16, {130, 90}));
    pictures.push_back(test_support::flat_picture(random, ColourModel::rgb, {130, 90}, 9));
    pictures.push_back(test_support::flat_picture(random, ColourModel::grey, {130, 90}, 30));
    pictures.push_back(test_support::noise_picture(random, ColourModel::cmyk, 16, {70, 50}, 3));
    pictures.back().icc = test_support::cmyk_profile();
    pictures.push_back(test_support::noise_picture(random, ColourModel::rgb, 8, {70, 50}, 2));
    pictures.back().icc = test_support::wide_gamut_profile();
    for (std::size_t i = 1; i < pictures.size(); i += 2) {
        test_support::punch_holes(pictures[i], random);
    }
    return pictures;
}

// The same rows once more below.
Picture stacked(const Picture& picture) {
    std::vector<std::uint16_t> samples;
    std::vector<std::uint8_t> opaque;
    const std::size_t n = picture.pixel_count();
    const std::size_t channels = static_cast<std::size_t>(channel_count(picture.model));
    for (std::size_t i = 0; i < 2 * n * channels; ++i) {
        samples.push_back(test_support::sample_at(picture, i % (n * channels)));
    }
    for (std::size_t i = 0; i < 2 * n && !picture.opaque.empty(); ++i) {
        opaque.push_back(picture.opaque[i % n]);
    }
    Picture result = test_support::picture_of(picture.model, picture.bits, picture.width,
                                              2 * picture.height, samples, opaque);
    result.icc = picture.icc;
    return result;
}

void expect_same_curve(const Study& one, const Study& two, std::uint64_t times) {
    ASSERT_EQ(one.curve.size(), two.curve.size());
    for (std::size_t i = 0; i < one.curve.size(); ++i) {
        EXPECT_EQ(one.curve[i].evidence_mse, two.curve[i].evidence_mse);
        EXPECT_EQ(one.curve[i].mse, two.curve[i].mse);
        EXPECT_EQ(one.curve[i].mean_de00, two.curve[i].mean_de00);
        EXPECT_EQ(one.curve[i].p95_de00, two.curve[i].p95_de00);
        EXPECT_EQ(one.curve[i].max_de00, two.curve[i].max_de00);
        for (std::size_t k = 0; k < one.palettes[i].swatches.size(); ++k) {
            const Swatch& swatch = one.palettes[i].swatches[k];
            const Swatch& other = two.palettes[i].swatches[k];
            EXPECT_EQ(swatch.written, other.written);
            EXPECT_EQ(swatch.share, other.share);
            EXPECT_EQ(swatch.pixels * times, other.pixels);
        }
    }
    EXPECT_EQ(one.proposal.count, two.proposal.count);
    EXPECT_EQ(one.proposal.sentence, two.proposal.sentence);
}

TEST(Pipeline, DoublingEveryPixelChangesNothing) {
    Random random(1);
    for (const Picture& picture : some_pictures(random)) {
        expect_same_curve(run(picture).study, run(stacked(picture)).study, 2);
    }
}

TEST(Pipeline, TheOrderOfPixelsChangesNothing) {
    Random random(2);
    for (const Picture& picture : some_pictures(random)) {
        Picture mixed = test_support::shuffled_pixels(picture, random);
        mixed.icc = picture.icc;
        expect_same_curve(run(picture).study, run(mixed).study, 1);
    }
}

TEST(Pipeline, LabelsAreThoseThatThePalettesCount) {
    Random random(3);
    for (const Picture& picture : some_pictures(random)) {
        const Outcome result = run(picture);
        std::uint64_t opaque = 0;
        for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
            opaque += test_support::is_opaque(picture, i) ? 1 : 0;
        }
        for (std::size_t i = 0; i < result.study.palettes.size(); ++i) {
            const Palette& palette = result.study.palettes[i];
            std::vector<std::uint64_t> found(static_cast<std::size_t>(palette.count) + 1, 0);
            for (const std::uint8_t label : result.labels[i]) ++found.at(label);
            double share = 0;
            for (std::size_t k = 0; k < palette.swatches.size(); ++k) {
                EXPECT_EQ(found[k], palette.swatches[k].pixels);
                share += palette.swatches[k].share;
                if (k > 0) {
                    EXPECT_LE(found[k], found[k - 1]) << "most pixels first";
                }
            }
            EXPECT_EQ(found.back(), picture.pixel_count() - opaque);
            EXPECT_NEAR(share, 1, 1e-12);
        }
    }
}

// All colours of a picture of 8 bits leave no error.
TEST(Pipeline, TheErrorEndsAtNothing) {
    Random random(4);
    for (const bool wide : {false, true}) {
        for (const ColourModel model : {ColourModel::rgb, ColourModel::grey}) {
            Picture picture = test_support::flat_picture(random, model, {90, 60}, 14);
            if (wide && model == ColourModel::rgb) picture.icc = test_support::wide_gamut_profile();
            const Study study = run(picture).study;
            EXPECT_EQ(study.curve.back().evidence_mse, 0);
            EXPECT_LT(study.curve.back().mse, 1e-6);
            EXPECT_LT(study.curve.back().max_de00, 1e-3);
            EXPECT_EQ(study.proposal.count, study.curve.back().count);
        }
    }
}

}  // namespace
}  // namespace tincture
