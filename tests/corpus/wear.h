// What happens to pictures on their way to a print shop.
#pragma once

#include <cstdint>
#include <span>
#include <string>

#include "picture/picture.h"

namespace tincture::corpus {

enum class State {
    clean,
    jpeg75,        // JPEG quality 75, colours halved (4:2:0)
    noise,         // normal noise, deviation 0.02 of full scale in each channel
    scan,          // blur of deviation 1 pixel, noise of 0.012, JPEG quality 85
    half,          // half size, the mean of 2 x 2
    recompressed,  // JPEG quality 90
    enlarged,      // half size, JPEG quality 50, enlarged twice in straight lines between pixels
};

[[nodiscard]] std::span<const State> all_states();
[[nodiscard]] std::string name_of(State state);
[[nodiscard]] bool keeps_size(State state);

// 8-bit RGB in and out. `seed` is that of the noise. JPEG through libjpeg-turbo with its exact
// integer transform, all else in plain arithmetic: the same bytes on every machine.
[[nodiscard]] Picture worn(const Picture& picture, State state, std::uint64_t seed);

[[nodiscard]] Picture copy_of(const Picture& picture);

}  // namespace tincture::corpus
