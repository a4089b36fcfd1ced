// PBM, PGM and PPM, plain and raw (P1 to P6), as netpbm's pages describe them.
#include <algorithm>
#include <vector>

#include "picture/formats.h"
#include "support/cancel.h"

namespace tincture::formats {
namespace {

constexpr bool is_space(std::uint8_t byte) {
    return byte == ' ' || (byte >= '\t' && byte <= '\r');
}

class PnmReader {
  public:
    explicit PnmReader(const Source& source) : source_(source), bytes_(source.bytes) {}

    Stored read() {
        const int kind = bytes_[1] - '0';
        position_ = 2;
        plain_ = kind <= 3;
        bitmap_ = kind == 1 || kind == 4;
        const std::uint32_t width = header_number("width");
        const std::uint32_t height = header_number("height");
        maximum_ = bitmap_ ? 1 : header_number("largest value");
        check_size(source_, width, height);
        if (maximum_ == 0 || maximum_ > 65535) {
            refuse_damaged(source_, "a PNM with a largest value of " + std::to_string(maximum_));
        }
        if (!plain_) skip_one_space();

        const bool colour = kind == 3 || kind == 6;
        row_samples_ = std::size_t{width} * (colour ? 3 : 1);
        check_length(width, height);
        allocate(stored_.picture, width, height, colour ? ColourModel::rgb : ColourModel::grey,
                 maximum_ > 255 ? 16 : 8);
        if (maximum_ > 255) {
            read_samples(stored_.picture.samples16);
        } else {
            read_samples(stored_.picture.samples8);
        }
        return std::move(stored_);
    }

  private:
    std::uint32_t header_number(const char* what);
    std::uint32_t plain_number();
    void skip_spaces_and_comments();
    void skip_one_space();
    void check_length(std::uint32_t width, std::uint32_t height);
    template <typename T>
    void read_samples(Samples<T>& to);
    void read_plain_row(std::vector<std::uint32_t>& row);
    void read_raw_row(std::vector<std::uint32_t>& row);
    [[noreturn]] void end_of_file(const std::string& where) {
        refuse_cut_short(
            source_, "a PNM that ends after " + std::to_string(bytes_.size()) + " bytes, " + where);
    }

    const Source& source_;
    std::span<const std::uint8_t> bytes_;
    std::size_t position_ = 0;
    bool plain_ = false;
    bool bitmap_ = false;
    std::uint32_t maximum_ = 1;
    std::size_t row_samples_ = 0;
    Stored stored_;
};

void PnmReader::skip_spaces_and_comments() {
    while (position_ < bytes_.size()) {
        if (bytes_[position_] == '#') {
            while (position_ < bytes_.size() && bytes_[position_] != '\n' &&
                   bytes_[position_] != '\r') {
                ++position_;
            }
        } else if (is_space(bytes_[position_])) {
            ++position_;
        } else {
            return;
        }
    }
}

void PnmReader::skip_one_space() {
    if (position_ >= bytes_.size()) end_of_file("in its header");
    if (!is_space(bytes_[position_])) refuse_damaged(source_, "a PNM without pixels");
    ++position_;
}

// Digits from here on; at least one, at most a number of 32 bits.
std::uint32_t PnmReader::plain_number() {
    std::uint64_t value = 0;
    const std::size_t start = position_;
    while (position_ < bytes_.size() && bytes_[position_] >= '0' && bytes_[position_] <= '9') {
        value = value * 10 + (bytes_[position_++] - '0');
        if (value > UINT32_MAX) refuse_damaged(source_, "a PNM with a number too large");
    }
    if (position_ == bytes_.size() && start == position_) end_of_file("where a number is due");
    if (start == position_) refuse_damaged(source_, "a PNM with something else than a number");
    return static_cast<std::uint32_t>(value);
}

std::uint32_t PnmReader::header_number(const char* what) {
    skip_spaces_and_comments();
    if (position_ >= bytes_.size()) end_of_file(std::string("before its ") + what);
    return plain_number();
}

// Before memory is taken: what the pixels need at least, against what is there.
void PnmReader::check_length(std::uint32_t width, std::uint32_t height) {
    std::uint64_t row = row_samples_ * (maximum_ > 255 ? 2 : 1);
    if (bitmap_) row = plain_ ? width : (std::uint64_t{width} + 7) / 8;
    if (plain_ && !bitmap_) row = row_samples_ * 2;  // a digit and a space
    const std::uint64_t there = bytes_.size() - position_;
    // The space behind the last number may be missing.
    if (there + (plain_ ? 1 : 0) < row * height) {
        end_of_file(plain_ ? "with fewer pixels than its header claims"
                           : "of " + std::to_string(position_ + row * height));
    }
}

template <typename T>
void PnmReader::read_samples(Samples<T>& to) {
    constexpr std::uint32_t full = (1U << (8 * sizeof(T))) - 1;
    std::vector<std::uint32_t> row(row_samples_);
    T* target = to.data();
    const std::uint32_t height = stored_.picture.height;
    for (std::uint32_t y = 0; y < height; ++y) {
        if (y % rows_per_check == 0) throw_if_cancelled();
        if (!plain_ && maximum_ == 255) {
            std::copy_n(bytes_.data() + position_, row_samples_, target);
            position_ += row_samples_;
            target += row_samples_;
            continue;
        }
        if (plain_) {
            read_plain_row(row);
        } else {
            read_raw_row(row);
        }
        if (*std::max_element(row.begin(), row.end()) > maximum_) {
            refuse_damaged(source_, "a PNM with values above its largest, at " + row_of(y, height));
        }
        for (const std::uint32_t value : row) {
            const std::uint32_t scaled = maximum_ == full ? value : rescale(value, maximum_, full);
            *target++ = static_cast<T>(bitmap_ ? full - scaled : scaled);  // 1 is black
        }
    }
}

void PnmReader::read_plain_row(std::vector<std::uint32_t>& row) {
    for (std::uint32_t& value : row) {
        skip_spaces_and_comments();
        if (!bitmap_) {
            value = plain_number();
            continue;
        }
        if (position_ >= bytes_.size()) end_of_file("where a pixel is due");
        value = bytes_[position_++] - std::uint32_t{'0'};  // needs no space behind it
    }
}

void PnmReader::read_raw_row(std::vector<std::uint32_t>& row) {
    const std::uint8_t* from = bytes_.data() + position_;
    if (bitmap_) {
        for (std::size_t i = 0; i < row.size(); ++i) row[i] = from[i / 8] >> (7 - i % 8) & 1U;
        position_ += (row.size() + 7) / 8;
    } else if (maximum_ > 255) {
        for (std::size_t i = 0; i < row.size(); ++i) row[i] = big16(from + 2 * i);
        position_ += 2 * row.size();
    } else {
        std::copy_n(from, row.size(), row.begin());
        position_ += row.size();
    }
}

}  // namespace

Stored read_pnm(const Source& source) {
    return PnmReader(source).read();
}

}  // namespace tincture::formats
