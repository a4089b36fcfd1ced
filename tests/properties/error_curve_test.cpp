// The slow oracle of the error curve: from the picture and the written palette alone, pixel by
// pixel, in double precision.
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "choose/measure.h"
#include "cluster/sweep.h"
#include "colour/delta_e.h"
#include "picture/picture_space.h"
#include "support/parallel.h"
#include "tests/support/pictures.h"
#include "tests/support/points.h"
#include "tests/support/profiles.h"

namespace tincture {
namespace {

using test_support::LcmsLab;
using test_support::Random;

// A picture as it goes through the pipeline.
struct Measured {
    Study study;
    Sweep sweep;
    std::uint64_t opaque_pixels = 0;
};

Measured measured(const Picture& picture, std::size_t exact_limit = max_exact_colours,
                  const Centres& kept = {}) {
    const ColourTable table = count_colours(picture, picture_space(picture, "", {}), exact_limit);
    Measured result;
    SweepOptions options;
    options.kept = kept;
    result.sweep = sweep_counts(points_of(table), options);
    result.opaque_pixels = table.opaque_pixels;
    measure_curve(result.study, table, result.sweep, written_space(picture, "", {}));
    return result;
}

double squared(const Lab& one, const Lab& two) {
    const double off = delta_e_76(one, two);
    return off * off;
}

std::size_t nearest(const Lab& lab, const std::vector<Lab>& colours) {
    std::size_t best = 0;
    for (std::size_t k = 1; k < colours.size(); ++k) {
        if (squared(lab, colours[k]) < squared(lab, colours[best])) best = k;
    }
    return best;
}

struct SlowCost {
    double mse = 0, mean = 0, p95 = 0, max = 0;
    std::vector<std::uint64_t> pixels;
};

SlowCost slow_cost(const std::vector<Lab>& pixels, const std::vector<Lab>& colours) {
    SlowCost cost;
    cost.pixels.resize(colours.size());
    std::vector<double> differences;
    for (const Lab& lab : pixels) {
        const std::size_t k = nearest(lab, colours);
        ++cost.pixels[k];
        cost.mse += squared(lab, colours[k]);
        differences.push_back(delta_e_2000(lab, colours[k]));
        cost.mean += differences.back();
    }
    const auto n = static_cast<double>(pixels.size());
    std::sort(differences.begin(), differences.end());
    cost.mse /= n;
    cost.mean /= n;
    cost.p95 = differences[static_cast<std::size_t>(std::ceil(0.95 * n)) - 1];
    cost.max = differences.back();
    return cost;
}

double slow_closest_pair(const std::vector<Lab>& colours) {
    double least = std::numeric_limits<double>::infinity();
    for (std::size_t i = 0; i < colours.size(); ++i) {
        for (std::size_t j = 0; j < i; ++j) {
            least = std::min(least, delta_e_2000(colours[i], colours[j]));
        }
    }
    return least;
}

// The mean squared difference to the nearest exact centre.
double slow_evidence(const std::vector<Lab>& pixels, const Centres& centres) {
    std::vector<Lab> colours;
    for (const std::vector<double>& row : test_support::rows_of(centres)) {
        colours.push_back({row[0], row[1], row[2]});
    }
    double sum = 0;
    for (const Lab& lab : pixels) sum += squared(lab, colours[nearest(lab, colours)]);
    return sum / static_cast<double>(pixels.size());
}

void expect_error_near(double found, double wanted, double relative) {
    EXPECT_NEAR(found, wanted, std::max(1e-6, relative * wanted));
}

void expect_row(const CurvePoint& row, const Palette& palette, const std::vector<Lab>& pixels,
                const LcmsLab& written_lab) {
    std::vector<Lab> colours;
    for (const Swatch& swatch : palette.swatches) {
        colours.push_back(written_lab(
            {swatch.written.r / 255.0, swatch.written.g / 255.0, swatch.written.b / 255.0}));
        EXPECT_NEAR(delta_e_76(colours.back(), swatch.lab), 0, 1e-3);
    }
    const SlowCost slow = slow_cost(pixels, colours);
    expect_error_near(row.mse, slow.mse, 1e-4);
    EXPECT_NEAR(row.mean_de00, slow.mean, 2e-3);
    EXPECT_NEAR(row.p95_de00, slow.p95, 2e-3);
    EXPECT_NEAR(row.max_de00, slow.max, 2e-3);
    if (colours.size() < 2) {
        EXPECT_FALSE(row.closest_pair_de00);
    } else {
        EXPECT_NEAR(row.closest_pair_de00.value(), slow_closest_pair(colours), 2e-3);
    }
    // A pixel halfway between two colours may go to either.
    const auto n = static_cast<double>(pixels.size());
    for (std::size_t k = 0; k < colours.size(); ++k) {
        EXPECT_NEAR(static_cast<double>(palette.swatches[k].pixels),
                    static_cast<double>(slow.pixels[k]), 1e-3 * n);
        EXPECT_DOUBLE_EQ(palette.swatches[k].share,
                         static_cast<double>(palette.swatches[k].pixels) / n);
    }
}

std::vector<Lab> pixel_labs(const Picture& picture, const LcmsLab& lcms) {
    std::vector<Lab> labs;
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        if (test_support::is_opaque(picture, i)) labs.push_back(lcms(picture, i));
    }
    return labs;
}

// Every column of every row.
void expect_curve(const Measured& found, const std::vector<Lab>& pixels,
                  const LcmsLab& written_lab) {
    ASSERT_EQ(found.opaque_pixels, pixels.size());
    ASSERT_EQ(found.study.curve.size(), found.sweep.centres.size());
    ASSERT_EQ(found.study.palettes.size(), found.sweep.centres.size());
    for (std::size_t i = 0; i < found.study.curve.size(); ++i) {
        const CurvePoint& row = found.study.curve[i];
        SCOPED_TRACE("count " + std::to_string(row.count));
        EXPECT_EQ(row.count, found.sweep.centres[i].count);
        EXPECT_EQ(found.study.palettes[i].count, row.count);
        ASSERT_EQ(found.study.palettes[i].swatches.size(), static_cast<std::size_t>(row.count));
        expect_error_near(row.evidence_mse, slow_evidence(pixels, found.sweep.centres[i]), 1e-4);
        expect_row(row, found.study.palettes[i], pixels, written_lab);
    }
}

TEST(ErrorCurve, OfAFlatPicture) {
    Random random(1);
    Picture picture = test_support::flat_picture(random, ColourModel::rgb, {130, 70}, 12);
    test_support::punch_holes(picture, random);
    const Measured found = measured(picture);
    const LcmsLab lcms;
    expect_curve(found, pixel_labs(picture, lcms), lcms);
    ASSERT_EQ(found.study.curve.size(), 12U);
    const CurvePoint& last = found.study.curve.back();
    EXPECT_EQ(last.evidence_mse, 0);
    EXPECT_EQ(last.mse, 0) << "colours of an 8-bit picture are written as they are";
    EXPECT_EQ(last.max_de00, 0);
}

TEST(ErrorCurve, OfANoisyPicture) {
    Random random(2);
    Picture picture = test_support::photograph_like(random, 8, {120, 90});
    for (std::size_t i = 0; i < picture.samples8.size(); ++i) {
        const double noisy = picture.samples8[i] + 25 * random.bell();
        picture.samples8[i] = static_cast<std::uint8_t>(std::clamp(noisy, 0.0, 255.0));
    }
    const LcmsLab lcms;
    const Measured found = measured(picture);
    ASSERT_EQ(found.study.curve.size(), 25U);
    expect_curve(found, pixel_labs(picture, lcms), lcms);
}

TEST(ErrorCurve, OfASixteenBitPicture) {
    Random random(3);
    const Picture picture = test_support::photograph_like(random, 16, {120, 90});
    const LcmsLab lcms;
    expect_curve(measured(picture), pixel_labs(picture, lcms), lcms);
}

TEST(ErrorCurve, OfAWideGamutPicture) {
    Random random(4);
    Picture picture = test_support::photograph_like(random, 8, {120, 90});
    picture.icc = test_support::wide_gamut_profile();
    const LcmsLab lcms(picture.icc, ColourModel::rgb);
    expect_curve(measured(picture), pixel_labs(picture, lcms), lcms);
    // What lies outside sRGB is measured as it is written, not clipped.
    Picture noise = test_support::noise_picture(random, ColourModel::rgb, 8, {80, 60}, 6);
    noise.icc = picture.icc;
    expect_curve(measured(noise), pixel_labs(noise, lcms), lcms);
}

TEST(ErrorCurve, OfGreyAndOfInks) {
    Random random(5);
    const LcmsLab srgb;
    Picture grey = test_support::noise_picture(random, ColourModel::grey, 16, {90, 60}, 65536);
    grey.icc = test_support::grey_profile();
    expect_curve(measured(grey), pixel_labs(grey, {grey.icc, ColourModel::grey}), srgb);
    Picture inks = test_support::noise_picture(random, ColourModel::cmyk, 8, {90, 60}, 4);
    inks.icc = test_support::cmyk_profile();
    expect_curve(measured(inks), pixel_labs(inks, {inks.icc, ColourModel::cmyk}), srgb);
}

TEST(ErrorCurve, WithKeptColours) {
    Random random(6);
    const Picture picture = test_support::photograph_like(random, 8, {120, 90});
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    Centres kept{3, 2, {}};
    for (const Rgb8 rgb : {Rgb8{255, 0, 255}, Rgb8{20, 40, 60}}) {
        const Lab lab = space.lab_of(rgb);
        for (const double x : {lab.L, lab.a, lab.b}) kept.x.push_back(static_cast<float>(x));
    }
    const Measured found = measured(picture, max_exact_colours, kept);
    const LcmsLab lcms;
    expect_curve(found, pixel_labs(picture, lcms), lcms);
    for (const Palette& palette : found.study.palettes) {
        int marked = 0;
        for (const Swatch& swatch : palette.swatches) {
            if (!swatch.kept) continue;
            ++marked;
            EXPECT_TRUE(swatch.written == (Rgb8{255, 0, 255}) ||
                        swatch.written == (Rgb8{20, 40, 60}));
        }
        EXPECT_EQ(marked, 2);
    }
}

// Figures of cells must not be sold as figures of every pixel: they are near them.
TEST(ErrorCurve, WhereCellsStandForColours) {
    Random random(7);
    const Picture picture = test_support::photograph_like(random, 16, {120, 90});
    const LcmsLab lcms;
    const std::vector<Lab> pixels = pixel_labs(picture, lcms);
    const Measured found = measured(picture, 100);
    for (std::size_t i = 0; i < found.study.curve.size(); ++i) {
        const CurvePoint& row = found.study.curve[i];
        std::vector<Lab> colours;
        for (const Swatch& swatch : found.study.palettes[i].swatches) colours.push_back(swatch.lab);
        const SlowCost slow = slow_cost(pixels, colours);
        EXPECT_NEAR(row.mse, slow.mse, 2e-3 * slow.mse);
        EXPECT_GE(row.mse, slow.mse * (1 - 1e-4)) << "never sold as less";
        EXPECT_NEAR(row.mean_de00, slow.mean, 0.02);
        EXPECT_NEAR(row.p95_de00, slow.p95, 0.15);
    }
}

TEST(ErrorCurve, ThreadsHaveNoSay) {
    Random random(8);
    const Picture picture = test_support::photograph_like(random, 8, {150, 100});
    set_thread_count(1);
    const Measured wanted = measured(picture);
    for (const int threads : {2, 3, 7}) {
        set_thread_count(threads);
        const Measured found = measured(picture);
        for (std::size_t i = 0; i < wanted.study.curve.size(); ++i) {
            const CurvePoint& one = wanted.study.curve[i];
            const CurvePoint& two = found.study.curve[i];
            EXPECT_EQ(one.evidence_mse, two.evidence_mse);
            EXPECT_EQ(one.mse, two.mse);
            EXPECT_EQ(one.mean_de00, two.mean_de00);
            EXPECT_EQ(one.p95_de00, two.p95_de00);
            EXPECT_EQ(one.max_de00, two.max_de00);
            EXPECT_EQ(one.closest_pair_de00, two.closest_pair_de00);
            EXPECT_EQ(one.label_bits, two.label_bits);
            ASSERT_EQ(one.loss.has_value(), two.loss.has_value());
            if (one.loss) {
                EXPECT_EQ(one.loss->colour, two.loss->colour);
                EXPECT_EQ(one.loss->into, two.loss->into);
                EXPECT_EQ(one.loss->mean_de00, two.loss->mean_de00);
                EXPECT_EQ(one.loss->max_de00, two.loss->max_de00);
            }
            for (std::size_t k = 0; k < wanted.study.palettes[i].swatches.size(); ++k) {
                EXPECT_EQ(wanted.study.palettes[i].swatches[k].written,
                          found.study.palettes[i].swatches[k].written);
                EXPECT_EQ(wanted.study.palettes[i].swatches[k].name,
                          found.study.palettes[i].swatches[k].name);
            }
        }
    }
    set_thread_count(0);
}

}  // namespace
}  // namespace tincture
