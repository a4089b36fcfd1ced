#include "support/maths.h"

#include <algorithm>
#include <cmath>

namespace tincture {

double natural_log(double x) {
    int exponent = 0;
    double m = std::frexp(x, &exponent);  // exact: x = m * 2^exponent, 0.5 <= m < 1
    if (m < 0.70710678118654752) {
        m *= 2;
        --exponent;
    }
    // ln m = 2 atanh((m - 1) / (m + 1)); the argument is below 0.172, so eleven terms are enough.
    const double t = (m - 1) / (m + 1);
    const double t2 = t * t;
    double sum = 0;
    for (int k = 10; k >= 0; --k) sum = 1.0 / (2 * k + 1) + t2 * sum;
    return 2 * t * sum + exponent * 0.693147180559945309;
}

double smooth_step(double value, double low, double high) {
    const double t = std::clamp((value - low) / (high - low), 0.0, 1.0);
    return t * t * (3 - 2 * t);
}

}  // namespace tincture
