#include "evidence/flat_areas.h"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <cstdlib>

#include "evidence/smooth.h"
#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

constexpr std::uint32_t band_rows = 128;
constexpr int needed = 6;  // of eight neighbours

// Below this noise smoothing would only move colours that are exact.
constexpr double noise_worth_smoothing = 0.4;
// Times the noise: how far smoothing reaches, first and second time.
constexpr double first_reach = 3.5;
constexpr double second_reach = 2.2;
// Neighbours are near within this, or within so many times the noise that smoothing leaves.
constexpr double near_de = 4;
constexpr double near_noise = 0.8;

void smooth(LabBand& band, double noise_de) {
    LabBand smoothed;
    smooth_band(band, first_reach * noise_de, smoothed);
    smooth_band(smoothed, second_reach * noise_de, band);
}

constexpr int grain = lab_band_steps / 2;  // half a Lab unit

int in_grains(std::int16_t value) {
    return (value + (value < 0 ? -grain / 2 : grain / 2)) / grain;
}

void round_colours(LabBand& band) {
    const auto rounded = [](std::int16_t value) {
        return static_cast<std::int16_t>(in_grains(value) * grain);
    };
    std::transform(band.L.begin(), band.L.end(), band.L.begin(), rounded);
    std::transform(band.a.begin(), band.a.end(), band.a.begin(), rounded);
    std::transform(band.b.begin(), band.b.end(), band.b.begin(), rounded);
}

// Adds near neighbours of each pixel of a row in another row of the band.
void count_near(const LabBand& band, std::size_t centre, std::size_t other, std::ptrdiff_t shift,
                std::int32_t reach_squared, std::vector<std::int16_t>& near) {
    const std::size_t width = band.width;
    if (static_cast<std::size_t>(std::abs(shift)) >= width) return;
    const auto first = static_cast<std::size_t>(std::max<std::ptrdiff_t>(0, -shift));
    const std::size_t last = width - static_cast<std::size_t>(std::max<std::ptrdiff_t>(0, shift));
    const auto difference = [](std::int16_t one, std::int16_t two) {
        return static_cast<std::int32_t>(one) - static_cast<std::int32_t>(two);
    };
    for (std::size_t x = first; x < last; ++x) {
        const std::size_t c = centre * width + x;
        const std::size_t o = other * width + x + static_cast<std::size_t>(shift);
        const std::int32_t dL = difference(band.L[c], band.L[o]);
        const std::int32_t da = difference(band.a[c], band.a[o]);
        const std::int32_t db = difference(band.b[c], band.b[o]);
        near[x] = static_cast<std::int16_t>(near[x] +
                                            (dL * dL + da * da + db * db <= reach_squared ? 1 : 0));
    }
}

// Counts the flat colours of a row, and notes them in a row of the map; `counter` takes runs of
// equal neighbours at once.
void count_row(const LabBand& band, std::size_t row, std::int32_t reach_squared,
               std::vector<std::int16_t>& near, KeyCounter& counter, std::uint32_t* map) {
    std::fill(near.begin(), near.end(), 0);
    for (std::ptrdiff_t dy = -1; dy <= 1; ++dy) {
        const std::ptrdiff_t other = static_cast<std::ptrdiff_t>(row) + dy;
        if (other < 0 || other >= static_cast<std::ptrdiff_t>(band.rows)) continue;
        for (std::ptrdiff_t dx = -1; dx <= 1; ++dx) {
            if (dx == 0 && dy == 0) continue;
            count_near(band, row, static_cast<std::size_t>(other), dx, reach_squared, near);
        }
    }
    std::uint64_t last = 0;
    std::uint64_t run = 0;
    for (std::size_t x = 0; x < band.width; ++x) {
        const std::size_t at = row * band.width + x;
        if (near[x] < needed || band.L[at] == no_lab) continue;
        const std::uint64_t key = lab_key(band.L[at], band.a[at], band.b[at]);
        map[x] = FlatMap::pack({band.L[at], band.a[at], band.b[at]});
        if (key != last && run > 0) {
            counter.add(last, run);
            run = 0;
        }
        last = key;
        ++run;
    }
    if (run > 0) counter.add(last, run);
}

}  // namespace

std::uint64_t lab_key(std::int16_t L, std::int16_t a, std::int16_t b) {
    const auto shifted = [](std::int16_t value) {
        return static_cast<std::uint64_t>(static_cast<std::uint16_t>(value + 0x4000));
    };
    return shifted(L) << 32 | shifted(a) << 16 | shifted(b);
}

LabSteps lab_of_key(std::uint64_t key) {
    const auto part = [key](int shift) {
        return static_cast<std::int16_t>(static_cast<std::int32_t>(key >> shift & 0xFFFF) - 0x4000);
    };
    return {part(32), part(16), part(0)};
}

// Each coordinate in grains from -512 on, in ten bits; never 0, as no L is so dark.
std::uint32_t FlatMap::pack(const LabSteps& lab) {
    const auto part = [](std::int16_t value) {
        return static_cast<std::uint32_t>(in_grains(value) + 512);
    };
    return part(lab.L) << 20 | part(lab.a) << 10 | part(lab.b);
}

LabSteps FlatMap::lab_of(std::uint32_t colour) {
    const auto part = [colour](int shift) {
        const auto grains = static_cast<int>(colour >> shift & 1023) - 512;
        return static_cast<std::int16_t>(grains * grain);
    };
    return {part(20), part(10), part(0)};
}

FlatColours count_flat_colours(const PixelLab& pixels, double noise_de, bool few) {
    const bool noisy = noise_de >= noise_worth_smoothing;
    const bool exact = few && !noisy;
    const std::uint32_t bands = (pixels.height() + band_rows - 1) / band_rows;
    constexpr std::uint32_t halo = 2 * smoothing_halo + 1;
    const double reach = std::max(near_de, near_noise * noise_de) * lab_band_steps;
    const auto reach_squared = static_cast<std::int32_t>(std::lround(reach * reach));
    std::vector<KeyCounter> found(bands);
    FlatMap map{pixels.width(), pixels.height(), {}};
    map.colour.assign(std::size_t{map.width} * map.height, FlatMap::not_flat);
    parallel_for(bands, [&](std::size_t b) {
        throw_if_cancelled();
        const std::uint32_t first = static_cast<std::uint32_t>(b) * band_rows;
        const std::uint32_t last = std::min(pixels.height(), first + band_rows);
        const std::uint32_t top = first - std::min(first, halo);
        const std::uint32_t bottom = std::min(pixels.height(), last + halo);
        LabBand band;
        pixels.read(top, bottom - top, band);
        if (noisy) smooth(band, noise_de);
        if (!exact) round_colours(band);
        std::vector<std::int16_t> near(pixels.width());
        for (std::uint32_t y = first; y < last; ++y) {
            count_row(band, y - top, reach_squared, near, found[b],
                      map.colour.data() + std::size_t{y} * map.width);
        }
    });
    KeyCounter all;
    for (const KeyCounter& counter : found) all.add(counter);
    return {all.sorted(), exact, std::move(map)};
}

}  // namespace tincture
