// PNG through libpng (ISO/IEC 15948).
#include <png.h>
#include <zlib.h>

#include <algorithm>
#include <array>
#include <csetjmp>
#include <cstring>
#include <vector>

#include "picture/exif.h"
#include "picture/formats.h"
#include "picture/made_profile.h"
#include "support/cancel.h"

namespace tincture::formats {
namespace {

constexpr std::size_t largest_chunk = std::size_t{64} << 20;  // a profile; pixels are no such chunk

// The file as libpng reads it, and what became of it.
struct Input {
    std::span<const std::uint8_t> bytes;
    std::size_t position = 0;
    bool ran_out = false;
    bool out_of_memory = false;
};

[[noreturn]] void on_error(png_structp png, png_const_charp message) {
    auto* input = static_cast<Input*>(png_get_error_ptr(png));
    if (std::strstr(message, "memory") != nullptr) input->out_of_memory = true;
    png_longjmp(png, 1);
}

// libpng warns about chunks that pixels do not depend on; missing or damaged pixels are errors.
void on_warning(png_structp, png_const_charp) {}

void on_read(png_structp png, png_bytep to, std::size_t size) {
    auto* input = static_cast<Input*>(png_get_io_ptr(png));
    if (size > input->bytes.size() - input->position) {
        input->ran_out = true;
        png_error(png, "end of file");
    }
    std::memcpy(to, &input->bytes[input->position], size);
    input->position += size;
}

// Runs `body`; false if libpng gave up in it. `body` must not own anything, because libpng leaves
// it with longjmp.
template <typename Body>
bool succeeds(png_structp png, const Body& body) {
    if (setjmp(png_jmpbuf(png)) != 0) return false;
    body();
    return true;
}

struct Handle {
    png_structp png = nullptr;
    png_infop info = nullptr;

    explicit Handle(Input& input) {
        png = png_create_read_struct(PNG_LIBPNG_VER_STRING, &input, on_error, on_warning);
        if (png == nullptr) throw std::bad_alloc();
        info = png_create_info_struct(png);
        if (info == nullptr) {
            png_destroy_read_struct(&png, nullptr, nullptr);
            throw std::bad_alloc();
        }
        png_set_read_fn(png, &input, on_read);
    }
    ~Handle() { png_destroy_read_struct(&png, &info, nullptr); }
    Handle(const Handle&) = delete;
    Handle& operator=(const Handle&) = delete;
};

class PngReader {
  public:
    explicit PngReader(const Source& source)
        : source_(source), input_{source.bytes}, handle_(input_) {}

    Stored read() {
        check_header();
        read_header();
        plan();
        read_pixels();
        read_rest();
        return std::move(stored_);
    }

  private:
    void check_header();
    void read_header();
    void plan();
    void read_pixels();
    void read_all_rows(const Samples<std::uint8_t>& rows);
    void read_rest();
    void convert_row(const std::uint8_t* row, std::uint32_t y);
    void convert_palette_row(const std::uint8_t* row, std::uint32_t y);
    template <typename T>
    void split_alpha(const T* row, T* to, std::size_t first_pixel);
    void take_colours(std::optional<Cicp> cicp, std::vector<std::uint8_t> profile);
    std::vector<std::uint8_t> inflate_profile(std::span<const std::uint8_t> chunk);
    [[noreturn]] void give_up(const std::string& where);

    const Source& source_;
    Input input_;
    Handle handle_;
    Stored stored_;
    OpaquePlane opaque_{0};
    std::uint32_t width_ = 0;
    std::uint32_t height_ = 0;
    int passes_ = 1;
    bool palette_ = false;
    bool alpha_ = false;         // libpng delivers one alpha a pixel
    std::size_t row_bytes_ = 0;  // as libpng delivers rows
    std::uint32_t row_ = 0;      // the row being read
    png_colorp colours_ = nullptr;
    int colour_count_ = 0;
    std::array<std::uint8_t, 256> palette_alpha_{};
};

void PngReader::give_up(const std::string& where) {
    if (input_.out_of_memory) throw std::bad_alloc();
    if (input_.ran_out) {
        refuse_cut_short(source_, "a PNG that ends after " + std::to_string(source_.bytes.size()) +
                                      " bytes, " + where);
    }
    refuse_damaged(source_, "a PNG with wrong data " + where);
}

// Before libpng sees it, so that a size beyond what libpng takes gets the right message.
void PngReader::check_header() {
    const auto& bytes = source_.bytes;
    if (bytes.size() < 33) {
        refuse_cut_short(source_, "a PNG of " + std::to_string(bytes.size()) + " bytes");
    }
    if (std::memcmp(&bytes[12], "IHDR", 4) != 0) refuse_damaged(source_, "a PNG without header");
    check_size(source_, big32(&bytes[16]), big32(&bytes[20]));
}

void PngReader::read_header() {
    png_structp png = handle_.png;
    const bool read = succeeds(png, [&] {
        png_set_user_limits(png, PNG_UINT_31_MAX, PNG_UINT_31_MAX);
        png_set_chunk_malloc_max(png, largest_chunk);
        png_set_crc_action(png, PNG_CRC_ERROR_QUIT, PNG_CRC_ERROR_QUIT);
        // Kept as found: libpng would drop a profile that it does not like.
        static constexpr png_byte raw[] = "iCCP\0cICP\0eXIf";
        png_set_keep_unknown_chunks(png, PNG_HANDLE_CHUNK_ALWAYS, raw, 3);
        static constexpr png_byte unused[] = "tEXt\0zTXt\0iTXt\0sPLT\0hIST\0bKGD\0tIME";
        png_set_keep_unknown_chunks(png, PNG_HANDLE_CHUNK_NEVER, unused, 7);
        png_read_info(png, handle_.info);
    });
    if (!read) give_up("in its header");
}

// How libpng is to deliver the rows, and what they become.
void PngReader::plan() {
    png_structp png = handle_.png;
    png_infop info = handle_.info;
    width_ = png_get_image_width(png, info);
    height_ = png_get_image_height(png, info);
    const int type = png_get_color_type(png, info);
    const int depth = png_get_bit_depth(png, info);
    palette_ = type == PNG_COLOR_TYPE_PALETTE;
    const bool keyed = png_get_valid(png, info, PNG_INFO_tRNS) != 0;
    alpha_ = !palette_ && (keyed || (type & PNG_COLOR_MASK_ALPHA) != 0);

    const bool planned = succeeds(png, [&] {
        if (palette_) {
            png_get_PLTE(png, info, &colours_, &colour_count_);
            png_bytep alphas = nullptr;
            int alpha_count = 0;
            if (keyed) png_get_tRNS(png, info, &alphas, &alpha_count, nullptr);
            palette_alpha_.fill(255);
            std::copy_n(alphas, alpha_count, palette_alpha_.begin());
            png_set_packing(png);
        } else {
            if (type == PNG_COLOR_TYPE_GRAY && depth < 8) png_set_expand_gray_1_2_4_to_8(png);
            if (keyed) png_set_tRNS_to_alpha(png);
            if (depth == 16) png_set_swap(png);
        }
        passes_ = png_set_interlace_handling(png);
        png_read_update_info(png, info);
        row_bytes_ = png_get_rowbytes(png, info);
    });
    if (!planned || (palette_ && colour_count_ == 0)) give_up("in its header");

    const bool grey = (type & PNG_COLOR_MASK_COLOR) == 0;
    allocate(stored_.picture, width_, height_, grey ? ColourModel::grey : ColourModel::rgb,
             depth == 16 ? 16 : 8);
    opaque_ = OpaquePlane(stored_.picture.pixel_count());
}

void PngReader::read_pixels() {
    Picture& picture = stored_.picture;
    std::uint8_t* base = picture.bits == 16
                             ? reinterpret_cast<std::uint8_t*>(picture.samples16.data())
                             : picture.samples8.data();
    const bool direct = !palette_ && !alpha_;
    // Interlaced pictures come in seven passes over all rows, so all rows have to stay.
    Samples<std::uint8_t> buffer;
    if (!direct) buffer = Samples<std::uint8_t>(row_bytes_ * (passes_ > 1 ? height_ : 1));

    for (int pass = 0; pass < passes_; ++pass) {
        for (row_ = 0; row_ < height_; ++row_) {
            if (row_ % rows_per_check == 0) throw_if_cancelled();
            std::uint8_t* row = direct        ? base + row_ * row_bytes_
                                : passes_ > 1 ? buffer.data() + row_ * row_bytes_
                                              : buffer.data();
            const bool read =
                succeeds(handle_.png, [&] { png_read_row(handle_.png, row, nullptr); });
            if (!read) give_up("at " + row_of(row_, height_));
            if (!direct && pass + 1 == passes_) convert_row(row, row_);
        }
    }
    picture.opaque = opaque_.take();
}

void PngReader::convert_row(const std::uint8_t* row, std::uint32_t y) {
    if (palette_) return convert_palette_row(row, y);
    Picture& picture = stored_.picture;
    const std::size_t first = std::size_t{y} * width_;
    const std::size_t offset = first * static_cast<std::size_t>(channel_count(picture.model));
    if (picture.bits == 16) {
        split_alpha(reinterpret_cast<const std::uint16_t*>(row), picture.samples16.data() + offset,
                    first);
    } else {
        split_alpha(row, picture.samples8.data() + offset, first);
    }
}

template <typename T>
void PngReader::split_alpha(const T* row, T* to, std::size_t first_pixel) {
    const auto channels = static_cast<std::size_t>(channel_count(stored_.picture.model));
    constexpr unsigned half = 1U << (8 * sizeof(T) - 1);
    opaque_.set(first_pixel, row + channels, channels + 1, width_, half);
    for (std::uint32_t x = 0; x < width_; ++x, row += channels + 1, to += channels) {
        for (std::size_t c = 0; c < channels; ++c) to[c] = row[c];
    }
}

void PngReader::convert_palette_row(const std::uint8_t* row, std::uint32_t y) {
    const std::size_t first = std::size_t{y} * width_;
    std::uint8_t* to = stored_.picture.samples8.data() + first * 3;
    for (std::uint32_t x = 0; x < width_; ++x, to += 3) {
        const std::uint8_t index = row[x];
        if (index >= colour_count_) {
            refuse_damaged(source_, "a PNG with a colour number that its palette has not, at " +
                                        row_of(y, height_));
        }
        to[0] = colours_[index].red;
        to[1] = colours_[index].green;
        to[2] = colours_[index].blue;
        if (palette_alpha_[index] < 128) opaque_.mark_transparent(first + x);
    }
}

// What comes behind the pixels, and the facts that the header and the end hold.
void PngReader::read_rest() {
    png_structp png = handle_.png;
    png_infop info = handle_.info;
    if (!succeeds(png, [&] { png_read_end(png, info); })) give_up("behind its pixels");

    png_unknown_chunkp chunks = nullptr;
    const int count = png_get_unknown_chunks(png, info, &chunks);
    std::optional<Cicp> cicp;
    std::vector<std::uint8_t> profile;
    ExifFacts exif;
    for (const png_unknown_chunk& chunk : std::span(chunks, static_cast<std::size_t>(count))) {
        const std::string_view name(reinterpret_cast<const char*>(chunk.name));
        const std::span<const std::uint8_t> data(chunk.data, chunk.size);
        if (name == "iCCP") profile = inflate_profile(data);
        if (name == "cICP" && data.size() == 4) cicp = Cicp{data[0], data[1]};
        if (name == "eXIf") exif = read_exif(data);
    }
    take_colours(cicp, std::move(profile));

    std::uint32_t x = 0;
    std::uint32_t y = 0;
    int unit = PNG_RESOLUTION_UNKNOWN;
    png_get_pHYs(png, info, &x, &y, &unit);
    stored_.picture.resolution = unit == PNG_RESOLUTION_METER
                                     ? sensible_resolution(x * metres_per_inch, y * metres_per_inch)
                                     : exif.resolution;
    stored_.orientation = exif.orientation;
}

// In the order of precedence of the PNG specification, third edition, 4.3.
void PngReader::take_colours(std::optional<Cicp> cicp, std::vector<std::uint8_t> profile) {
    png_structp png = handle_.png;
    png_infop info = handle_.info;
    Picture& picture = stored_.picture;
    if (cicp) {
        if (is_high_dynamic_range(*cicp)) {
            refuse(source_, "is a high-dynamic-range picture (PQ or HLG): save it as sRGB");
        }
        if (auto made = profile_of_cicp(picture.model, *cicp)) {
            picture.icc = std::move(*made);
            return;
        }
    }
    if (!profile.empty()) {
        picture.icc = std::move(profile);
        return;
    }
    if (png_get_valid(png, info, PNG_INFO_sRGB) != 0) return;

    Chromaticities c = srgb_chromaticities;
    png_get_cHRM(png, info, &c.white_x, &c.white_y, &c.red_x, &c.red_y, &c.green_x, &c.green_y,
                 &c.blue_x, &c.blue_y);
    Transfer transfer;
    double gamma = 0;  // light to value
    if (png_get_gAMA(png, info, &gamma) != 0 && gamma > 0) {
        transfer = {Transfer::Curve::power, 1 / gamma};
    }
    picture.icc = make_profile(picture.model, c, transfer);
}

// A name, a zero, a zero for the method and a zlib stream.
std::vector<std::uint8_t> PngReader::inflate_profile(std::span<const std::uint8_t> chunk) {
    const auto end = std::find(chunk.begin(), chunk.end(), std::uint8_t{0});
    const auto name_size = static_cast<std::size_t>(end - chunk.begin());
    if (chunk.size() > name_size + 2) {
        const auto packed = chunk.subspan(name_size + 2);
        for (std::size_t guess = 4096; guess <= largest_chunk; guess *= 4) {
            std::vector<std::uint8_t> profile(guess);
            uLongf size = guess;
            const int result = uncompress(profile.data(), &size, packed.data(), packed.size());
            if (result == Z_BUF_ERROR) continue;
            if (result != Z_OK) break;
            profile.resize(size);
            return profile;
        }
    }
    refuse_damaged(source_, "a PNG with a colour profile that cannot be unpacked");
}

}  // namespace

Stored read_png(const Source& source) {
    return PngReader(source).read();
}

}  // namespace tincture::formats
