// A label map seen through the blur of a picture: how far the two are apart, and what a change
// does.
#pragma once

#include <array>
#include <cstddef>
#include <cstdint>
#include <vector>

#include "label/edge_band.h"
#include "label/edge_blur.h"

namespace tincture {

// What a change of colour of one or more pixels does to the weighted sum of squared differences.
struct Pull {
    Mixed towards;        // sum of kernel * weight * difference
    float lightness = 0;  // sum of kernel^2 * weight
    float colour = 0;
    [[nodiscard]] constexpr float cost(const Mixed& change) const {
        return lightness * change.y * change.y +
               colour * (change.u * change.u + change.v * change.v) - 2 * dot(towards, change);
    }
};

[[nodiscard]] constexpr std::size_t moved(std::size_t i, std::ptrdiff_t step) {
    return i + static_cast<std::size_t>(step);
}

// Memory that is used for one band after the other.
struct BlurFitMemory {
    std::vector<std::uint8_t> state;
    std::vector<std::size_t> active;
    std::vector<std::size_t> weighed;
    std::vector<float> weight, y, u, v;
};

class BlurFit {
  public:
    static constexpr int taps = 3;    // of a kernel, either side of its middle
    static constexpr int window = 7;  // groups of pixels lie in windows of this size

    // The pixels around a band's edges are looked at this far.
    static constexpr int zone_radius = 6;

    // `noise` is a deviation on the scale of Mixed. The band has colours zone_radius around its
    // edges. All must outlive this.
    BlurFit(const std::vector<Mixed>& palette, const EdgeBlur& blur, float noise, EdgeBand& band,
            BlurFitMemory& memory);
    ~BlurFit();
    BlurFit(const BlurFit&) = delete;
    BlurFit& operator=(const BlurFit&) = delete;

    // Edges and the pixels beside them, without what is near transparent ones; from the top.
    [[nodiscard]] const std::vector<std::size_t>& active() const { return memory_.active; }

    // Of a change of pixel i.
    [[nodiscard]] Pull pull_at(std::size_t i) const;
    // Of the same change of several pixels, given by their places, row by row, in the window
    // around `middle`.
    [[nodiscard]] Pull pull_of(std::size_t middle, const std::vector<std::size_t>& places) const;

    // The label of a pixel of the band, and the differences with it.
    void relabel(std::size_t i, std::uint8_t label);

    // Whether something changed near pixel i since it was asked last.
    [[nodiscard]] bool take_touched(std::size_t i) {
        const bool touched = memory_.state[i] != 0;
        memory_.state[i] = 0;
        return touched;
    }
    void touch_all();

    // Whether pixel i is compared with the picture.
    [[nodiscard]] bool is_weighed(std::size_t i) const { return memory_.weight[i] > 0; }

    template <typename Body>
    void for_square(std::size_t middle, int radius, const Body& body) const {
        for (int y = -radius; y <= radius; ++y) {
            const std::size_t start = moved(middle, std::ptrdiff_t{y} * band_.width - radius);
            for (int x = 0; x <= 2 * radius; ++x) body(start + static_cast<std::size_t>(x));
        }
    }

  private:
    [[nodiscard]] bool is_opaque(std::size_t i) const {
        return band_.label[i] != band_.transparent;
    }
    void collect_active();
    void weigh(float noise);
    void add_weight(std::size_t i, float deviation);
    void compare();

    const std::vector<Mixed>& palette_;
    EdgeBand& band_;
    BlurFitMemory& memory_;  // state 1: touched; weight, y, u, v (weight * difference): 0 elsewhere
    std::array<float, 2 * taps + 1> lightness_{};  // kernels
    std::array<float, 2 * taps + 1> colour_{};
};

}  // namespace tincture
