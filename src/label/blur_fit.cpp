#include "label/blur_fit.h"

#include <algorithm>

namespace tincture {
namespace {

// Tuned on drawn posters (seeds below 1000 of tests/corpus).
constexpr float least_deviation = 3;   // of a pixel from the blurred labels
constexpr float per_noise = 1;         // more, a unit of noise
constexpr float per_contrast = 0.25F;  // more, a unit of difference to a neighbour: labels have no
                                       // half pixels
constexpr int spread = BlurFit::window + 2 * BlurFit::taps;

// States while a band is prepared.
constexpr std::uint8_t wanted = 1;
constexpr std::uint8_t barred = 2;
constexpr std::uint8_t seen = 4;

}  // namespace

BlurFit::BlurFit(const std::vector<Mixed>& palette, const EdgeBlur& blur, float noise,
                 EdgeBand& band, BlurFitMemory& memory)
    : palette_(palette), band_(band), memory_(memory) {
    for (std::vector<float>* plane : {&memory.weight, &memory.y, &memory.u, &memory.v}) {
        if (plane->size() < band.label.size()) plane->resize(band.label.size());
    }
    const BlurKernel lightness = blur_kernel(blur.lightness);
    const BlurKernel colour = blur_kernel(blur.colour);
    for (int i = -taps; i <= taps; ++i) {
        const auto half = static_cast<std::size_t>(i < 0 ? -i : i);
        lightness_[static_cast<std::size_t>(i + taps)] = lightness[half];
        colour_[static_cast<std::size_t>(i + taps)] = colour[half];
    }
    collect_active();
    weigh(noise);
    compare();
    touch_all();
}

BlurFit::~BlurFit() {
    for (const std::size_t i : memory_.weighed) {
        memory_.weight[i] = memory_.y[i] = memory_.u[i] = memory_.v[i] = 0;
    }
}

void BlurFit::collect_active() {
    std::vector<std::uint8_t>& state = memory_.state;
    state.assign(band_.label.size(), 0);
    for (const std::size_t i : band_.edges) {
        for_square(i, 1, [&](std::size_t q) {
            state[q] |= wanted;
            if (is_opaque(q)) return;
            for_square(q, taps, [&](std::size_t near) { state[near] |= barred; });
        });
    }
    memory_.active.clear();
    for (int row = EdgeBand::margin / 2; row < band_.height - EdgeBand::margin / 2; ++row) {
        const std::size_t end = band_.at(band_.width - EdgeBand::margin, row);
        for (std::size_t i = band_.at(EdgeBand::margin, row); i < end; ++i) {
            if (state[i] == wanted) memory_.active.push_back(i);
        }
    }
}

// The weight of a difference: half over its expected variance, 0 out of reach and where the blur
// mixes in what is not opaque.
void BlurFit::weigh(float noise) {
    std::vector<std::uint8_t>& state = memory_.state;
    memory_.weighed.clear();
    const float deviation = least_deviation + per_noise * noise;
    for (const std::size_t i : memory_.active) {
        for_square(i, taps, [&](std::size_t q) {
            if ((state[q] & (seen | barred)) != 0) return;
            state[q] |= seen;
            if (band_.zone[q] != 0) add_weight(q, deviation);
        });
    }
    state.assign(band_.label.size(), 0);
}

void BlurFit::add_weight(std::size_t i, float deviation) {
    float contrast = 0;
    for_square(i, 1, [&](std::size_t q) {
        if (band_.zone[q] == 0 || !is_opaque(q)) return;
        const Mixed d = band_.colour(q) - band_.colour(i);
        contrast = std::max(contrast, dot(d, d));
    });
    memory_.weight[i] = 0.5F / (deviation * deviation + per_contrast * per_contrast * contrast);
    memory_.weighed.push_back(i);
}

void BlurFit::touch_all() {
    for (const std::size_t i : memory_.active) memory_.state[i] = 1;
}

void BlurFit::compare() {
    for (const std::size_t i : memory_.weighed) {
        Mixed sum;
        for (int y = 0; y <= 2 * taps; ++y) {
            const std::size_t row = moved(i, std::ptrdiff_t{y - taps} * band_.width - taps);
            Mixed line;
            for (std::size_t x = 0; x <= 2 * taps; ++x) {
                const std::uint8_t l = band_.label[row + x];
                const Mixed& colour = palette_[l == band_.transparent ? 0 : l];
                line.y += lightness_[x] * colour.y;
                line.u += colour_[x] * colour.u;
                line.v += colour_[x] * colour.v;
            }
            const auto k = static_cast<std::size_t>(y);
            sum.y += lightness_[k] * line.y;
            sum.u += colour_[k] * line.u;
            sum.v += colour_[k] * line.v;
        }
        memory_.y[i] = memory_.weight[i] * (band_.y[i] - sum.y);
        memory_.u[i] = memory_.weight[i] * (band_.u[i] - sum.u);
        memory_.v[i] = memory_.weight[i] * (band_.v[i] - sum.v);
    }
}

Pull BlurFit::pull_at(std::size_t i) const {
    Pull pull;
    for (int y = 0; y <= 2 * taps; ++y) {
        const std::size_t row = moved(i, std::ptrdiff_t{y - taps} * band_.width - taps);
        Pull line;
        for (std::size_t x = 0; x <= 2 * taps; ++x) {
            const std::size_t q = row + x;
            line.towards.y += lightness_[x] * memory_.y[q];
            line.towards.u += colour_[x] * memory_.u[q];
            line.towards.v += colour_[x] * memory_.v[q];
            line.lightness += lightness_[x] * lightness_[x] * memory_.weight[q];
            line.colour += colour_[x] * colour_[x] * memory_.weight[q];
        }
        const auto k = static_cast<std::size_t>(y);
        pull.towards.y += lightness_[k] * line.towards.y;
        pull.towards.u += colour_[k] * line.towards.u;
        pull.towards.v += colour_[k] * line.towards.v;
        pull.lightness += lightness_[k] * lightness_[k] * line.lightness;
        pull.colour += colour_[k] * colour_[k] * line.colour;
    }
    return pull;
}

Pull BlurFit::pull_of(std::size_t middle, const std::vector<std::size_t>& places) const {
    std::array<float, spread * spread> lightness{};
    std::array<float, spread * spread> colour{};
    for (const std::size_t place : places) {
        const std::size_t start = place / window * spread + place % window;
        for (std::size_t y = 0; y <= 2 * taps; ++y) {
            for (std::size_t x = 0; x <= 2 * taps; ++x) {
                lightness[start + y * spread + x] += lightness_[y] * lightness_[x];
                colour[start + y * spread + x] += colour_[y] * colour_[x];
            }
        }
    }
    Pull pull;
    constexpr int reach = spread / 2;
    for (int y = 0; y < spread; ++y) {
        const std::size_t row = moved(middle, std::ptrdiff_t{y - reach} * band_.width - reach);
        for (std::size_t x = 0; x < spread; ++x) {
            const std::size_t k = static_cast<std::size_t>(y) * spread + x;
            const std::size_t q = row + x;
            pull.towards.y += lightness[k] * memory_.y[q];
            pull.towards.u += colour[k] * memory_.u[q];
            pull.towards.v += colour[k] * memory_.v[q];
            pull.lightness += lightness[k] * lightness[k] * memory_.weight[q];
            pull.colour += colour[k] * colour[k] * memory_.weight[q];
        }
    }
    return pull;
}

void BlurFit::relabel(std::size_t i, std::uint8_t label) {
    for_square(i, taps, [&](std::size_t q) { memory_.state[q] = 1; });
    const Mixed change = palette_[label] - palette_[band_.label[i]];
    band_.label[i] = label;
    for (int y = 0; y <= 2 * taps; ++y) {
        const std::size_t row = moved(i, std::ptrdiff_t{y - taps} * band_.width - taps);
        const auto k = static_cast<std::size_t>(y);
        for (std::size_t x = 0; x <= 2 * taps; ++x) {
            const std::size_t q = row + x;
            const float lightness = lightness_[k] * lightness_[x] * memory_.weight[q];
            const float colour = colour_[k] * colour_[x] * memory_.weight[q];
            memory_.y[q] -= lightness * change.y;
            memory_.u[q] -= colour * change.u;
            memory_.v[q] -= colour * change.v;
        }
    }
}

}  // namespace tincture
