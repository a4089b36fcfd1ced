#include "output/small_png.h"

#include <zlib.h>

#include <algorithm>
#include <cstddef>
#include <map>
#include <new>
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
        for (std::size_t i = 0; i < above_.size(); ++i) {
            row_[i + 1] = static_cast<std::uint8_t>(row[i] - above_[i]);
        }
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

// The colours of `pixels` in the order in which they appear, and for each pixel the index of its
// own; nothing where they are more than 256.
std::vector<Rgb8> index_colours(const std::vector<Rgb8>& pixels, Bytes& indices) {
    constexpr std::size_t most_colours = 256;
    std::vector<Rgb8> palette;
    std::map<Rgb8, std::uint8_t> index_of;
    indices.resize(pixels.size());
    for (std::size_t i = 0; i < pixels.size(); ++i) {
        if (i > 0 && pixels[i] == pixels[i - 1]) {
            indices[i] = indices[i - 1];
            continue;
        }
        const auto [entry, added] =
            index_of.try_emplace(pixels[i], static_cast<std::uint8_t>(palette.size()));
        if (added && palette.size() == most_colours) return {};
        if (added) palette.push_back(pixels[i]);
        indices[i] = entry->second;
    }
    return palette;
}

}  // namespace

Canvas::Canvas(std::uint32_t canvas_width, std::uint32_t canvas_height)
    : width(canvas_width),
      height(canvas_height),
      pixels(std::size_t{canvas_width} * canvas_height, Rgb8{255, 255, 255}) {}

void Canvas::fill(int left, int top, int right, int bottom, Rgb8 colour) {
    left = std::max(left, 0);
    right = std::min(right, static_cast<int>(width));
    for (int y = std::max(top, 0); y < std::min(bottom, static_cast<int>(height)); ++y) {
        const auto row = pixels.begin() + static_cast<std::ptrdiff_t>(width) * y;
        if (left < right) std::fill(row + left, row + right, colour);
    }
}

void Canvas::blend(int x, int y, Rgb8 colour, std::uint8_t coverage) {
    if (x < 0 || y < 0 || x >= static_cast<int>(width) || y >= static_cast<int>(height)) return;
    Rgb8& pixel = pixels[static_cast<std::size_t>(y) * width + static_cast<std::size_t>(x)];
    const auto mix = [coverage](std::uint8_t under, std::uint8_t over) {
        return static_cast<std::uint8_t>((under * (255 - coverage) + over * coverage + 127) / 255);
    };
    pixel = {mix(pixel.r, colour.r), mix(pixel.g, colour.g), mix(pixel.b, colour.b)};
}

Bytes encode_png(const Canvas& canvas, std::uint32_t pixels_per_metre) {
    static_assert(sizeof(Rgb8) == 3);
    Bytes indices;
    const std::vector<Rgb8> palette = index_colours(canvas.pixels, indices);
    const bool indexed = !palette.empty();
    const std::size_t row_bytes = std::size_t{canvas.width} * (indexed ? 1 : 3);
    const auto* samples =
        indexed ? indices.data() : reinterpret_cast<const std::uint8_t*>(canvas.pixels.data());
    RowDeflater rows(row_bytes);
    for (std::size_t y = 0; y < canvas.height; ++y) rows.add(samples + y * row_bytes);

    Bytes header;
    append_number(header, canvas.width);
    append_number(header, canvas.height);
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
        for (const Rgb8& colour : palette) {
            entries.insert(entries.end(), {colour.r, colour.g, colour.b});
        }
        append_chunk(png, "PLTE", entries);
    }
    append_chunk(png, "IDAT", rows.finish());
    append_chunk(png, "IEND", {});
    return png;
}

}  // namespace tincture
