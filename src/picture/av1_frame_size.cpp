#include "picture/av1_frame_size.h"

namespace tincture::formats {
namespace {

constexpr unsigned sequence_header = 1;
constexpr unsigned temporal_delimiter = 2;

// Bits from the highest; zeros behind the end, which is remembered.
class Bits {
  public:
    explicit Bits(std::span<const std::uint8_t> bytes) : bytes_(bytes) {}

    std::uint32_t f(unsigned count) {
        std::uint32_t value = 0;
        for (; count > 0; --count, ++position_) value = value << 1 | bit();
        return value;
    }
    void skip_uvlc() {
        unsigned zeros = 0;
        while (zeros < 32 && !ended() && f(1) == 0) ++zeros;
        if (zeros < 32) f(zeros);
    }
    [[nodiscard]] bool ended() const { return position_ > bytes_.size() * 8; }

  private:
    [[nodiscard]] std::uint32_t bit() const {
        if (position_ / 8 >= bytes_.size()) return 0;
        return bytes_[position_ / 8] >> (7 - position_ % 8) & 1U;
    }
    std::span<const std::uint8_t> bytes_;
    std::size_t position_ = 0;
};

// Timing and operating points: nothing of it matters but its length. Names as in 5.5.1.
void skip_operating_points(Bits& bits) {
    bool decoder_model_info_present_flag = false;
    unsigned buffer_delay_length = 0;
    if (bits.f(1) != 0) {  // timing_info_present_flag
        bits.f(32);
        bits.f(32);
        if (bits.f(1) != 0) bits.skip_uvlc();
        decoder_model_info_present_flag = bits.f(1) != 0;
        if (decoder_model_info_present_flag) {
            buffer_delay_length = bits.f(5) + 1;
            bits.f(32);
            bits.f(5);
            bits.f(5);
        }
    }
    const bool initial_display_delay_present_flag = bits.f(1) != 0;
    const std::uint32_t operating_points = bits.f(5) + 1;
    for (std::uint32_t i = 0; i < operating_points; ++i) {
        bits.f(12);                    // operating_point_idc
        if (bits.f(5) > 7) bits.f(1);  // seq_level_idx, seq_tier
        if (decoder_model_info_present_flag && bits.f(1) != 0) {
            bits.f(buffer_delay_length);
            bits.f(buffer_delay_length);
            bits.f(1);
        }
        if (initial_display_delay_present_flag && bits.f(1) != 0) bits.f(4);
    }
}

std::optional<Av1FrameSize> read_sequence_header(std::span<const std::uint8_t> payload) {
    Bits bits(payload);
    bits.f(3);  // seq_profile
    bits.f(1);  // still_picture
    if (bits.f(1) != 0) {
        bits.f(5);  // reduced_still_picture_header: one level is all there is
    } else {
        skip_operating_points(bits);
    }
    const unsigned width_bits = bits.f(4) + 1;
    const unsigned height_bits = bits.f(4) + 1;
    const std::uint32_t width = bits.f(width_bits) + 1;
    const std::uint32_t height = bits.f(height_bits) + 1;
    if (bits.ended()) return {};
    return Av1FrameSize{width, height};
}

}  // namespace

std::optional<Av1FrameSize> av1_frame_size(std::span<const std::uint8_t> stream) {
    std::size_t at = 0;
    while (at < stream.size()) {
        const unsigned header = stream[at++];
        const unsigned type = header >> 3 & 15U;
        if ((header & 4U) != 0) ++at;             // an extension byte
        std::uint64_t size = stream.size() - at;  // without a size, the unit is the rest
        if ((header & 2U) != 0) {                 // leb128
            size = 0;
            for (unsigned shift = 0; shift < 56 && at < stream.size(); shift += 7) {
                const std::uint64_t byte = stream[at++];
                size |= (byte & 127U) << shift;
                if (byte < 128) break;
            }
        }
        if (at > stream.size() || size > stream.size() - at) return {};
        if (type == sequence_header) return read_sequence_header(stream.subspan(at, size));
        if (type != temporal_delimiter) return {};  // it has to come before all others
        at += size;
    }
    return {};
}

}  // namespace tincture::formats
