#include "picture/write_indexed_png.h"

#include <png.h>
#include <zlib.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <cmath>
#include <csetjmp>
#include <cstdio>
#include <cstring>
#include <memory>
#include <new>
#include <string>
#include <system_error>
#include <vector>

#include "picture/resolution.h"
#include "support/cancel.h"
#include "support/error.h"

namespace tincture {
namespace {

constexpr std::size_t idat_size = std::size_t{1} << 20;
constexpr std::uint32_t rows_per_check = 64;

struct CloseFile {
    void operator()(std::FILE* file) const { std::fclose(file); }
};
using File = std::unique_ptr<std::FILE, CloseFile>;

// The file as libpng writes it, and what became of it.
struct Output {
    std::FILE* file = nullptr;
    int error = 0;  // errno of the first failure
};

void on_write(png_structp png, png_bytep data, std::size_t size) {
    auto* output = static_cast<Output*>(png_get_io_ptr(png));
    if (std::fwrite(data, 1, size, output->file) == size) return;
    output->error = errno;
    png_error(png, "write failed");
}
void on_flush(png_structp) {}
[[noreturn]] void on_error(png_structp png, png_const_charp) {
    png_longjmp(png, 1);
}
void on_warning(png_structp, png_const_charp) {}

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

    explicit Handle(Output& output) {
        png = png_create_write_struct(PNG_LIBPNG_VER_STRING, nullptr, on_error, on_warning);
        if (png == nullptr) throw std::bad_alloc();
        info = png_create_info_struct(png);
        if (info == nullptr) {
            png_destroy_write_struct(&png, nullptr);
            throw std::bad_alloc();
        }
        png_set_write_fn(png, &output, on_write, on_flush);
    }
    ~Handle() { png_destroy_write_struct(&png, &info); }
    Handle(const Handle&) = delete;
    Handle& operator=(const Handle&) = delete;
};

int bits_for(std::size_t colours) {
    return colours <= 2 ? 1 : colours <= 4 ? 2 : colours <= 16 ? 4 : 8;
}

// The first label in the highest bits of a byte.
template <unsigned bits>
void pack(const std::uint8_t* labels, std::size_t count, std::uint8_t* to) {
    constexpr std::size_t in_byte = 8 / bits;
    const std::size_t whole = count / in_byte;
    for (std::size_t i = 0; i < whole; ++i) {
        unsigned byte = 0;
        for (std::size_t k = 0; k < in_byte; ++k) byte = byte << bits | labels[i * in_byte + k];
        to[i] = static_cast<std::uint8_t>(byte);
    }
    if (whole * in_byte == count) return;
    unsigned byte = 0;
    for (std::size_t k = 0; k < in_byte; ++k) {
        const std::size_t i = whole * in_byte + k;
        byte = byte << bits | (i < count ? labels[i] : 0U);
    }
    to[whole] = static_cast<std::uint8_t>(byte);
}

void pack_row(const std::uint8_t* labels, std::size_t count, int bits, std::uint8_t* to) {
    switch (bits) {
        case 1:
            return pack<1>(labels, count, to);
        case 2:
            return pack<2>(labels, count, to);
        default:
            return pack<4>(labels, count, to);
    }
}

// The data of an iCCP chunk. libpng's own way would drop profiles that it does not like.
std::vector<std::uint8_t> profile_chunk(std::span<const std::uint8_t> icc) {
    constexpr std::array<std::uint8_t, 13> head{'I', 'C', 'C', ' ', 'p', 'r', 'o',
                                                'f', 'i', 'l', 'e', 0,   0};
    uLongf size = compressBound(icc.size());
    std::vector<std::uint8_t> chunk(head.size() + size);
    std::copy(head.begin(), head.end(), chunk.begin());
    if (compress2(chunk.data() + head.size(), &size, icc.data(), icc.size(), Z_BEST_COMPRESSION) !=
        Z_OK) {
        throw std::bad_alloc();
    }
    chunk.resize(head.size() + size);
    return chunk;
}

class IndexedPngWriter {
  public:
    IndexedPngWriter(const std::filesystem::path& path, const IndexedPicture& picture)
        : path_(path.native()), picture_(picture), file_(std::fopen(path.c_str(), "wbe")) {
        if (file_ == nullptr) give_up(errno);
        output_.file = file_.get();
    }

    void write() {
        Handle handle(output_);
        write_head(handle);
        write_rows(handle);
        if (!succeeds(handle.png, [&] { png_write_end(handle.png, handle.info); })) give_up();
        // Only closing tells whether the last bytes found their place.
        errno = 0;
        if (std::fclose(file_.release()) != 0) give_up(errno);
    }

  private:
    void write_head(const Handle& handle);
    void write_rows(const Handle& handle);
    [[noreturn]] void give_up() { give_up(output_.error); }
    [[noreturn]] void give_up(int error) {
        if (error == 0) throw std::bad_alloc();
        throw Error(ErrorKind::output, path_,
                    "cannot be written: " + std::generic_category().message(error));
    }

    std::string path_;
    const IndexedPicture& picture_;
    File file_;
    Output output_;
};

void IndexedPngWriter::write_head(const Handle& handle) {
    png_structp png = handle.png;
    png_infop info = handle.info;
    std::array<png_color, 256> colours{};
    std::array<png_byte, 256> alphas{};
    const auto colour_count = static_cast<int>(picture_.palette.size());
    std::transform(picture_.palette.begin(), picture_.palette.end(), colours.begin(), [](Rgb8 c) {
        return png_color{c.r, c.g, c.b};
    });
    alphas.fill(255);
    if (picture_.transparent_index) alphas[*picture_.transparent_index] = 0;
    std::vector<std::uint8_t> profile;
    if (!picture_.icc.empty()) profile = profile_chunk(picture_.icc);

    const bool written = succeeds(png, [&] {
        png_set_user_limits(png, PNG_UINT_31_MAX, PNG_UINT_31_MAX);
        png_set_compression_level(png, 1);
        png_set_compression_strategy(png, Z_RLE);
        png_set_filter(png, PNG_FILTER_TYPE_BASE, PNG_FILTER_NONE);
        png_set_compression_buffer_size(png, idat_size);
        png_set_IHDR(png, info, picture_.width, picture_.height, bits_for(picture_.palette.size()),
                     PNG_COLOR_TYPE_PALETTE, PNG_INTERLACE_NONE, PNG_COMPRESSION_TYPE_DEFAULT,
                     PNG_FILTER_TYPE_DEFAULT);
        png_set_PLTE(png, info, colours.data(), colour_count);
        if (picture_.transparent_index) {
            png_set_tRNS(png, info, alphas.data(), *picture_.transparent_index + 1, nullptr);
        }
        if (picture_.resolution) {
            const auto per_metre = [](double dpi) {
                return static_cast<png_uint_32>(
                    std::clamp(std::round(dpi / metres_per_inch), 1.0, 2147483647.0));
            };
            png_set_pHYs(png, info, per_metre(picture_.resolution->x_dpi),
                         per_metre(picture_.resolution->y_dpi), PNG_RESOLUTION_METER);
        }
        if (profile.empty()) png_set_sRGB(png, info, PNG_sRGB_INTENT_RELATIVE);
        png_write_info_before_PLTE(png, info);
        if (!profile.empty()) {
            static constexpr png_byte name[] = "iCCP";
            png_write_chunk(png, name, profile.data(), profile.size());
        }
        png_write_info(png, info);
    });
    if (!written) give_up();
}

void IndexedPngWriter::write_rows(const Handle& handle) {
    const int bits = bits_for(picture_.palette.size());
    const std::size_t width = picture_.width;
    std::vector<std::uint8_t> packed(bits == 8 ? 0
                                               : width * static_cast<std::size_t>(bits) / 8 + 1);
    for (std::uint32_t y = 0; y < picture_.height; ++y) {
        if (y % rows_per_check == 0) throw_if_cancelled();
        const std::uint8_t* row = picture_.labels + y * width;
        if (bits != 8) {
            pack_row(row, width, bits, packed.data());
            row = packed.data();
        }
        if (!succeeds(handle.png, [&] { png_write_row(handle.png, row); })) give_up();
    }
}

}  // namespace

void write_indexed_png(const std::filesystem::path& path, const IndexedPicture& picture) {
    try {
        IndexedPngWriter(path, picture).write();
    } catch (const std::bad_alloc&) {
        throw Error(ErrorKind::limit, path.native(), "needs more memory than is free");
    }
}

}  // namespace tincture
