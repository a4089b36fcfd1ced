#include "output/small_png.h"

#include <zlib.h>

#include <algorithm>
#include <cstddef>
#include <cstring>
#include <functional>
#include <new>
#include <optional>
#include <string_view>

namespace tincture {
namespace {

using Bytes = std::vector<std::uint8_t>;

void append_number(Bytes& bytes, std::uint32_t value) {
    for (const unsigned shift : {24U, 16U, 8U, 0U}) {
        bytes.push_back(static_cast<std::uint8_t>(value >> shift & 0xFFU));
    }
}

void append_chunk(Bytes& png, std::string_view type, const Bytes& data) {
    append_number(png, static_cast<std::uint32_t>(data.size()));
    const auto start = static_cast<std::ptrdiff_t>(png.size());
    png.insert(png.end(), type.begin(), type.end());
    png.insert(png.end(), data.begin(), data.end());
    const uLong check =
        crc32_z(0, png.data() + start, png.size() - static_cast<std::size_t>(start));
    append_number(png, static_cast<std::uint32_t>(check));
}

// Each row as its difference from the row above, which is nothing nearly everywhere in a drawing.
class RowDeflater {
  public:
    explicit RowDeflater(std::size_t row_bytes) : row_(row_bytes + 1), above_(row_bytes) {
        constexpr int window_bits = 15;
        constexpr int memory_level = 9;
        if (deflateInit2(&stream_, 1, Z_DEFLATED, window_bits, memory_level, Z_RLE) != Z_OK) {
            throw std::bad_alloc();
        }
    }
    RowDeflater(const RowDeflater&) = delete;
    RowDeflater& operator=(const RowDeflater&) = delete;
    ~RowDeflater() { deflateEnd(&stream_); }

    void add(const std::uint8_t* row) {
        constexpr std::uint8_t up_filter = 2;
        row_[0] = up_filter;
        std::transform(row, row + above_.size(), above_.begin(), row_.begin() + 1, std::minus<>());
        std::copy_n(row, above_.size(), above_.begin());
        stream_.next_in = row_.data();
        stream_.avail_in = static_cast<uInt>(row_.size());
        run(Z_NO_FLUSH);
    }

    Bytes finish() {
        run(Z_FINISH);
        return std::move(packed_);
    }

  private:
    void run(int flush) {
        do {
            stream_.next_out = buffer_.data();
            stream_.avail_out = static_cast<uInt>(buffer_.size());
            deflate(&stream_, flush);
            packed_.insert(packed_.end(), buffer_.data(), stream_.next_out);
        } while (stream_.avail_out == 0);
    }

    z_stream stream_{};
    Bytes row_;
    Bytes above_;
    Bytes buffer_ = Bytes(std::size_t{1} << 16U);
    Bytes packed_;
};

// Finds the index of a colour, in the order in which colours appear: open addressing in a table at
// most half full.
class ColourIndex {
  public:
    // Writes the indices of a row, which may hold those of the row before it; false where the row
    // brings more colours than an index holds.
    bool add(std::span<const Rgb8> row, std::uint8_t* indices) {
        // Most rows of a drawing are the same as the one above.
        if (row.size() == row_above_.size() &&
            std::memcmp(row.data(), row_above_.data(), row.size_bytes()) == 0) {
            return true;
        }
        row_above_.assign(row.begin(), row.end());
        for (std::size_t x = 0; x < row.size();) {
            const std::optional<std::uint8_t> index = index_of(row[x]);
            if (!index) return false;
            const std::size_t start = x;
            while (x < row.size() && row[x] == row[start]) ++x;
            std::memset(indices + start, *index, x - start);
        }
        return true;
    }

    [[nodiscard]] const std::vector<Rgb8>& palette() const { return palette_; }

  private:
    std::optional<std::uint8_t> index_of(Rgb8 colour) {
        constexpr std::size_t most_colours = 256;
        const std::uint32_t bits =
            std::uint32_t{colour.r} << 16 | std::uint32_t{colour.g} << 8 | std::uint32_t{colour.b};
        std::size_t at = bits * 0x9E3779B1U >> 23;
        for (; place_[at] != free_place; at = (at + 1) % place_.size()) {
            if (palette_[place_[at]] == colour) return static_cast<std::uint8_t>(place_[at]);
        }
        if (palette_.size() == most_colours) return std::nullopt;
        place_[at] = static_cast<std::uint16_t>(palette_.size());
        palette_.push_back(colour);
        return static_cast<std::uint8_t>(place_[at]);
    }

    static constexpr std::uint16_t free_place = 0xFFFF;
    std::vector<Rgb8> palette_;
    std::vector<std::uint16_t> place_ = std::vector<std::uint16_t>(512, free_place);
    std::vector<Rgb8> row_above_;
};

struct Packed {
    std::vector<Rgb8> palette;  // empty: the rows are RGB
    Bytes rows;
};

// Nothing where `indexed` is wanted and there are too many colours.
std::optional<Packed> pack(int width, int height, bool indexed,
                           const std::function<void(Band&)>& draw) {
    static_assert(sizeof(Rgb8) == 3);
    constexpr int band_height = 64;
    const auto pixels = static_cast<std::size_t>(width);
    RowDeflater rows(indexed ? pixels : 3 * pixels);
    ColourIndex colours;
    Bytes indices(pixels);
    for (int top = 0; top < height; top += band_height) {
        const int bottom = std::min(height, top + band_height);
        Band band(width, top, bottom);
        draw(band);
        for (int y = top; y < bottom; ++y) {
            const std::span<const Rgb8> row = band.row(y);
            if (!indexed) {
                rows.add(reinterpret_cast<const std::uint8_t*>(row.data()));
            } else if (colours.add(row, indices.data())) {
                rows.add(indices.data());
            } else {
                return std::nullopt;
            }
        }
    }
    return Packed{colours.palette(), rows.finish()};
}

}  // namespace

Band::Band(int width, int top, int bottom)
    : width_(width),
      top_(top),
      bottom_(bottom),
      pixels_(static_cast<std::size_t>(width) * static_cast<std::size_t>(bottom - top),
              Rgb8{255, 255, 255}) {}

std::span<const Rgb8> Band::row(int y) const {
    const auto pixels = static_cast<std::size_t>(width_);
    return std::span(pixels_).subspan(static_cast<std::size_t>(y - top_) * pixels, pixels);
}

void Band::fill(int left, int top, int right, int bottom, Rgb8 colour) {
    left = std::max(left, 0);
    right = std::min(right, width_);
    if (left >= right) return;
    for (int y = std::max(top, top_); y < std::min(bottom, bottom_); ++y) {
        const auto row = pixels_.begin() + static_cast<std::ptrdiff_t>(width_) * (y - top_);
        std::fill(row + left, row + right, colour);
    }
}

void Band::blend(int x, int y, Rgb8 colour, std::uint8_t coverage) {
    if (x < 0 || x >= width_ || y < top_ || y >= bottom_) return;
    Rgb8& pixel = pixels_[static_cast<std::size_t>(y - top_) * static_cast<std::size_t>(width_) +
                          static_cast<std::size_t>(x)];
    const auto mix = [coverage](std::uint8_t under, std::uint8_t over) {
        return static_cast<std::uint8_t>((under * (255 - coverage) + over * coverage + 127) / 255);
    };
    pixel = {mix(pixel.r, colour.r), mix(pixel.g, colour.g), mix(pixel.b, colour.b)};
}

Bytes draw_png(int width, int height, std::uint32_t pixels_per_metre,
               const std::function<void(Band&)>& draw) {
    std::optional<Packed> packed = pack(width, height, true, draw);
    const bool indexed = packed.has_value();
    if (!indexed) packed = pack(width, height, false, draw);

    Bytes header;
    append_number(header, static_cast<std::uint32_t>(width));
    append_number(header, static_cast<std::uint32_t>(height));
    const std::uint8_t colour_type = indexed ? 3 : 2;
    header.insert(header.end(), {8, colour_type, 0, 0, 0});  // 8 bits; not interlaced
    Bytes resolution;
    append_number(resolution, pixels_per_metre);
    append_number(resolution, pixels_per_metre);
    resolution.push_back(1);  // a metre

    Bytes png = {0x89, 'P', 'N', 'G', '\r', '\n', 0x1A, '\n'};
    append_chunk(png, "IHDR", header);
    append_chunk(png, "sRGB", {0});  // perceptual
    append_chunk(png, "pHYs", resolution);
    if (indexed) {
        Bytes entries;
        for (const Rgb8& colour : packed->palette) {
            entries.insert(entries.end(), {colour.r, colour.g, colour.b});
        }
        append_chunk(png, "PLTE", entries);
    }
    append_chunk(png, "IDAT", packed->rows);
    append_chunk(png, "IEND", {});
    return png;
}

}  // namespace tincture
