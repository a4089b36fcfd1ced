#include "picture/tiff_layout.h"

#include <cstring>

namespace tincture::formats {
namespace {

template <typename T>
constexpr std::uint32_t maximum_of = (1U << (8 * sizeof(T))) - 1;

// `count` samples of `bits` each, the first in the highest bits of a byte. `scale` brings samples
// of fewer than 8 bits to the full range, which indices of a palette must not be.
void unpack(const std::uint8_t* raw, int bits, std::size_t count, bool scale, std::uint8_t* to) {
    if (bits == 8) {
        std::memcpy(to, raw, count);
        return;
    }
    const unsigned mask = (1U << bits) - 1;
    const unsigned factor = scale ? 255 / mask : 1;
    const auto width = static_cast<unsigned>(bits);
    for (std::size_t i = 0; i < count; ++i) {
        const std::size_t bit = i * width;
        const unsigned value = raw[bit / 8] >> (8 - width - bit % 8) & mask;
        to[i] = static_cast<std::uint8_t>(value * factor);
    }
}

void unpack(const std::uint8_t* raw, int, std::size_t count, bool, std::uint16_t* to) {
    std::memcpy(to, raw, count * sizeof *to);  // libtiff has put the bytes in order
}

}  // namespace

TiffPixels::TiffPixels(const TiffLayout& layout, Picture& picture)
    : layout_(layout), picture_(picture), opaque_(std::size_t{layout.width} * layout.height) {
    const int bits = layout.palette || layout.bits < 16 ? 8 : 16;
    allocate(picture, layout.width, layout.height, layout.model, bits);
    if (layout.separate && layout.premultiplied) {
        if (bits == 8) alpha8_ = Samples<std::uint8_t>(picture.pixel_count());
        if (bits == 16) alpha16_ = Samples<std::uint16_t>(picture.pixel_count());
    }
}

bool TiffPixels::is_plain() const {
    return layout_.bits >= 8 && !layout_.palette && !layout_.white_is_zero &&
           layout_.samples_per_pixel == channel_count(layout_.model) &&
           (!layout_.separate || layout_.samples_per_pixel == 1);
}

std::size_t TiffPixels::plain_pixel_size() const {
    return static_cast<std::size_t>(channel_count(layout_.model) * layout_.bits / 8);
}

std::uint8_t* TiffPixels::plain_row(std::uint32_t y) {
    std::uint8_t* first = picture_.bits == 8
                              ? picture_.samples8.data()
                              : reinterpret_cast<std::uint8_t*>(picture_.samples16.data());
    return first + std::size_t{y} * layout_.width * plain_pixel_size();
}

void TiffPixels::put(const std::uint8_t* raw, std::uint32_t x, std::uint32_t y, std::uint32_t count,
                     int plane) {
    const std::size_t pixel = std::size_t{y} * layout_.width + x;
    if (is_plain()) {
        const std::size_t size = plain_pixel_size();
        std::memcpy(plain_row(y) + x * size, raw, count * size);
    } else if (picture_.bits == 8) {
        put_samples(raw, pixel, count, plane, unpacked8_, picture_.samples8, alpha8_);
    } else {
        put_samples(raw, pixel, count, plane, unpacked16_, picture_.samples16, alpha16_);
    }
}

template <typename T>
void TiffPixels::put_samples(const std::uint8_t* raw, std::size_t pixel, std::uint32_t count,
                             int plane, std::vector<T>& unpacked, Samples<T>& to,
                             Samples<T>& alpha) {
    constexpr std::uint32_t maximum = maximum_of<T>;
    constexpr unsigned half = maximum / 2 + 1;
    const auto stride = static_cast<std::size_t>(layout_.separate ? 1 : layout_.samples_per_pixel);
    unpacked.resize(count * stride);
    unpack(raw, layout_.bits, unpacked.size(), !layout_.palette, unpacked.data());

    const int first = layout_.separate ? plane : 0;  // the sample that unpacked begins with
    const T* alphas = nullptr;
    if (layout_.alpha_index >= 0 && (!layout_.separate || plane == layout_.alpha_index)) {
        alphas = unpacked.data() + (layout_.alpha_index - first);
        opaque_.set(pixel, alphas, stride, count, half);
        if (!alpha.empty()) std::memcpy(alpha.data() + pixel, alphas, count * sizeof(T));
    }
    if (!alpha.empty()) alphas = alpha.data() + pixel;

    if (layout_.palette) {
        if constexpr (sizeof(T) == 1) {
            if (first == 0) put_palette(unpacked.data(), stride, pixel, count);
        }
        return;
    }
    const int channels = channel_count(layout_.model);
    const int last = layout_.separate ? plane + 1 : channels;
    for (int channel = first; channel < last && channel < channels; ++channel) {
        const T* from = unpacked.data() + (channel - first);
        T* target = to.data() + pixel * static_cast<std::size_t>(channels) + channel;
        const std::size_t alpha_stride = alpha.empty() ? stride : 1;
        for (std::uint32_t i = 0; i < count; ++i, target += channels) {
            std::uint32_t value = from[i * stride];
            if (layout_.white_is_zero) value = maximum - value;
            if (layout_.premultiplied) {
                value = unpremultiply(value, alphas[i * alpha_stride], maximum);
            }
            *target = static_cast<T>(value);
        }
    }
}

void TiffPixels::put_palette(const std::uint8_t* indices, std::size_t stride, std::size_t pixel,
                             std::uint32_t count) {
    std::uint8_t* to = picture_.samples8.data() + pixel * 3;
    for (std::uint32_t i = 0; i < count; ++i, to += 3) {
        std::memcpy(to, layout_.colours[indices[i * stride]].data(), 3);
    }
}

void TiffPixels::finish() {
    picture_.opaque = opaque_.take();
}

}  // namespace tincture::formats
