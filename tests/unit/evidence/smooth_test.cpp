#include "evidence/smooth.h"

#include <gtest/gtest.h>

#include <array>
#include <cmath>

#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;
using Colour = std::array<int, 3>;

Colour at(const LabBand& band, int x, int y) {
    const auto i = static_cast<std::size_t>(y) * band.width + static_cast<std::size_t>(x);
    return {band.L[i], band.a[i], band.b[i]};
}

// The mean, rounded half away from zero, of the pixels of 5 x 5 whose colour is within reach.
Colour plain_mean(const LabBand& band, int x, int y, double reach) {
    const double steps = std::round(std::min(reach, 100.0) * lab_band_steps);
    const Colour centre = at(band, x, y);
    std::array<double, 3> sum{};
    int n = 0;
    for (int j = std::max(0, y - 2); j <= std::min(static_cast<int>(band.rows) - 1, y + 2); ++j) {
        for (int i = std::max(0, x - 2); i <= std::min(static_cast<int>(band.width) - 1, x + 2);
             ++i) {
            const Colour other = at(band, i, j);
            double squared = 0;
            for (std::size_t d = 0; d < 3; ++d) squared += std::pow(other[d] - centre[d], 2);
            if (squared > steps * steps) continue;
            for (std::size_t d = 0; d < 3; ++d) sum[d] += other[d] - centre[d];
            ++n;
        }
    }
    Colour mean{};
    for (std::size_t d = 0; d < 3; ++d) {
        mean[d] = centre[d] + static_cast<int>(std::round(sum[d] / n));
    }
    return mean;
}

// Colours around two centres, some pixels not opaque.
LabBand random_band(Random& random, std::uint32_t width, std::uint32_t rows, double spread) {
    LabBand band{width, 7, rows, {}, {}, {}};
    for (std::size_t i = 0; i < std::size_t{width} * rows; ++i) {
        const double centre = random.below(3) == 0 ? 60 : 30;
        band.L.push_back(lab_step(static_cast<float>(centre + spread * random.bell())));
        band.a.push_back(lab_step(static_cast<float>(spread * random.bell() - centre)));
        band.b.push_back(lab_step(static_cast<float>(spread * random.bell() + centre)));
        if (random.below(9) == 0) band.L.back() = no_lab;
    }
    return band;
}

TEST(SmoothBand, GivesThePlainMeans) {
    Random random(31);
    for (const std::uint32_t width : {1U, 2U, 3U, 4U, 5U, 6U, 37U}) {
        for (const std::uint32_t rows : {1U, 2U, 4U, 5U, 6U, 11U}) {
            for (const double reach : {0.0, 0.4, 3.0, 20.0, 99.9, 400.0}) {
                SCOPED_TRACE(testing::Message() << width << " x " << rows << ", " << reach);
                const LabBand band = random_band(random, width, rows, random.between(0.2, 9));
                LabBand smoothed;
                smooth_band(band, reach, smoothed);
                ASSERT_EQ(smoothed.width, width);
                ASSERT_EQ(smoothed.rows, rows);
                EXPECT_EQ(smoothed.first_row, band.first_row);
                for (int y = 0; y < static_cast<int>(rows); ++y) {
                    for (int x = 0; x < static_cast<int>(width); ++x) {
                        ASSERT_EQ(at(smoothed, x, y), plain_mean(band, x, y, reach));
                    }
                }
            }
        }
    }
}

TEST(SmoothBand, ReachesAsFarAsItsHalo) {
    Random random(32);
    const LabBand band = random_band(random, 20, 30, 3);
    LabBand changed = band;
    for (std::size_t x = 0; x < 20; ++x) changed.L[10 * 20 + x] = lab_step(45);
    LabBand one;
    LabBand two;
    smooth_band(band, 50, one);
    smooth_band(changed, 50, two);
    const auto first_change = std::mismatch(one.L.begin(), one.L.end(), two.L.begin()).first;
    EXPECT_EQ((first_change - one.L.begin()) / 20, 10 - smoothing_halo);
    const auto last_change = std::mismatch(one.L.rbegin(), one.L.rend(), two.L.rbegin()).first;
    EXPECT_EQ(29 - (last_change - one.L.rbegin()) / 20, 10 + smoothing_halo);
}

TEST(SmoothBand, CrossesNoEdgeAndQuietsNoise) {
    Random random(33);
    LabBand band{64, 0, 64, {}, {}, {}};
    for (std::size_t i = 0; i < 64 * 64; ++i) {
        band.L.push_back(lab_step(static_cast<float>((i % 64 < 32 ? 30 : 60) + random.bell())));
        band.a.push_back(lab_step(static_cast<float>(random.bell())));
        band.b.push_back(lab_step(static_cast<float>(random.bell())));
    }
    LabBand smoothed;
    smooth_band(band, 8, smoothed);
    double squares = 0;
    for (std::size_t i = 0; i < 64 * 64; ++i) {
        const double off = smoothed.L[i] / 64.0 - (i % 64 < 32 ? 30 : 60);
        EXPECT_LT(std::abs(off), 2);
        squares += off * off;
    }
    // A mean of 25 has a fifth of the deviation; of fewer along borders and edges, more.
    EXPECT_LT(std::sqrt(squares / (64 * 64)), 0.25);
    EXPECT_GT(std::sqrt(squares / (64 * 64)), 0.18);
}

TEST(SmoothBand, TransparentStaysTransparentAndTouchesNothing) {
    Random random(34);
    const LabBand band = random_band(random, 40, 40, 2);
    LabBand other = band;
    for (std::size_t i = 0; i < band.L.size(); ++i) {
        if (band.L[i] == no_lab) other.a[i] = other.b[i] = 0;
    }
    LabBand one;
    LabBand two;
    smooth_band(band, 100, one);
    smooth_band(other, 100, two);
    for (std::size_t i = 0; i < band.L.size(); ++i) {
        EXPECT_EQ(band.L[i] == no_lab, one.L[i] == no_lab);
        if (band.L[i] == no_lab) continue;
        EXPECT_EQ(one.L[i], two.L[i]);
        EXPECT_EQ(one.a[i], two.a[i]);
        EXPECT_EQ(one.b[i], two.b[i]);
    }
}

}  // namespace
}  // namespace tincture
