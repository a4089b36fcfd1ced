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
#include "support/parallel.h"

namespace tincture {
namespace {

// Rows are compressed in bands of about this many bytes, several at a time. Where a band ends
// depends on the picture alone, so that the file does not depend on the number of threads.
constexpr std::size_t band_bytes = std::size_t{512} << 10;
constexpr std::size_t bands_at_once = 64;

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
        case 4:
            return pack<4>(labels, count, to);
        default:
            std::memcpy(to, labels, count);
            return;
    }
}

// A part of the zlib stream that all IDAT chunks make up together.
struct Band {
    std::vector<std::uint8_t> data;
    uLong checksum = 0;  // Adler-32 of what was compressed
    std::size_t raw_bytes = 0;
};

// Compresses rows [first, last) of a picture, without filter. Runs are all that is looked for, so
// nothing is lost by not looking into the band before.
Band compress_rows(const IndexedPicture& picture, std::size_t first, std::size_t last) {
    const int bits = bits_for(picture.palette.size());
    const std::size_t row_bytes = (picture.width * static_cast<std::size_t>(bits) + 7) / 8;
    std::vector<std::uint8_t> raw((row_bytes + 1) * (last - first));
    for (std::size_t y = first; y < last; ++y) {
        std::uint8_t* row = &raw[(y - first) * (row_bytes + 1)];  // begins with 0: no filter
        pack_row(picture.labels + y * picture.width, picture.width, bits, row + 1);
    }
    z_stream stream{};
    constexpr int without_header = -15;
    constexpr int usual_memory = 8;
    if (deflateInit2(&stream, 1, Z_DEFLATED, without_header, usual_memory, Z_RLE) != Z_OK) {
        throw std::bad_alloc();
    }
    Band band;
    band.raw_bytes = raw.size();
    band.checksum = adler32_z(adler32(0, nullptr, 0), raw.data(), raw.size());
    constexpr std::size_t flush_bytes = 16;
    band.data.resize(deflateBound(&stream, raw.size()) + flush_bytes);
    stream.next_in = raw.data();
    stream.avail_in = static_cast<uInt>(raw.size());
    stream.next_out = band.data.data();
    stream.avail_out = static_cast<uInt>(band.data.size());
    deflate(&stream, last == picture.height ? Z_FINISH : Z_SYNC_FLUSH);
    band.data.resize(stream.total_out);
    deflateEnd(&stream);
    return band;
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
        write_chunk(handle, "IEND", {});
        // Only closing tells whether the last bytes found their place.
        errno = 0;
        if (std::fclose(file_.release()) != 0) give_up(errno);
    }

  private:
    void write_head(const Handle& handle);
    void write_rows(const Handle& handle);
    void write_chunk(const Handle& handle, const char* name, std::span<const std::uint8_t> data);
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

void IndexedPngWriter::write_chunk(const Handle& handle, const char* name,
                                   std::span<const std::uint8_t> data) {
    const bool written = succeeds(handle.png, [&] {
        png_write_chunk(handle.png, reinterpret_cast<png_const_bytep>(name), data.data(),
                        data.size());
    });
    if (!written) give_up();
}

// One IDAT chunk a band. libpng would compress on one thread.
void IndexedPngWriter::write_rows(const Handle& handle) {
    const std::size_t height = picture_.height;
    const std::size_t rows = std::clamp<std::size_t>(band_bytes / picture_.width, 1, height);
    const std::size_t band_count = (height + rows - 1) / rows;
    uLong checksum = adler32(0, nullptr, 0);
    std::vector<Band> bands;
    for (std::size_t start = 0; start < band_count; start += bands_at_once) {
        bands.assign(std::min(bands_at_once, band_count - start), {});
        parallel_for(bands.size(), [&](std::size_t i) {
            throw_if_cancelled();
            const std::size_t first = (start + i) * rows;
            bands[i] = compress_rows(picture_, first, std::min(height, first + rows));
        });
        for (Band& band : bands) {
            checksum =
                adler32_combine(checksum, band.checksum, static_cast<z_off_t>(band.raw_bytes));
            if (start == 0 && &band == &bands.front()) {
                constexpr std::uint8_t zlib_header[] = {0x78, 0x01};
                band.data.insert(band.data.begin(), std::begin(zlib_header), std::end(zlib_header));
            }
            if (start + bands.size() == band_count && &band == &bands.back()) {
                for (const int shift : {24, 16, 8, 0}) {
                    band.data.push_back(static_cast<std::uint8_t>(checksum >> shift));
                }
            }
            write_chunk(handle, "IDAT", band.data);
        }
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
