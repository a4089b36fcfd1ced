// How large the frames of an AV1 stream can be, before anything decodes it.
#pragma once

#include <cstdint>
#include <optional>
#include <span>

namespace tincture::formats {

struct Av1FrameSize {
    std::uint32_t width;
    std::uint32_t height;
};

// The first sequence header of a stream of open bitstream units (AV1 Bitstream & Decoding Process
// Specification 1.0.0, 5.3 and 5.5); nothing where there is none or it is cut.
[[nodiscard]] std::optional<Av1FrameSize> av1_frame_size(std::span<const std::uint8_t> stream);

}  // namespace tincture::formats
