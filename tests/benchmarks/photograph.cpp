#include "photograph.h"

#include <algorithm>
#include <array>
#include <cmath>

namespace tincture::benchmarks {
namespace {

// SplitMix64 (Steele, Lea, Flood 2014).
struct Random {
    std::uint64_t state;
    double uniform() {  // 0 to 1
        state += 0x9E3779B97F4A7C15U;
        std::uint64_t z = state;
        z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9U;
        z = (z ^ (z >> 27)) * 0x94D049BB133111EBU;
        z ^= z >> 31;
        return static_cast<double>(z >> 11) / 9007199254740992.0;
    }
    double bell() {  // about normal, unit variance
        double sum = -6;
        for (int i = 0; i < 12; ++i) sum += uniform();
        return sum;
    }
};

struct Octave {
    int cell;
    double strength;
};
constexpr std::array<Octave, 5> octaves = {
    {{900, 0.5}, {300, 0.3}, {80, 0.15}, {20, 0.08}, {6, 0.05}}};

using Field = std::vector<float>;

double smooth(double t) {
    return t * t * (3 - 2 * t);
}

// Random heights on a grid, smoothly joined; several grids added.
Field draw_field(int width, int height, Random& random) {
    Field field(static_cast<std::size_t>(width) * static_cast<std::size_t>(height), 0.0F);
    for (const Octave& octave : octaves) {
        const int columns = width / octave.cell + 2;
        const int rows = height / octave.cell + 2;
        std::vector<double> grid(static_cast<std::size_t>(columns * rows));
        for (double& value : grid) value = random.bell() * octave.strength;
        for (int y = 0; y < height; ++y) {
            const double v = smooth(y % octave.cell / static_cast<double>(octave.cell));
            const double* upper = grid.data() + y / octave.cell * columns;
            const double* lower = upper + columns;
            float* out =
                field.data() + static_cast<std::size_t>(y) * static_cast<std::size_t>(width);
            for (int x = 0; x < width; ++x) {
                const int c = x / octave.cell;
                const double u = smooth(x % octave.cell / static_cast<double>(octave.cell));
                const double top = upper[c] + (upper[c + 1] - upper[c]) * u;
                const double foot = lower[c] + (lower[c + 1] - lower[c]) * u;
                out[x] += static_cast<float>(top + (foot - top) * v);
            }
        }
    }
    return field;
}

std::uint8_t byte(double value) {
    return static_cast<std::uint8_t>(std::clamp(value, 0.0, 1.0) * 255 + 0.5);
}

}  // namespace

std::vector<std::uint8_t> draw_photograph(int width, int height, std::uint64_t seed) {
    Random random{seed};
    const double first_hue = random.uniform() * 6.283;
    const Field hue = draw_field(width, height, random);
    const Field light = draw_field(width, height, random);
    const Field strength = draw_field(width, height, random);
    const Field side = draw_field(width, height, random);
    std::vector<std::uint8_t> pixels(3 * hue.size());
    for (std::size_t i = 0; i < hue.size(); ++i) {
        const double lightness =
            0.45 + 0.25 * static_cast<double>(light[i]) + (side[i] > 0 ? 0.12 : -0.12);
        const double chroma = std::clamp(0.11 + 0.09 * static_cast<double>(strength[i]), 0.0, 0.5);
        const double angle = first_hue + 0.9 * static_cast<double>(hue[i]);
        const double noise = 0.005 * (random.uniform() + random.uniform() - 1);
        for (std::size_t c = 0; c < 3; ++c) {
            pixels[3 * i + c] =
                byte(lightness + noise + chroma * std::cos(angle + 2.094 * static_cast<double>(c)));
        }
    }
    return pixels;
}

}  // namespace tincture::benchmarks
