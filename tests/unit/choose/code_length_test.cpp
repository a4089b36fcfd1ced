#include "choose/code_length.h"

#include <gtest/gtest.h>

#include <cmath>

#include "cluster/kmeans.h"
#include "cluster/sweep.h"
#include "tests/support/iris.h"

namespace tincture {
namespace {

using test_support::Random;

// Computed outside in exact arithmetic; see SOURCES.md.
TEST(LabelComplexity, IsThatOfTheTables) {
    struct Known {
        int kinds;
        std::uint64_t n;
        double complexity;
    };
    constexpr Known table[] = {
        {2, 1, 2},
        {2, 2, 2.5},
        {2, 10, 4.660215680},
        {3, 10, 14.660215680},
        {4, 10, 37.961294080},
        {8, 10, 658.275799040},
        {2, 100, 13.209960630},
        {3, 100, 113.209960630},
        {4, 100, 773.707992141},
        {2, 150, 16.024899960},
        {3, 150, 166.024899960},
        {8, 150, 1875166.781166},
    };
    for (const Known& known : table) {
        const std::vector<double> logs = log_label_complexity(known.kinds, known.n);
        ASSERT_EQ(logs.size(), static_cast<std::size_t>(known.kinds));
        EXPECT_EQ(logs.front(), 0) << "one kind takes nothing";
        EXPECT_NEAR(std::exp(logs.back()), known.complexity, 1e-9 * known.complexity)
            << known.kinds << " " << known.n;
    }
}

// By its definition: the sum over all label sequences of their largest likelihood.
TEST(LabelComplexity, IsTheSumOverAllSequences) {
    for (const std::size_t kinds : {2U, 3U}) {
        for (const std::size_t n : {1U, 2U, 3U, 4U, 5U, 6U}) {
            double sum = 0;
            const auto sequences = static_cast<std::size_t>(
                std::lround(std::pow(static_cast<double>(kinds), static_cast<double>(n))));
            for (std::size_t sequence = 0; sequence < sequences; ++sequence) {
                std::vector<double> counts(kinds, 0.0);
                for (std::size_t i = 0, rest = sequence; i < n; ++i, rest /= kinds) {
                    ++counts[rest % kinds];
                }
                double likelihood = 1;
                for (const double h : counts) {
                    likelihood *= std::pow(h / static_cast<double>(n), h);
                }
                sum += likelihood;
            }
            EXPECT_NEAR(std::exp(log_label_complexity(static_cast<int>(kinds), n).back()), sum,
                        1e-12 * sum)
                << kinds << " " << n;
        }
    }
}

TEST(LabelComplexity, OfManyKindsIsFinite) {
    const std::vector<double> logs = log_label_complexity(257, 100'000);
    for (std::size_t i = 1; i < logs.size(); ++i) {
        EXPECT_TRUE(std::isfinite(logs[i]));
        EXPECT_GT(logs[i], logs[i - 1]);
    }
    EXPECT_EQ(log_label_complexity(1, 0), (std::vector<double>{0}));
    EXPECT_EQ(log_label_complexity(3, 0), (std::vector<double>{0, 0, 0}));
}

// -sum h ln(h / n) + ln C(K, n), by hand.
TEST(LabelCodeLength, IsEntropyAndComplexity) {
    EXPECT_NEAR(label_entropy(std::vector<double>{5, 5}), std::log(2.0), 1e-15);
    EXPECT_NEAR(label_entropy(std::vector<double>{3, 0, 1}),
                0.75 * std::log(4.0 / 3) + 0.25 * std::log(4.0), 1e-15);
    EXPECT_EQ(label_entropy(std::vector<double>{7}), 0);
    EXPECT_NEAR(label_code_length(std::vector<double>{5, 5}),
                10 * std::log(2.0) + std::log(4.660215680), 1e-9);
    EXPECT_NEAR(label_code_length(std::vector<double>{10, 0, 0}), std::log(14.660215680), 1e-9);
    EXPECT_EQ(label_code_length(std::vector<double>{10}), 0);
    EXPECT_NEAR(label_code_length(std::vector<double>{50, 62, 38}),
                50 * std::log(3.0) + 62 * std::log(150.0 / 62) + 38 * std::log(150.0 / 38) +
                    std::log(166.024899960),
                1e-8);
}

// Computed outside with numpy 1.24.2 from the best known partitions; see SOURCES.md.
TEST(BayesInformation, OfIris) {
    const std::vector<double> wanted = {-902.049415, -562.637282, -442.078016, -400.848336,
                                        -373.127082, -367.913944, -368.114075, -356.211830,
                                        -362.579042, -366.358517};
    const WeightedPoints points = test_support::iris_points();
    const std::vector<double> best = test_support::iris_best_known();
    ASSERT_EQ(best.size(), wanted.size());
    std::size_t exact = 0;
    std::size_t largest = 0;
    std::vector<double> found;
    for (std::size_t i = 0; i < best.size(); ++i) {
        const test_support::Clustered clustered =
            test_support::best_of_starts(points, static_cast<int>(i) + 1, best[i], 400);
        found.push_back(bayes_information(clustered.W, clustered.sizes, points.dims));
        if (found[i] > found[largest]) largest = i;
        // Where the best partition was not met, nothing can be said of its criterion.
        if (clustered.W > best[i] * (1 + 1e-6)) continue;
        ++exact;
        EXPECT_NEAR(found[i], wanted[i], 2e-4) << i + 1;
    }
    EXPECT_GE(exact, 8U);
    EXPECT_EQ(largest + 1, 8U);
}

}  // namespace
}  // namespace tincture
