#include "histogram/pixel_lab.h"

#include <algorithm>
#include <cmath>

#include "histogram/lab_cells.h"

namespace tincture {
namespace {

void resize(LabBand& band, std::uint32_t width, std::uint32_t first, std::uint32_t rows) {
    band.width = width;
    band.first_row = first;
    band.rows = rows;
    for (std::vector<std::int16_t>* plane : {&band.L, &band.a, &band.b}) {
        plane->resize(std::size_t{width} * rows);
    }
}

}  // namespace

std::int16_t lab_step(float value) {
    constexpr float most = lab_band_most;
    return static_cast<std::int16_t>(
        std::nearbyint(std::clamp(value, -most, most) * lab_band_steps));
}

PixelLab::PixelLab(const Picture& picture, const ColourTable& table, const ColourSpace& space,
                   std::uint32_t stride)
    : picture_(picture), space_(space), stride_(stride) {
    if (table.cell_de > 0) return;
    index_.emplace(table);
    lab_.resize(table.size());
    for (std::size_t i = 0; i < table.size(); ++i) {
        lab_[i] = {lab_step(table.L[i]), lab_step(table.a[i]), lab_step(table.b[i])};
    }
}

void PixelLab::read(std::uint32_t first, std::uint32_t rows, LabBand& band) const {
    resize(band, width(), first, rows);
    for (std::uint32_t row = 0; row < rows; ++row) {
        const std::uint32_t y = (first + row) * stride_;
        const std::size_t at = std::size_t{row} * width();
        read_row(y, at, band);
        if (picture_.opaque.empty()) continue;
        const std::uint8_t* opaque = picture_.opaque.data() + std::size_t{y} * picture_.width;
        for (std::size_t x = 0; x < width(); ++x) {
            if (opaque[x * stride_] == 0) band.L[at + x] = no_lab;
        }
    }
}

// Row `y` of the picture to the place `at` of the band.
void PixelLab::read_row(std::uint32_t y, std::size_t at, LabBand& band) const {
    const std::size_t start = std::size_t{y} * picture_.width;
    const std::size_t n = width();
    if (!index_) {
        std::vector<float> lab(3 * std::size_t{picture_.width});
        float* planes[3] = {lab.data(), lab.data() + picture_.width,
                            lab.data() + 2 * picture_.width};
        picture_to_lab(picture_, space_, start, picture_.width, {planes[0], planes[1], planes[2]});
        for (std::size_t x = 0; x < n; ++x) {
            band.L[at + x] = lab_step(planes[0][x * stride_]);
            band.a[at + x] = lab_step(planes[1][x * stride_]);
            band.b[at + x] = lab_step(planes[2][x * stride_]);
        }
        return;
    }
    const auto read_samples = [&](const auto* samples) {
        const int channels = channel_count(picture_.model);
        std::uint64_t last_key = ~std::uint64_t{0};
        LabSteps last = lab_of(last_key);
        for (std::size_t x = 0; x < n; ++x) {
            const std::uint64_t key = colour_key(
                samples + (start + x * stride_) * static_cast<std::size_t>(channels), channels);
            if (key != last_key) {
                last = lab_of(key);
                last_key = key;
            }
            band.L[at + x] = last.L;
            band.a[at + x] = last.a;
            band.b[at + x] = last.b;
        }
    };
    if (picture_.bits == 8) {
        read_samples(picture_.samples8.data());
    } else {
        read_samples(picture_.samples16.data());
    }
}

LabSteps PixelLab::lab_of(std::uint64_t key) const {
    const std::uint32_t at = index_->find(key);
    return at == KeyIndex::missing ? LabSteps{} : lab_[at];
}

}  // namespace tincture
