// Weighted colours: how many opaque pixels of a picture have each colour.
#pragma once

#include <cstdint>
#include <vector>

#include "colour/colour_space.h"
#include "picture/picture.h"

namespace tincture {

// Distinct colours of a picture, ascending by key, with their Lab and their number of pixels. Where
// a picture has more than max_exact_colours of them, cells of `cell_de` on a side stand for them:
// key and Lab are then the cell's and its mean. It depends on the set of pixels alone: neither
// their order nor the number of threads changes it.
struct ColourTable {
    std::vector<std::uint64_t> key;  // device samples, 16 bits each, first channel highest
    std::vector<float> L, a, b;      // in steps of 1 / lab_steps_per_unit
    std::vector<std::uint64_t> count;
    std::uint64_t opaque_pixels = 0;
    double cell_de = 0;        // 0: exact
    double inner_scatter = 0;  // sum over pixels of the squared dE76 to their cell's mean

    [[nodiscard]] std::size_t size() const noexcept { return key.size(); }
};

inline constexpr std::size_t max_exact_colours = 4'000'000;

// The key of device samples as they stand in a picture (8-bit samples are not widened).
template <typename Sample>
[[nodiscard]] inline std::uint64_t colour_key(const Sample* samples, int channels) {
    std::uint64_t key = 0;
    for (int c = 0; c < channels; ++c) key = key << 16 | samples[c];
    return key;
}

[[nodiscard]] constexpr double full_scale(int bits) {
    return bits == 16 ? 65535.0 : 255.0;
}

// The device values 0..1 behind a key.
void unpack_key(std::uint64_t key, std::size_t channels, double full_scale, float* device);

// Counts the opaque pixels of a picture whose samples are colours of `space`. A picture without an
// opaque pixel gives an empty table. Exact up to `exact_limit` distinct colours.
[[nodiscard]] ColourTable count_colours(const Picture& picture, const ColourSpace& space,
                                        std::size_t exact_limit = max_exact_colours);

}  // namespace tincture
