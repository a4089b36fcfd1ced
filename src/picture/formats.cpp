#include "picture/formats.h"

#include <cmath>
#include <cstring>

#include "support/error.h"

namespace tincture {

std::optional<Resolution> sensible_resolution(double x_dpi, double y_dpi) {
    if (!std::isfinite(x_dpi) || !std::isfinite(y_dpi) || x_dpi <= 0 || y_dpi <= 0) return {};
    return Resolution{x_dpi, y_dpi};
}

namespace formats {

void refuse(const Source& source, const std::string& message) {
    throw Error(ErrorKind::input, source.subject, message);
}

void refuse_cut_short(const Source& source, const std::string& what) {
    refuse(source, "is cut short: " + what + "; copy or export it again");
}

void refuse_damaged(const Source& source, const std::string& what) {
    refuse(source, "is damaged: " + what + "; copy or export it again");
}

void check_size(const Source& source, std::uint64_t width, std::uint64_t height) {
    const std::string sides = std::to_string(width) + " x " + std::to_string(height) + " pixels";
    if (width == 0 || height == 0) refuse(source, "holds no pixels: its size is " + sides);
    if (width <= source.max_pixels / height) return;
    throw Error(ErrorKind::limit, source.subject,
                "is too large: " + sides + ", and the limit is " +
                    std::to_string(source.max_pixels) +
                    " pixels; raise it with --max-pixels or give a smaller copy");
}

void allocate(Picture& picture, std::uint32_t width, std::uint32_t height, ColourModel model,
              int bits) {
    picture.width = width;
    picture.height = height;
    picture.model = model;
    picture.bits = bits;
    const std::size_t size = picture.pixel_count() * static_cast<std::size_t>(channel_count(model));
    if (bits == 8) {
        picture.samples8 = Samples<std::uint8_t>(size);
    } else {
        picture.samples16 = Samples<std::uint16_t>(size);
    }
}

std::string row_of(std::uint64_t row, std::uint64_t rows) {
    return "row " + std::to_string(row + 1) + " of " + std::to_string(rows);
}

void OpaquePlane::mark_transparent(std::size_t pixel) {
    if (plane_.empty()) {
        plane_ = Samples<std::uint8_t>(pixels_);
        std::memset(plane_.data(), 1, pixels_);
    }
    plane_[pixel] = 0;
}

}  // namespace formats
}  // namespace tincture
