#pragma once

#include "histogram/pixel_lab.h"

namespace tincture {

// Rows of context that smoothing needs above and below.
inline constexpr std::uint32_t smoothing_halo = 2;

// Smooths a band without crossing edges: each pixel becomes the mean of those within two pixels of
// it whose colour differs by at most `reach` (dE76): the sigma filter (Lee 1983, Computer Vision,
// Graphics, and Image Processing 24:255-269). Whole numbers throughout. The outermost rows use
// what the band has of their neighbours; read more rows than are wanted.
void smooth_band(const LabBand& band, double reach, LabBand& smoothed);

}  // namespace tincture
