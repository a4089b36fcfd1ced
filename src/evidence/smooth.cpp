#include "evidence/smooth.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstddef>
#include <cstdlib>

namespace tincture {
namespace {

constexpr std::ptrdiff_t radius = 2;

// Sums over the near neighbours of each pixel of a row.
struct RowSums {
    std::vector<std::int32_t> L, a, b, n;

    explicit RowSums(std::size_t width) : L(width, 0), a(width, 0), b(width, 0), n(width, 0) {}
    void clear() {
        for (auto* sums : {&L, &a, &b, &n}) std::fill(sums->begin(), sums->end(), 0);
    }
};

struct Row {
    const std::int16_t* L;
    const std::int16_t* a;
    const std::int16_t* b;
};

Row row_of(const LabBand& band, std::size_t row) {
    const std::size_t at = row * band.width;
    return {band.L.data() + at, band.a.data() + at, band.b.data() + at};
}

// Adds the neighbours that lie `shift` to the right, in another row, where they are near in colour.
// Written so that the compiler takes several pixels at a time.
void add_neighbours(const Row& centre, const Row& other, std::ptrdiff_t shift, std::size_t width,
                    std::int32_t reach_squared, RowSums& sums) {
    if (static_cast<std::size_t>(std::abs(shift)) >= width) return;
    const auto first = static_cast<std::size_t>(std::max<std::ptrdiff_t>(0, -shift));
    const std::size_t last = width - static_cast<std::size_t>(std::max<std::ptrdiff_t>(0, shift));
    std::int32_t* sum_L = sums.L.data();
    std::int32_t* sum_a = sums.a.data();
    std::int32_t* sum_b = sums.b.data();
    std::int32_t* n = sums.n.data();
    for (std::size_t x = first; x < last; ++x) {
        const std::size_t at = x + static_cast<std::size_t>(shift);
        const std::int32_t dL = other.L[at] - centre.L[x];
        const std::int32_t da = other.a[at] - centre.a[x];
        const std::int32_t db = other.b[at] - centre.b[x];
        const std::int32_t near = dL * dL + da * da + db * db <= reach_squared ? -1 : 0;
        sum_L[x] += dL & near;
        sum_a[x] += da & near;
        sum_b[x] += db & near;
        n[x] -= near;
    }
}

std::int16_t moved(std::int16_t value, std::int32_t sum, std::int32_t n) {
    const std::int32_t half = sum < 0 ? -n / 2 : n / 2;
    return static_cast<std::int16_t>(value + (sum + half) / n);
}

}  // namespace

void smooth_band(const LabBand& band, double reach, LabBand& smoothed) {
    const std::size_t width = band.width;
    smoothed = band;
    const auto steps =
        static_cast<std::int32_t>(std::lround(std::min(reach, 100.0) * lab_band_steps));
    RowSums sums(width);
    for (std::ptrdiff_t y = 0; y < static_cast<std::ptrdiff_t>(band.rows); ++y) {
        sums.clear();
        const Row centre = row_of(band, static_cast<std::size_t>(y));
        for (std::ptrdiff_t dy = -radius; dy <= radius; ++dy) {
            if (y + dy < 0 || y + dy >= static_cast<std::ptrdiff_t>(band.rows)) continue;
            const Row other = row_of(band, static_cast<std::size_t>(y + dy));
            for (std::ptrdiff_t dx = -radius; dx <= radius; ++dx) {
                add_neighbours(centre, other, dx, width, steps * steps, sums);
            }
        }
        const std::size_t at = static_cast<std::size_t>(y) * width;
        for (std::size_t x = 0; x < width; ++x) {
            smoothed.L[at + x] = moved(centre.L[x], sums.L[x], sums.n[x]);
            smoothed.a[at + x] = moved(centre.a[x], sums.a[x], sums.n[x]);
            smoothed.b[at + x] = moved(centre.b[x], sums.b[x], sums.n[x]);
        }
    }
}

}  // namespace tincture
