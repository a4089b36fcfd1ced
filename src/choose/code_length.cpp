#include "choose/code_length.h"

#include <algorithm>
#include <numeric>

#include "support/maths.h"

namespace tincture {
namespace {

// (1 + 1 / m)^m by multiplication alone; 1 for m = 0.
double compounded(std::uint64_t m) {
    double result = 1;
    if (m == 0) return result;
    double square = 1 + 1 / static_cast<double>(m);
    for (std::uint64_t power = m; power > 0; power /= 2) {
        if (power % 2 == 1) result *= square;
        square *= square;
    }
    return result;
}

// C(2, n) = sum over h of binom(n, h) (h / n)^h ((n - h) / n)^(n - h), with 0^0 = 1. A term is the
// one before it times compounded(h) / compounded(n - h - 1), and the second half mirrors the first.
double complexity_of_two(std::uint64_t n) {
    if (n == 0) return 1;
    double term = 1;
    double sum = 0;
    for (std::uint64_t h = 0; 2 * h < n; ++h) {
        sum += 2 * term;
        term *= compounded(h) / compounded(n - h - 1);
    }
    return n % 2 == 0 ? sum + term : sum;
}

}  // namespace

std::vector<double> log_label_complexity(int kinds, std::uint64_t n) {
    std::vector<double> logs = {0.0};
    // Ratios of one sum to the one before it: the sums themselves soon exceed any number.
    double ratio = complexity_of_two(n);
    for (int K = 2; K <= kinds; ++K) {
        logs.push_back(logs.back() + natural_log(ratio));
        ratio = 1 + static_cast<double>(n) / (K - 1) / ratio;
    }
    return logs;
}

double label_entropy(std::span<const double> counts) {
    const double n = std::accumulate(counts.begin(), counts.end(), 0.0);
    double sum = 0;
    for (const double h : counts) {
        if (h > 0) sum -= h / n * natural_log(h / n);
    }
    return std::max(sum, 0.0);
}

double label_code_length(std::span<const double> counts) {
    const double n = std::accumulate(counts.begin(), counts.end(), 0.0);
    const std::vector<double> complexity =
        log_label_complexity(static_cast<int>(counts.size()), static_cast<std::uint64_t>(n));
    return n * label_entropy(counts) + complexity.back();
}

double bayes_information(double W, std::span<const double> sizes, int p) {
    constexpr double two_pi = 6.283185307179586;
    const double n = std::accumulate(sizes.begin(), sizes.end(), 0.0);
    const auto k = static_cast<double>(sizes.size());
    const double s2 = W / (p * (n - k));
    const double log_likelihood =
        -n * label_entropy(sizes) - n * p / 2 * natural_log(two_pi * s2) - p * (n - k) / 2;
    return log_likelihood - k * (p + 1) / 2 * natural_log(n);
}

}  // namespace tincture
