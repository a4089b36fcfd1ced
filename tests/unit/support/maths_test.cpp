#include "support/maths.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;

// Relative to the larger of 1 and the result, as the error is stated; long double is far closer.
double error_at(double x) {
    const long double wanted = std::log(static_cast<long double>(x));
    const long double off = std::abs(static_cast<long double>(natural_log(x)) - wanted);
    return static_cast<double>(off / std::max(1.0L, std::abs(wanted)));
}

TEST(NaturalLog, StaysWithinItsError) {
    Random random(1);
    double largest = 0;
    for (int i = 0; i < 300'000; ++i) {
        largest =
            std::max(largest, error_at(std::ldexp(random.between(0.5, 1),
                                                  static_cast<int>(random.below(2000)) - 1000)));
        largest = std::max(largest, error_at(random.between(0.5, 2)));
        largest = std::max(largest, error_at(random.between(0.5, 5000)));
    }
    EXPECT_LE(largest, natural_log_error);
    EXPECT_GE(largest, natural_log_error / 20);
}

TEST(NaturalLog, AtTheEndsAndTheJoint) {
    using Limits = std::numeric_limits<double>;
    const double joint = 0.70710678118654752;
    for (const double x : {Limits::min(), Limits::max(), Limits::denorm_min(), 1e-310, joint,
                           std::nextafter(joint, 0.0), std::nextafter(joint, 1.0), 2 * joint,
                           std::nextafter(1.0, 0.0), std::nextafter(1.0, 2.0)}) {
        EXPECT_LE(error_at(x), natural_log_error) << x;
    }
    EXPECT_EQ(natural_log(1), 0);
    EXPECT_NEAR(natural_log(2.718281828459045), 1, 1e-15);
}

TEST(NaturalLog, NeverFalls) {
    Random random(2);
    for (int i = 0; i < 100'000; ++i) {
        const double x = random.between(0.5, 2);
        EXPECT_LE(natural_log(x), natural_log(x * (1 + 1e-13)));
    }
}

}  // namespace
}  // namespace tincture
