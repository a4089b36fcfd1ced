#include "evidence/peak_places.h"

#include <algorithm>
#include <unordered_map>

namespace tincture {
namespace {

// So many pixels of a peak say enough of what it looks like, and of what lies around it.
constexpr std::size_t enough_for_a_body = 4000;
constexpr std::size_t enough_for_what_is_near = 400;

}  // namespace

PeakPlaces::PeakPlaces(const FlatMap& map, const std::vector<Peak>& peaks, double radius)
    : width_(map.width), height_(map.height), peak_(map.colour.size(), not_flat) {
    std::unordered_map<std::uint32_t, std::uint8_t> known;
    std::uint32_t last = FlatMap::not_flat;
    std::uint8_t last_peak = not_flat;
    const auto peak_of = [&](std::uint32_t colour) {
        const auto [place, is_new] = known.try_emplace(colour, no_peak);
        if (!is_new) return place->second;
        const std::size_t peak = nearest_peak(peaks, FlatMap::lab_of(colour), 1.5 * radius);
        if (peak < std::min(peaks.size(), most_peaks)) {
            place->second = static_cast<std::uint8_t>(peak);
        }
        return place->second;
    };
    for (std::size_t i = 0; i < map.colour.size(); ++i) {
        const std::uint32_t colour = map.colour[i];
        if (colour == FlatMap::not_flat) continue;
        if (colour != last) {
            last = colour;
            last_peak = peak_of(colour);
        }
        peak_[i] = last_peak;
        if (last_peak < most_peaks) pixels_[last_peak].push_back(static_cast<std::uint32_t>(i));
    }
}

template <typename Body>
void PeakPlaces::for_square(std::uint32_t pixel, int reach, const Body& body) const {
    const std::ptrdiff_t x = pixel % width_;
    const std::ptrdiff_t y = pixel / width_;
    const std::ptrdiff_t left = std::max<std::ptrdiff_t>(0, x - reach);
    const std::ptrdiff_t right = std::min(width_ - 1, x + reach);
    const std::ptrdiff_t bottom = std::min(height_ - 1, y + reach);
    for (std::ptrdiff_t v = std::max<std::ptrdiff_t>(0, y - reach); v <= bottom; ++v) {
        for (std::ptrdiff_t u = left; u <= right; ++u) {
            body(peak_[static_cast<std::size_t>(v * width_ + u)]);
        }
    }
}

bool PeakPlaces::is_solid(std::uint32_t pixel) const {
    int same = 0;
    for_square(pixel, 1, [&](std::uint8_t peak) { same += peak == peak_[pixel] ? 1 : 0; });
    return same == 9;
}

PeakBody PeakPlaces::body(std::size_t i) const {
    PeakBody body;
    if (i >= most_peaks) return body;
    const std::size_t step = pixels_[i].size() / enough_for_a_body + 1;
    std::size_t borders = 0;
    std::size_t open = 0;
    const auto look_at = [&](std::uint8_t neighbour) {
        if (neighbour == i) return;
        ++borders;
        open += neighbour != not_flat ? 1U : 0U;
    };
    for (std::size_t p = 0; p < pixels_[i].size(); p += step) {
        const std::uint32_t pixel = pixels_[i][p];
        if (is_solid(pixel)) {
            body.solid += step;
            continue;
        }
        const std::ptrdiff_t x = pixel % width_;
        const std::ptrdiff_t y = pixel / width_;
        if (x > 0) look_at(peak_[pixel - 1]);
        if (x + 1 < width_) look_at(peak_[pixel + 1]);
        if (y > 0) look_at(peak_[pixel - static_cast<std::size_t>(width_)]);
        if (y + 1 < height_) look_at(peak_[pixel + static_cast<std::size_t>(width_)]);
    }
    body.pixels = pixels_[i].size();
    body.open = borders > 0 ? static_cast<double>(open) / static_cast<double>(borders) : 0;
    return body;
}

std::uint64_t PeakPlaces::peaks_around(std::uint32_t pixel, int reach) const {
    std::uint64_t near = 0;
    for_square(pixel, reach, [&near](std::uint8_t peak) {
        if (peak < most_peaks) near |= std::uint64_t{1} << peak;
    });
    return near;
}

std::vector<std::uint64_t> PeakPlaces::peaks_near(std::size_t i, int reach) const {
    std::vector<std::uint64_t> near;
    if (i >= most_peaks) return near;
    const std::size_t step = pixels_[i].size() / enough_for_what_is_near + 1;
    for (std::size_t p = 0; p < pixels_[i].size(); p += step) {
        near.push_back(peaks_around(pixels_[i][p], reach));
    }
    return near;
}

std::vector<std::uint64_t> PeakPlaces::peaks_near_rim(std::size_t i, int reach) const {
    std::vector<std::uint64_t> near;
    if (i >= most_peaks) return near;
    std::vector<std::uint32_t> rim;
    for (const std::uint32_t pixel : pixels_[i]) {
        if (!is_solid(pixel)) rim.push_back(pixel);
    }
    const std::size_t step = rim.size() / enough_for_what_is_near + 1;
    for (std::size_t p = 0; p < rim.size(); p += step) near.push_back(peaks_around(rim[p], reach));
    return near;
}

}  // namespace tincture
