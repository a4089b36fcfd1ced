#include "evidence/noise.h"

#include <algorithm>
#include <cmath>
#include <cstddef>

namespace tincture {
namespace {

constexpr std::uint32_t sampled_rows = 64;

// Of the squares of three channels' second differences, which have six times the variance of the
// pixels: their sum's median is 2.366 times that of one channel (chi-squared, three degrees).
constexpr double median_of_sum = 2.366 / 3;
constexpr double variance_of_difference = 6;

// What differs by less than this (dE76) from its neighbours is even; by more, it is no noise.
constexpr double even = 0.15;
constexpr double no_noise = 8;
constexpr double least_uneven = 0.05;  // part of the pixels

// By the median: 0 where more than half of the picture is even.
double of_all(std::vector<std::int32_t>& squares) {
    if (squares.empty()) return 0;
    const auto middle = squares.begin() + static_cast<std::ptrdiff_t>(squares.size() / 2);
    std::nth_element(squares.begin(), middle, squares.end());
    return std::sqrt(*middle / (variance_of_difference * median_of_sum));
}

// Of the part that is uneven: JPEG leaves some blocks even and others not.
double of_the_uneven(const std::vector<std::int32_t>& squares) {
    constexpr double one = variance_of_difference * lab_band_steps * lab_band_steps;
    double sum = 0;
    std::size_t n = 0;
    for (const std::int32_t square : squares) {
        if (square < even * even * one || square > no_noise * no_noise * one) continue;
        sum += square;
        ++n;
    }
    if (static_cast<double>(n) <= least_uneven * static_cast<double>(squares.size())) return 0;
    return std::sqrt(sum / (variance_of_difference * static_cast<double>(n)));
}

}  // namespace

double measure_noise(const PixelLab& pixels) {
    if (pixels.width() < 3) return 0;
    std::vector<std::int32_t> squares;
    LabBand row;
    const std::uint32_t step = std::max(1U, pixels.height() / sampled_rows);
    for (std::uint32_t y = step / 2; y < pixels.height(); y += step) {
        pixels.read(y, 1, row);
        for (std::size_t x = 1; x + 1 < pixels.width(); ++x) {
            if (row.L[x - 1] == no_lab || row.L[x] == no_lab || row.L[x + 1] == no_lab) continue;
            const auto bend = [x](const std::vector<std::int16_t>& plane) {
                return plane[x - 1] - 2 * plane[x] + plane[x + 1];
            };
            // Far more than any noise, so that the sum fits.
            const auto bounded = [&](const std::vector<std::int16_t>& plane) {
                return std::clamp(bend(plane), -20'000, 20'000);
            };
            const int L = bounded(row.L);
            const int a = bounded(row.a);
            const int b = bounded(row.b);
            squares.push_back(L * L + a * a + b * b);
        }
    }
    return std::max(of_all(squares), of_the_uneven(squares)) / lab_band_steps;
}

}  // namespace tincture
