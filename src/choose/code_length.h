// How long a description of clustered data is.
#pragma once

#include <cstdint>
#include <span>
#include <vector>

namespace tincture {

// ln C(K, n) for K = 1 to `kinds`, so that result[0] belongs to K = 1: what the normalised maximum
// likelihood code for n labels of K kinds takes beyond their entropy, in nats. Exact sums for K =
// 2, the recurrence C(K+2, n) = C(K+1, n) + n / K C(K, n) beyond. Kontkanen, Myllymaki, "A
// linear-time algorithm for computing the multinomial stochastic complexity", Information
// Processing Letters 103 (2007) 227-233. `kinds` from 1 on; takes time in proportion to n.
[[nodiscard]] std::vector<double> log_label_complexity(int kinds, std::uint64_t n);

// The entropy of labels that stand so often (not all never), in nats a label.
[[nodiscard]] double label_entropy(std::span<const double> counts);

// The length of the normalised maximum likelihood code for labels that stand so often each (whole
// numbers), in nats.
[[nodiscard]] double label_code_length(std::span<const double> counts);

// The Bayesian information criterion of clusters as spherical Gaussians of one shared variance:
//   s2 = W / (p (n - k)),  BIC = sum n_j ln(n_j / n) - n p / 2 ln(2 pi s2) - p (n - k) / 2
//                                - k (p + 1) / 2 ln n
// for n points in p dimensions, k clusters of n_j points each, and their sum of squares W > 0; the
// largest is best. After Pelleg, Moore, "X-means", ICML 2000, 727-734, whose printed divisors leave
// p out here and there; this is the maximum of the likelihood but for the n - k.
[[nodiscard]] double bayes_information(double W, std::span<const double> sizes, int p);

}  // namespace tincture
