// Elementary functions in plain arithmetic: a C library's differ in their last bit between
// processors, which could turn a decision.
#pragma once

namespace tincture {

// Natural logarithm of a positive finite x, within natural_log_error relative to the larger of 1
// and the result.
[[nodiscard]] double natural_log(double x);
inline constexpr double natural_log_error = 1e-15;

// 0 up to `low`, 1 from `high` on, and a cubic between that is smooth at both; low < high.
[[nodiscard]] double smooth_step(double value, double low, double high);

}  // namespace tincture
