// Resolutions as files state them.
#pragma once

#include <optional>

#include "picture/picture.h"

namespace tincture {

inline constexpr double metres_per_inch = 0.0254;

// Nothing where a side is 0, negative, infinite or not a number: files with nonsense are common.
[[nodiscard]] std::optional<Resolution> sensible_resolution(double x_dpi, double y_dpi);

}  // namespace tincture
