// Pictures in memory for tests.
#pragma once

#include <cstdint>
#include <vector>

#include "picture/picture.h"
#include "tests/support/random.h"

namespace tincture::test_support {

// Interleaved samples, top left first; of 8 bits or 16. `opaque` may be empty.
[[nodiscard]] Picture picture_of(ColourModel model, int bits, std::uint32_t width,
                                 std::uint32_t height, const std::vector<std::uint16_t>& samples,
                                 const std::vector<std::uint8_t>& opaque = {});

// Any sample, whatever its depth.
[[nodiscard]] std::uint16_t sample_at(const Picture& picture, std::size_t i);
[[nodiscard]] bool is_opaque(const Picture& picture, std::size_t pixel);

// The samples and the alpha of a picture with its pixels in another order.
[[nodiscard]] Picture shuffled_pixels(const Picture& picture, Random& random);

struct Size {
    std::uint32_t width;
    std::uint32_t height;
};

// Samples that take `levels` values each, at random.
[[nodiscard]] Picture noise_picture(Random& random, ColourModel model, int bits, Size size,
                                    std::size_t levels);
// A few flat areas side by side, each of one random colour.
[[nodiscard]] Picture flat_picture(Random& random, ColourModel model, Size size,
                                   std::size_t colours);
// Soft shading in several hues with a little noise.
[[nodiscard]] Picture photograph_like(Random& random, int bits, Size size);

// Alpha at random: about one pixel in four is not opaque.
void punch_holes(Picture& picture, Random& random);

}  // namespace tincture::test_support
