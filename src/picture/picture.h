// A picture in memory: what every reader makes and what the rest of the pipeline takes.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <optional>
#include <string>
#include <vector>

namespace tincture {

enum class ColourModel { grey, rgb, cmyk };

[[nodiscard]] constexpr int channel_count(ColourModel model) {
    return model == ColourModel::grey ? 1 : model == ColourModel::rgb ? 3 : 4;
}

// Pixels per inch, both positive.
struct Resolution {
    double x_dpi;
    double y_dpi;
};

// A fixed block of samples that is not zeroed first: pictures are large and readers fill them whole.
template <typename T>
class Samples {
  public:
    Samples() = default;
    explicit Samples(std::size_t size)
        : data_(std::make_unique_for_overwrite<T[]>(size)), size_(size) {}

    [[nodiscard]] T* data() noexcept { return data_.get(); }
    [[nodiscard]] const T* data() const noexcept { return data_.get(); }
    [[nodiscard]] std::size_t size() const noexcept { return size_; }
    [[nodiscard]] bool empty() const noexcept { return size_ == 0; }
    [[nodiscard]] T& operator[](std::size_t i) noexcept { return data_[i]; }
    [[nodiscard]] const T& operator[](std::size_t i) const noexcept { return data_[i]; }

  private:
    std::unique_ptr<T[]> data_;
    std::size_t size_ = 0;
};

// Rows from the top, pixels from the left, samples of a pixel side by side, no padding. Orientation
// is applied; colours are not premultiplied. Exactly one of samples8 and samples16 is filled, with
// width * height * channel_count(model) values. Grey and RGB: 0 is dark. CMYK: 0 is no ink.
struct Picture {
    std::string file_name;  // base name, raw bytes
    std::uint32_t width = 0;
    std::uint32_t height = 0;
    ColourModel model = ColourModel::rgb;
    int bits = 8;  // 8 or 16: which of the two below is filled
    Samples<std::uint8_t> samples8;
    Samples<std::uint16_t> samples16;
    Samples<std::uint8_t> opaque;   // empty: no alpha; else one byte a pixel, 1 = opaque, 0 = not
    std::vector<std::uint8_t> icc;  // embedded profile as found, unchecked; empty: none
    std::optional<Resolution> resolution;

    [[nodiscard]] std::size_t pixel_count() const noexcept {
        return std::size_t{width} * height;
    }
};

}  // namespace tincture
