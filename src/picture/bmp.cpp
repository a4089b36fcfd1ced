// BMP, uncompressed. Read here and not by a library: the one at hand takes no more code than the
// checks that it needs around it (it pads short files and short palettes with what lies in memory).
#include <array>
#include <bit>
#include <vector>

#include "picture/formats.h"
#include "support/cancel.h"

namespace tincture::formats {
namespace {

constexpr std::uint64_t file_header_size = 14;
enum Compression : std::uint32_t {
    none = 0,
    rle8 = 1,
    rle4 = 2,
    bit_fields = 3,
    jpeg = 4,
    png = 5,
    alpha_bit_fields = 6,
};

// Where a channel lies in a pixel of 16 or 32 bits.
struct Field {
    std::uint32_t mask = 0;

    [[nodiscard]] std::uint8_t of(std::uint32_t pixel) const {
        const std::uint32_t value = (pixel & mask) >> std::countr_zero(mask);
        const std::uint32_t maximum = mask >> std::countr_zero(mask);
        return static_cast<std::uint8_t>(maximum == 255 ? value : rescale(value, maximum, 255));
    }
    // One run of bits.
    [[nodiscard]] bool is_sound() const {
        return mask != 0 &&
               std::popcount(mask) + std::countl_zero(mask) + std::countr_zero(mask) == 32;
    }
};

class BmpReader {
  public:
    explicit BmpReader(const Source& source) : source_(source), bytes_(source.bytes) {}

    Stored read() {
        read_header();
        check_kind();
        check_size(source_, width_, height_);
        if (bits_ <= 8) read_palette();
        if (bits_ == 16 || bits_ == 32) read_fields();
        check_length();
        allocate(stored_.picture, width_, height_, ColourModel::rgb, 8);
        read_pixels();
        read_profile();
        return std::move(stored_);
    }

  private:
    void read_header();
    void check_kind();
    void read_palette();
    void read_fields();
    void check_length();
    void read_pixels();
    void read_row(const std::uint8_t* row, std::size_t first_pixel);
    void read_field_row(const std::uint8_t* row, std::size_t first_pixel);
    void read_profile();
    // A number in the header, whose start is the start of the file; 0 where the header ends before.
    [[nodiscard]] std::uint32_t u16(std::uint64_t at) const {
        return at + 2 > header_end_ ? 0 : little16(&bytes_[at]);
    }
    [[nodiscard]] std::uint32_t u32(std::uint64_t at) const {
        return at + 4 > header_end_ ? 0 : little32(&bytes_[at]);
    }
    [[noreturn]] void end_of_file(const std::string& more) {
        refuse_cut_short(
            source_, "a BMP that ends after " + std::to_string(bytes_.size()) + " bytes" + more);
    }

    const Source& source_;
    std::span<const std::uint8_t> bytes_;
    Stored stored_;
    std::uint64_t header_end_ = 0;
    std::uint64_t pixels_at_ = 0;
    std::uint32_t header_size_ = 0;
    std::uint32_t width_ = 0;
    std::uint32_t height_ = 0;
    bool top_down_ = false;
    std::uint32_t bits_ = 0;
    std::uint32_t compression_ = none;
    std::uint32_t palette_size_ = 0;
    std::uint64_t row_size_ = 0;
    std::vector<std::array<std::uint8_t, 3>> palette_;
    Field red_, green_, blue_, alpha_;
    OpaquePlane opaque_{0};
    bool some_alpha_ = false;
};

void BmpReader::read_header() {
    header_size_ = little32(&bytes_[file_header_size]);
    header_end_ = file_header_size + header_size_;
    if (bytes_.size() < header_end_) end_of_file(", in its header");
    pixels_at_ = u32(10);
    if (header_size_ == 12) {
        width_ = u16(18);
        height_ = u16(20);
        bits_ = u16(24);
        return;
    }
    // Both sides are signed; a negative height means rows from the top.
    const auto width = static_cast<std::int32_t>(u32(18));
    const auto height = static_cast<std::int32_t>(u32(22));
    if (width < 0) refuse_damaged(source_, "a BMP with a negative width");
    width_ = static_cast<std::uint32_t>(width);
    top_down_ = height < 0;
    height_ =
        top_down_ ? 0U - static_cast<std::uint32_t>(height) : static_cast<std::uint32_t>(height);
    bits_ = u16(28);
    compression_ = u32(30);
    palette_size_ = u32(46);
    const auto x_per_metre = static_cast<std::int32_t>(u32(38));
    const auto y_per_metre = static_cast<std::int32_t>(u32(42));
    stored_.picture.resolution =
        sensible_resolution(x_per_metre * metres_per_inch, y_per_metre * metres_per_inch);
}

void BmpReader::check_kind() {
    const bool fields = compression_ == bit_fields || compression_ == alpha_bit_fields;
    if (compression_ == rle8 || compression_ == rle4) {
        refuse(source_, "is a run-length coded BMP, which is not read: save it as PNG");
    }
    // The same numbers mean other things behind the header of 64 bytes.
    if ((compression_ != none && !fields) || (header_size_ == 64 && compression_ != none)) {
        refuse(source_, "is a BMP with a rare compression, which is not read: save it as PNG");
    }
    const bool known =
        bits_ == 1 || bits_ == 4 || bits_ == 8 || bits_ == 16 || bits_ == 24 || bits_ == 32;
    if (!known || (fields && bits_ != 16 && bits_ != 32)) {
        refuse_damaged(source_, "a BMP with " + std::to_string(bits_) + " bits a pixel");
    }
}

void BmpReader::read_palette() {
    const std::uint64_t entry = header_size_ == 12 ? 3 : 4;
    const std::uint64_t most = std::uint64_t{1} << bits_;
    std::uint64_t count = palette_size_ == 0 ? most : std::min<std::uint64_t>(palette_size_, most);
    // Old files may put the pixels where the rest of an unused palette would be.
    if (pixels_at_ < header_end_) refuse_damaged(source_, "a BMP with pixels in its header");
    count = std::min(count, (pixels_at_ - header_end_) / entry);
    if (header_end_ + count * entry > bytes_.size()) end_of_file(", in its palette");
    for (std::uint64_t i = 0; i < count; ++i) {
        const std::uint8_t* colour = &bytes_[header_end_ + i * entry];
        palette_.push_back({colour[2], colour[1], colour[0]});
    }
}

void BmpReader::read_fields() {
    if (compression_ == none) {
        red_.mask = bits_ == 16 ? 0x7C00 : 0x00FF0000;
        green_.mask = bits_ == 16 ? 0x03E0 : 0x0000FF00;
        blue_.mask = bits_ == 16 ? 0x001F : 0x000000FF;
        alpha_.mask = bits_ == 16 ? 0 : 0xFF000000;  // common practice; reserved by the format
        return;
    }
    // Behind the header of 40 bytes, in the same place inside the longer ones.
    const std::uint64_t masks = file_header_size + 40;
    const bool with_alpha = header_size_ >= 56 || compression_ == alpha_bit_fields;
    header_end_ = std::max(header_end_, masks + (with_alpha ? 16 : 12));
    if (bytes_.size() < header_end_) end_of_file(", in its header");
    red_.mask = u32(masks);
    green_.mask = u32(masks + 4);
    blue_.mask = u32(masks + 8);
    if (with_alpha) alpha_.mask = u32(masks + 12);
    if (!red_.is_sound() || !green_.is_sound() || !blue_.is_sound() ||
        (alpha_.mask != 0 && !alpha_.is_sound())) {
        refuse_damaged(source_, "a BMP whose channels are nowhere in its pixels");
    }
}

void BmpReader::check_length() {
    row_size_ = (std::uint64_t{width_} * bits_ + 31) / 32 * 4;
    // Whether the last row is padded does not matter.
    const std::uint64_t needed = pixels_at_ + row_size_ * (height_ - std::uint64_t{1}) +
                                 (std::uint64_t{width_} * bits_ + 7) / 8;
    if (pixels_at_ < header_end_) refuse_damaged(source_, "a BMP with pixels in its header");
    if (bytes_.size() < needed) end_of_file(" of " + std::to_string(needed));
}

void BmpReader::read_pixels() {
    opaque_ = OpaquePlane(stored_.picture.pixel_count());
    for (std::uint32_t y = 0; y < height_; ++y) {
        if (y % rows_per_check == 0) throw_if_cancelled();
        const std::uint32_t stored_row = top_down_ ? y : height_ - 1 - y;
        const std::uint8_t* row = bytes_.data() + pixels_at_ + row_size_ * stored_row;
        const std::size_t first_pixel = std::size_t{y} * width_;
        if (bits_ == 16 || bits_ == 32) {
            read_field_row(row, first_pixel);
        } else {
            read_row(row, first_pixel);
        }
    }
    // A channel that is zero everywhere is one that nobody filled (common practice).
    if (some_alpha_) stored_.picture.opaque = opaque_.take();
}

void BmpReader::read_row(const std::uint8_t* row, std::size_t first_pixel) {
    std::uint8_t* to = stored_.picture.samples8.data() + first_pixel * 3;
    const std::uint32_t mask = (1U << bits_) - 1;
    for (std::size_t x = 0; x < width_; ++x, to += 3) {
        if (bits_ == 24) {
            to[0] = row[x * 3 + 2];
            to[1] = row[x * 3 + 1];
            to[2] = row[x * 3];
            continue;
        }
        const std::size_t bit = x * bits_;
        const std::uint32_t index = row[bit / 8] >> (8 - bits_ - bit % 8) & mask;
        if (index >= palette_.size()) {
            refuse_damaged(source_, "a BMP with a colour number that its palette has not");
        }
        for (std::size_t c = 0; c < 3; ++c) to[c] = palette_[index][c];
    }
}

void BmpReader::read_field_row(const std::uint8_t* row, std::size_t first_pixel) {
    std::uint8_t* to = stored_.picture.samples8.data() + first_pixel * 3;
    for (std::size_t x = 0; x < width_; ++x, to += 3) {
        const std::uint32_t pixel = bits_ == 16 ? little16(row + x * 2) : little32(row + x * 4);
        to[0] = red_.of(pixel);
        to[1] = green_.of(pixel);
        to[2] = blue_.of(pixel);
        if (alpha_.mask == 0) continue;
        some_alpha_ = some_alpha_ || (pixel & alpha_.mask) != 0;
        if (alpha_.of(pixel) < 128) opaque_.mark_transparent(first_pixel + x);
    }
}

// Only the header of 124 bytes has one; a link to a file elsewhere is none.
void BmpReader::read_profile() {
    constexpr std::uint32_t embedded = 0x4D424544;  // "MBED"
    if (header_size_ != 124 || u32(file_header_size + 56) != embedded) return;
    const std::uint64_t start = file_header_size + u32(file_header_size + 112);
    const std::uint64_t size = u32(file_header_size + 116);
    if (start + size > bytes_.size()) end_of_file(", in its colour profile");
    const auto profile = bytes_.subspan(start, size);
    stored_.picture.icc.assign(profile.begin(), profile.end());
}

}  // namespace

Stored read_bmp(const Source& source) {
    return BmpReader(source).read();
}

}  // namespace tincture::formats
