#pragma once

#include <compare>
#include <cstdint>

namespace tincture {

// Device colour of some RGB space, 8 bits a channel.
struct Rgb8 {
    std::uint8_t r = 0;
    std::uint8_t g = 0;
    std::uint8_t b = 0;

    friend auto operator<=>(const Rgb8&, const Rgb8&) = default;
};

}  // namespace tincture
