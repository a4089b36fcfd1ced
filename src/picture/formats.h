// What the reader of every format gets, gives and shares. Only picture/ includes this.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <span>
#include <string>
#include <string_view>

#include "picture/picture.h"
#include "picture/resolution.h"

namespace tincture::formats {

// A file to read. `bytes` is all of it, but empty for TIFF, which may be far larger than its first
// page and is read through `descriptor`.
struct Source {
    std::string subject;  // the path as given, for messages
    std::span<const std::uint8_t> bytes;
    int descriptor = -1;
    std::uint64_t file_size = 0;
    std::uint64_t max_pixels = 0;
};

// A picture as it is stored, and how it wants to be turned.
struct Stored {
    Picture picture;
    int orientation = 1;  // 1 to 8, see orientation.h
};

// Each throws Error(input) for a file that is damaged, cut short or of a kind that is not
// supported, Error(limit) above max_pixels, std::bad_alloc when memory runs out.
[[nodiscard]] Stored read_avif(const Source& source);
[[nodiscard]] Stored read_bmp(const Source& source);
[[nodiscard]] Stored read_jpeg(const Source& source);
[[nodiscard]] Stored read_png(const Source& source);
[[nodiscard]] Stored read_pnm(const Source& source);
[[nodiscard]] Stored read_tiff(const Source& source);
[[nodiscard]] Stored read_webp(const Source& source);

// Throws Error(input).
[[noreturn]] void refuse(const Source& source, const std::string& message);
// `what` continues the sentence: "a PNG that ends after 812 bytes".
[[noreturn]] void refuse_cut_short(const Source& source, const std::string& what);
// `what` continues the sentence: "the data of the PNG make no sense at row 3 of 10".
[[noreturn]] void refuse_damaged(const Source& source, const std::string& what);

// Throws Error(input) for a side of zero and Error(limit) above max_pixels. Readers call it with
// the sides of the header before they take memory.
void check_size(const Source& source, std::uint64_t width, std::uint64_t height);

// Sets the sides, the model and the bits, and takes the memory of the samples.
void allocate(Picture& picture, std::uint32_t width, std::uint32_t height, ColourModel model,
              int bits);

// "row 3 of 10", from an index that starts at 0.
[[nodiscard]] std::string row_of(std::uint64_t row, std::uint64_t rows);

// How many rows go by between two looks at cancel_requested().
inline constexpr std::uint32_t rows_per_check = 64;

// Marks transparent pixels; takes no memory as long as there are none.
class OpaquePlane {
  public:
    explicit OpaquePlane(std::size_t pixels) : pixels_(pixels) {}

    // Reads one alpha a pixel, `stride` values apart: less than `half` is transparent.
    template <typename T>
    void set(std::size_t first_pixel, const T* alpha, std::size_t stride, std::size_t count,
             unsigned half) {
        for (std::size_t i = 0; i < count; ++i) {
            if (alpha[i * stride] < half) mark_transparent(first_pixel + i);
        }
    }
    void mark_transparent(std::size_t pixel);

    [[nodiscard]] Samples<std::uint8_t> take() { return std::move(plane_); }

  private:
    std::size_t pixels_;
    Samples<std::uint8_t> plane_;
};

// Unsigned numbers out of bytes; the caller has checked that they are there.
[[nodiscard]] inline std::uint32_t little16(const std::uint8_t* p) {
    return static_cast<std::uint32_t>(p[0] | p[1] << 8);
}
[[nodiscard]] inline std::uint32_t little32(const std::uint8_t* p) {
    return little16(p) | little16(p + 2) << 16;
}
[[nodiscard]] inline std::uint32_t big16(const std::uint8_t* p) {
    return static_cast<std::uint32_t>(p[0] << 8 | p[1]);
}
[[nodiscard]] inline std::uint32_t big32(const std::uint8_t* p) {
    return big16(p) << 16 | big16(p + 2);
}

// An integer from 0 to `maximum` as one from 0 to `new_maximum`, rounded to the nearest.
[[nodiscard]] constexpr std::uint32_t rescale(std::uint64_t value, std::uint64_t maximum,
                                              std::uint64_t new_maximum) {
    return static_cast<std::uint32_t>((value * new_maximum + maximum / 2) / maximum);
}

// A premultiplied value and its alpha, both up to `maximum`, as the value itself.
[[nodiscard]] constexpr std::uint32_t unpremultiply(std::uint32_t value, std::uint32_t alpha,
                                                    std::uint32_t maximum) {
    if (alpha == 0) return 0;
    return value >= alpha ? maximum : rescale(value, alpha, maximum);
}

}  // namespace tincture::formats
