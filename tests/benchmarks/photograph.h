// A photograph-like picture for the benchmarks, drawn from a seed.
#pragma once

#include <cstdint>
#include <vector>

namespace tincture::benchmarks {

// Interleaved 8-bit RGB, rows from the top: soft fields of hue, lightness and strength at several
// scales, with a little sensor noise. The same bytes for the same arguments.
[[nodiscard]] std::vector<std::uint8_t> draw_photograph(int width, int height, std::uint64_t seed);

}  // namespace tincture::benchmarks
