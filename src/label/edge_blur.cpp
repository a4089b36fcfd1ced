#include "label/edge_blur.h"

#include <algorithm>
#include <mutex>

#include "support/parallel.h"

namespace tincture {
namespace {

constexpr std::uint32_t most_rows = 600;   // of a picture that are looked at
constexpr std::uint32_t rows_at_once = 8;  // side by side
constexpr std::uint32_t longest = 8;       // of a transition, in pixels
constexpr float least_lightness = 30;      // difference of two labels that tell about blur
constexpr float least_colour = 40 * colour_weight;
constexpr std::int64_t least_transitions = 20;
constexpr float scale = 65536;  // sums are whole numbers: any order gives the same
constexpr float drawn_blur = 0.3F;

// A wider kernel keeps more of thin strokes; tuned on drawn posters (seeds below 1000 of
// tests/corpus).
constexpr float widening = 1.1F;

struct Sums {
    std::array<std::int64_t, 2> width{};  // of transitions, lightness and colour
    std::array<std::int64_t, 2> count{};
};

struct Row {
    const std::uint8_t* labels;  // of the row
    std::uint32_t width;
    const LabBand* lab;
    std::size_t lab_at;

    [[nodiscard]] bool core(std::uint32_t x) const {
        const std::uint8_t l = labels[x];
        const auto row = static_cast<std::ptrdiff_t>(width);
        for (std::ptrdiff_t i = std::ptrdiff_t{x} - 1; i <= std::ptrdiff_t{x} + 1; ++i) {
            if (labels[i] != l || labels[i - row] != l || labels[i + row] != l) {
                return false;
            }
        }
        return true;
    }
    [[nodiscard]] Mixed colour(std::uint32_t x) const {
        constexpr float step = 1.0F / lab_band_steps;
        const std::size_t i = lab_at + x;
        return mixed_of(static_cast<float>(lab->L[i]) * step, static_cast<float>(lab->a[i]) * step,
                        static_cast<float>(lab->b[i]) * step);
    }
};

// The transition from the flat pixel `from` to the flat pixel `to`.
void add_transition(const Row& row, std::uint32_t from, std::uint32_t to,
                    const std::vector<Mixed>& palette, Sums& sums) {
    const Mixed& start = palette[row.labels[from]];
    const Mixed whole = palette[row.labels[to]] - start;
    const std::array<Mixed, 2> along = {Mixed{whole.y, 0, 0}, Mixed{0, whole.u, whole.v}};
    const std::array<float, 2> least = {least_lightness, least_colour};
    for (std::size_t c = 0; c < 2; ++c) {
        const float squared = dot(along[c], along[c]);
        if (squared < least[c] * least[c]) continue;
        float sum = 0;
        for (std::uint32_t x = from - 1; x <= to + 1; ++x) {
            const float t = std::clamp(dot(row.colour(x) - start, along[c]) / squared, 0.0F, 1.0F);
            if (t * (1 - t) > 0.03F) sum += t * (1 - t);  // less is noise
        }
        sums.width[c] += static_cast<std::int64_t>(sum * scale);
        ++sums.count[c];
    }
}

void add_row(const Row& row, const std::vector<Mixed>& palette, Sums& sums) {
    const auto known = [&](std::uint32_t x) { return row.labels[x] < palette.size(); };
    for (std::uint32_t x = 2; x + 3 < row.width; ++x) {
        if (row.labels[x] == row.labels[x + 2] || !known(x) || !row.core(x)) continue;
        std::uint32_t to = x + 2;
        const std::uint32_t end = std::min(x + longest, row.width - 2);
        while (to < end && !(known(to) && row.core(to))) ++to;
        if (to == end || row.labels[to] == row.labels[x]) continue;
        add_transition(row, x, to, palette, sums);
        x = to - 1;
    }
}

float deviation(std::int64_t width, std::int64_t count, float otherwise) {
    if (count < least_transitions) return otherwise;
    constexpr float root_of_pi = 1.7724539F;
    return root_of_pi * static_cast<float>(width / count) / scale;
}

}  // namespace

EdgeBlur measure_edge_blur(const std::uint8_t* labels, const PixelLab& pixels,
                           const std::vector<Mixed>& palette) {
    const std::uint32_t width = pixels.width();
    const std::uint32_t height = pixels.height();
    if (width < 8 || height < 3) return {drawn_blur, drawn_blur};
    const std::uint32_t groups = (height - 2 + rows_at_once - 1) / rows_at_once;
    const std::uint32_t looked_at = std::min(groups, most_rows / rows_at_once);
    std::vector<Sums> sums(looked_at);
    parallel_for(looked_at, [&](std::size_t g) {
        const auto first = static_cast<std::uint32_t>(1 + g * groups / looked_at * rows_at_once);
        const std::uint32_t end = std::min(first + rows_at_once, height - 1);
        LabBand lab;
        pixels.read(first, end - first, lab);
        for (std::uint32_t y = first; y < end; ++y) {
            const Row row{labels + std::size_t{y} * width, width, &lab,
                          std::size_t{y - first} * width};
            add_row(row, palette, sums[g]);
        }
    });
    Sums all;
    for (const Sums& s : sums) {
        for (std::size_t c = 0; c < 2; ++c) {
            all.width[c] += s.width[c];
            all.count[c] += s.count[c];
        }
    }
    const float lightness = deviation(all.width[0], all.count[0], drawn_blur);
    return {lightness, deviation(all.width[1], all.count[1], lightness)};
}

BlurKernel blur_kernel(float deviation) {
    // Three times (q, 1 - 2 q, q), which has the variance 2 q; what covering a pixel gives is in
    // the labels already.
    constexpr float of_a_pixel = 1.0F / 12;
    const float wide = widening * deviation;
    const float q = std::clamp((wide * wide - of_a_pixel) / 6, 0.0F, 0.32F);
    const float m = 1 - 2 * q;
    const std::array<float, 3> twice = {m * m + 2 * q * q, 2 * q * m, q * q};
    return {m * twice[0] + 2 * q * twice[1], m * twice[1] + q * (twice[0] + twice[2]),
            m * twice[2] + q * twice[1], q * twice[2]};
}

}  // namespace tincture
