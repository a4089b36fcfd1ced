#include "label/edge_band.h"

#include <algorithm>
#include <cmath>

namespace tincture {
namespace {

constexpr int margin = EdgeBand::margin;

// The row of the picture that a padded row shows.
std::uint32_t source_row(const LabelRows& from, int row) {
    const std::int64_t y = std::int64_t{from.first} + row - margin;
    return static_cast<std::uint32_t>(
        std::clamp<std::int64_t>(y, 0, std::int64_t{from.height} - 1));
}

void mark_cores(EdgeBand& band) {
    const auto width = static_cast<std::size_t>(band.width);
    std::vector<std::uint8_t> level(width);
    for (int row = 1; row + 1 < band.height; ++row) {
        const std::uint8_t* middle = band.label.data() + band.at(0, row);
        const std::uint8_t* above = middle - width;
        const std::uint8_t* below = middle + width;
        for (std::size_t x = 0; x < width; ++x) {
            level[x] = static_cast<std::uint8_t>((above[x] ^ middle[x]) | (below[x] ^ middle[x]));
        }
        std::uint8_t* core = band.core.data() + band.at(0, row);
        for (std::size_t x = 1; x + 1 < width; ++x) {
            const int other = level[x - 1] | level[x] | level[x + 1] | (middle[x - 1] ^ middle[x]) |
                              (middle[x + 1] ^ middle[x]);
            core[x] = other == 0 ? 1 : 0;
        }
    }
}

void collect_edges(EdgeBand& band) {
    band.edges.clear();
    for (int row = margin / 2; row < band.height - margin / 2; ++row) {
        const std::size_t end = band.at(band.width - margin, row);
        for (std::size_t i = band.at(margin, row); i < end; ++i) {
            if (band.core[i] != 0 || band.label[i] == band.transparent) continue;
            band.place[i] = static_cast<std::uint32_t>(band.edges.size());
            band.edges.push_back(i);
        }
    }
}

void mark_zone(int radius, EdgeBand& band) {
    band.zone.assign(band.label.size(), 0);
    const auto side = static_cast<std::size_t>(2 * radius + 1);
    for (const std::size_t i : band.edges) {
        for (int y = -radius; y <= radius; ++y) {
            const std::ptrdiff_t step = std::ptrdiff_t{y} * band.width - radius;
            std::fill_n(&band.zone[i + static_cast<std::size_t>(step)], side, 1);
        }
    }
}

// Sets the colour of pixel i, which shows sample s of the rows that were read.
void set_colour(std::size_t i, std::size_t s, EdgeBand& band) {
    constexpr float step = 1.0F / lab_band_steps;
    const LabBand& lab = band.lab;
    const Mixed mixed =
        mixed_of(static_cast<float>(lab.L[s]) * step, static_cast<float>(lab.a[s]) * step,
                 static_cast<float>(lab.b[s]) * step);
    band.y[i] = mixed.y;
    band.u[i] = mixed.u;
    band.v[i] = mixed.v;
}

}  // namespace

void load_labels(const LabelRows& from, int transparent, EdgeBand& band) {
    band.width = static_cast<int>(from.width) + 2 * margin;
    band.height = static_cast<int>(from.rows) + 2 * margin;
    const std::size_t size = band.at(0, band.height);
    band.label.resize(size);
    band.transparent = transparent;
    band.core.assign(size, 0);
    band.place.resize(size);
    for (int row = 0; row < band.height; ++row) {
        const std::uint8_t* source = from.labels + std::size_t{source_row(from, row)} * from.width;
        std::uint8_t* target = &band.label[band.at(0, row)];
        std::fill_n(target, margin, source[0]);
        std::copy_n(source, from.width, target + margin);
        std::fill_n(target + margin + from.width, margin, source[from.width - 1]);
    }
    mark_cores(band);
    collect_edges(band);
}

void read_lab(const LabelRows& from, const PixelLab& pixels, EdgeBand& band) {
    const std::uint32_t first = source_row(from, 0);
    pixels.read(first, source_row(from, band.height - 1) - first + 1, band.lab);
}

void add_faint_edges(const LabelRows& from, const Palette& palette, double limit_de,
                     EdgeBand& band) {
    struct Steps {
        std::int64_t L, a, b;
    };
    std::vector<Steps> colours;
    for (const Swatch& swatch : palette.swatches) {
        colours.push_back({std::llround(swatch.lab.L * lab_band_steps),
                           std::llround(swatch.lab.a * lab_band_steps),
                           std::llround(swatch.lab.b * lab_band_steps)});
    }
    const auto limit = std::llround(limit_de * lab_band_steps);
    for (int row = 0; row < band.height; ++row) {
        const std::size_t start =
            std::size_t{source_row(from, row) - band.lab.first_row} * from.width;
        std::size_t i = band.at(margin, row);
        for (std::size_t s = start; s < start + from.width; ++s, ++i) {
            if (band.label[i] == band.transparent) continue;
            const Steps& colour = colours[band.label[i]];
            const std::int64_t L = band.lab.L[s] - colour.L;
            const std::int64_t a = band.lab.a[s] - colour.a;
            const std::int64_t b = band.lab.b[s] - colour.b;
            if (L * L + a * a + b * b > limit * limit) band.core[i] = 0;
        }
    }
    collect_edges(band);
}

void load_colours(const LabelRows& from, int radius, EdgeBand& band) {
    for (std::vector<float>* plane : {&band.y, &band.u, &band.v}) plane->resize(band.label.size());
    const auto sample = [&](int x, int row) {
        const int column = std::clamp(x - margin, 0, static_cast<int>(from.width) - 1);
        return std::size_t{source_row(from, row) - band.lab.first_row} * from.width +
               static_cast<std::size_t>(column);
    };
    if (radius == 0) {
        const auto width = static_cast<std::size_t>(band.width);
        for (const std::size_t i : band.edges) {
            set_colour(i, sample(static_cast<int>(i % width), static_cast<int>(i / width)), band);
        }
        return;
    }
    mark_zone(radius, band);
    for (int row = 0; row < band.height; ++row) {
        for (int x = 0; x < band.width; ++x) {
            const std::size_t i = band.at(x, row);
            if (band.zone[i] != 0) set_colour(i, sample(x, row), band);
        }
    }
}

}  // namespace tincture
