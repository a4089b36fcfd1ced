// TIFF through libtiff (TIFF 6.0 and BigTIFF): the first page only.
#include <tiffio.h>

#include <algorithm>

#include "picture/formats.h"
#include "picture/tiff_file.h"
#include "picture/tiff_layout.h"
#include "support/cancel.h"

namespace tincture::formats {
namespace {

template <typename T>
T tag(TIFF* tiff, std::uint32_t name, T otherwise) {
    T value = otherwise;
    return TIFFGetFieldDefaulted(tiff, name, &value) != 0 ? value : otherwise;
}

std::string compression_name(TIFF* tiff) {
    const auto code = tag<std::uint16_t>(tiff, TIFFTAG_COMPRESSION, COMPRESSION_NONE);
    const TIFFCodec* codec = TIFFFindCODEC(code);
    return codec != nullptr ? codec->name : "number " + std::to_string(code);
}

class TiffReader {
  public:
    explicit TiffReader(const Source& source)
        : source_(source),
          input_{source.descriptor, source.file_size},
          tiff_(open_tiff(source, input_)) {}

    Stored read() {
        check_kind();
        read_layout();
        read_facts();
        check_complaints("in its directory");
        TiffPixels pixels(layout_, stored_.picture);
        input_.decoding = true;
        if (TIFFIsTiled(tiff_.get()) != 0) {
            read_tiles(pixels);
        } else {
            read_rows(pixels);
        }
        pixels.finish();
        return std::move(stored_);
    }

  private:
    void check_kind();
    void read_layout();
    void read_model();
    void read_extra_samples();
    void read_palette();
    void read_facts();
    void read_rows(TiffPixels& pixels);
    void read_tiles(TiffPixels& pixels);
    void read_tile_plane(TiffPixels& pixels, int plane, Samples<std::uint8_t>& tile);
    [[nodiscard]] std::vector<int> planes() const;
    void check_complaints(const std::string& where);
    [[noreturn]] void give_up(const std::string& where);

    const Source& source_;
    TiffInput input_;
    TiffHandle tiff_;
    TiffLayout layout_;
    Stored stored_;
};

void TiffReader::give_up(const std::string& where) {
    const std::uint64_t pieces = TIFFIsTiled(tiff_.get()) != 0 ? TIFFNumberOfTiles(tiff_.get())
                                                               : TIFFNumberOfStrips(tiff_.get());
    constexpr std::uint64_t enough = 1'000'000;  // a damaged directory may claim any number
    std::uint64_t end = 0;
    for (std::uint64_t i = 0; i < std::min(pieces, enough); ++i) {
        const auto piece = static_cast<std::uint32_t>(i);
        end = std::max(end, TIFFGetStrileOffset(tiff_.get(), piece) +
                                TIFFGetStrileByteCount(tiff_.get(), piece));
    }
    if (end > source_.file_size) {
        refuse_cut_short(source_, "a TIFF that ends after " + std::to_string(source_.file_size) +
                                      " of at least " + std::to_string(end) + " bytes");
    }
    refuse_damaged(source_, "a TIFF with wrong data " + where);
}

void TiffReader::check_complaints(const std::string& where) {
    if (input_.complained) give_up(where);
}

// Refuses what is no picture of whole numbers in a known form.
void TiffReader::check_kind() {
    TIFF* tiff = tiff_.get();
    const auto kind = tag<std::uint32_t>(tiff, TIFFTAG_SUBFILETYPE, 0);
    if ((kind & FILETYPE_REDUCEDIMAGE) != 0) {
        refuse(source_,
               "is a TIFF that begins with a thumbnail, as raw files of cameras do: save the full "
               "picture as a TIFF of one page or as PNG");
    }
    const auto compression = tag<std::uint16_t>(tiff, TIFFTAG_COMPRESSION, COMPRESSION_NONE);
    if (TIFFIsCODECConfigured(compression) == 0 || compression == COMPRESSION_OJPEG) {
        refuse(source_, "is a TIFF with a compression that is not read (" + compression_name(tiff) +
                            "): save it with LZW, Deflate or no compression");
    }
    const auto format = tag<std::uint16_t>(tiff, TIFFTAG_SAMPLEFORMAT, SAMPLEFORMAT_UINT);
    if (format != SAMPLEFORMAT_UINT && format != SAMPLEFORMAT_VOID) {
        const std::string name = format == SAMPLEFORMAT_IEEEFP ? "floating-point"
                                 : format == SAMPLEFORMAT_INT  ? "signed"
                                                               : "complex";
        refuse(source_, "is a TIFF of " + name + " samples: save it with 8 or 16 bits a channel");
    }
}

void TiffReader::read_layout() {
    TIFF* tiff = tiff_.get();
    layout_.width = tag<std::uint32_t>(tiff, TIFFTAG_IMAGEWIDTH, 0);
    layout_.height = tag<std::uint32_t>(tiff, TIFFTAG_IMAGELENGTH, 0);
    check_size(source_, layout_.width, layout_.height);
    layout_.bits = tag<std::uint16_t>(tiff, TIFFTAG_BITSPERSAMPLE, 1);
    layout_.samples_per_pixel = tag<std::uint16_t>(tiff, TIFFTAG_SAMPLESPERPIXEL, 1);
    layout_.separate = layout_.samples_per_pixel > 1 &&
                       tag<std::uint16_t>(tiff, TIFFTAG_PLANARCONFIG, PLANARCONFIG_CONTIG) ==
                           PLANARCONFIG_SEPARATE;
    const int bits = layout_.bits;
    if (bits != 1 && bits != 2 && bits != 4 && bits != 8 && bits != 16) {
        refuse(source_,
               "is a TIFF with " + std::to_string(bits) + " bits a channel: save it with 8 or 16");
    }
    read_model();
    read_extra_samples();
}

void TiffReader::read_model() {
    TIFF* tiff = tiff_.get();
    constexpr std::uint16_t unknown = 0xFFFF;
    switch (tag<std::uint16_t>(tiff, TIFFTAG_PHOTOMETRIC, unknown)) {
        case PHOTOMETRIC_MINISWHITE:
            layout_.white_is_zero = true;
            [[fallthrough]];
        case PHOTOMETRIC_MINISBLACK:
            layout_.model = ColourModel::grey;
            break;
        case PHOTOMETRIC_RGB:
            layout_.model = ColourModel::rgb;
            break;
        case PHOTOMETRIC_PALETTE:
            read_palette();
            break;
        case PHOTOMETRIC_SEPARATED:
            if (tag<std::uint16_t>(tiff, TIFFTAG_INKSET, INKSET_CMYK) != INKSET_CMYK) {
                refuse(source_, "is a TIFF in other inks than CMYK: save it as CMYK or RGB");
            }
            layout_.model = ColourModel::cmyk;
            break;
        case PHOTOMETRIC_YCBCR:
            if (tag<std::uint16_t>(tiff, TIFFTAG_COMPRESSION, 0) != COMPRESSION_JPEG ||
                TIFFSetField(tiff, TIFFTAG_JPEGCOLORMODE, JPEGCOLORMODE_RGB) == 0) {
                refuse(source_, "is a TIFF in YCbCr without JPEG compression: save it as RGB");
            }
            layout_.model = ColourModel::rgb;
            break;
        case PHOTOMETRIC_CIELAB:
        case PHOTOMETRIC_ICCLAB:
        case PHOTOMETRIC_ITULAB:
            refuse(source_, "is a TIFF in CIELAB: save it as RGB or CMYK");
        case PHOTOMETRIC_LOGL:
        case PHOTOMETRIC_LOGLUV:
            refuse(source_, "is a high-dynamic-range TIFF (LogLuv): save it as RGB with 16 bits");
        case PHOTOMETRIC_CFA:
            refuse(source_, "is a raw file of a camera: develop it and save it as TIFF or PNG");
        case unknown:
            refuse_damaged(source_, "a TIFF that does not say what its colours mean");
        default:
            refuse(source_, "is a TIFF in a rare kind of colours: save it as RGB or CMYK");
    }
}

void TiffReader::read_extra_samples() {
    const int colours = layout_.palette ? 1 : channel_count(layout_.model);
    if (layout_.samples_per_pixel < colours) {
        refuse_damaged(source_, "a TIFF with " + std::to_string(layout_.samples_per_pixel) +
                                    " channels where its colours need " + std::to_string(colours));
    }
    std::uint16_t count = 0;
    std::uint16_t* kinds = nullptr;
    TIFFGetFieldDefaulted(tiff_.get(), TIFFTAG_EXTRASAMPLES, &count, &kinds);
    for (int i = 0; i < count && colours + i < layout_.samples_per_pixel; ++i) {
        if (layout_.alpha_index >= 0) break;
        if (kinds[i] != EXTRASAMPLE_ASSOCALPHA && kinds[i] != EXTRASAMPLE_UNASSALPHA) continue;
        layout_.alpha_index = colours + i;
        layout_.premultiplied = kinds[i] == EXTRASAMPLE_ASSOCALPHA;
    }
    // One other extra sample is a mask of somebody's; beside CMYK it may be an ink that would be
    // lost. Several are bands of a scene.
    const int others = layout_.samples_per_pixel - colours - (layout_.alpha_index >= 0 ? 1 : 0);
    if (layout_.model == ColourModel::cmyk && others > 0) {
        refuse(source_, "is a TIFF with " + std::to_string(others) +
                            " channels besides CMYK: save it without spot channels");
    }
    if (others > 1) {
        refuse(source_, "has " + std::to_string(layout_.samples_per_pixel) +
                            " bands, as a scene has: export three of them as an RGB picture");
    }
}

void TiffReader::read_palette() {
    std::uint16_t* red = nullptr;
    std::uint16_t* green = nullptr;
    std::uint16_t* blue = nullptr;
    if (layout_.bits > 8 || TIFFGetField(tiff_.get(), TIFFTAG_COLORMAP, &red, &green, &blue) == 0) {
        refuse_damaged(source_, "a TIFF without the palette that its pixels need");
    }
    layout_.palette = true;
    layout_.model = ColourModel::rgb;
    const std::size_t size = std::size_t{1} << layout_.bits;
    const auto is_wide = [size](const std::uint16_t* map) {
        return std::any_of(map, map + size, [](std::uint16_t value) { return value > 255; });
    };
    // The map has 16 bits; old writers put 8-bit values in (common practice).
    const int shift = is_wide(red) || is_wide(green) || is_wide(blue) ? 8 : 0;
    const auto byte = [shift](std::uint16_t value) {
        return static_cast<std::uint8_t>(value >> shift);
    };
    for (std::size_t i = 0; i < size; ++i) {
        layout_.colours.push_back({byte(red[i]), byte(green[i]), byte(blue[i])});
    }
}

void TiffReader::read_facts() {
    TIFF* tiff = tiff_.get();
    std::uint32_t size = 0;
    const std::uint8_t* profile = nullptr;
    if (TIFFGetField(tiff, TIFFTAG_ICCPROFILE, &size, &profile) != 0 && profile != nullptr) {
        stored_.picture.icc.assign(profile, profile + size);
    }
    stored_.orientation = tag<std::uint16_t>(tiff, TIFFTAG_ORIENTATION, ORIENTATION_TOPLEFT);
    const auto unit = tag<std::uint16_t>(tiff, TIFFTAG_RESOLUTIONUNIT, RESUNIT_INCH);
    const double per_inch = unit == RESUNIT_INCH ? 1.0 : unit == RESUNIT_CENTIMETER ? 2.54 : 0.0;
    stored_.picture.resolution =
        sensible_resolution(tag<float>(tiff, TIFFTAG_XRESOLUTION, 0.0F) * per_inch,
                            tag<float>(tiff, TIFFTAG_YRESOLUTION, 0.0F) * per_inch);
}

// Which planes to read, alpha first: colours that are premultiplied with it need it.
std::vector<int> TiffReader::planes() const {
    if (!layout_.separate) return {0};
    std::vector<int> order;
    if (layout_.alpha_index >= 0) order.push_back(layout_.alpha_index);
    const int colours = layout_.palette ? 1 : channel_count(layout_.model);
    for (int i = 0; i < colours; ++i) order.push_back(i);
    return order;
}

void TiffReader::read_rows(TiffPixels& pixels) {
    TIFF* tiff = tiff_.get();
    const std::uint64_t samples =
        std::uint64_t{layout_.width} *
        static_cast<std::uint64_t>(layout_.separate ? 1 : layout_.samples_per_pixel);
    const std::uint64_t row_size = TIFFScanlineSize64(tiff);
    if (row_size != (samples * static_cast<std::uint64_t>(layout_.bits) + 7) / 8) {
        give_up("in its directory");
    }
    const bool plain = pixels.is_plain();
    Samples<std::uint8_t> row;
    if (!plain) row = Samples<std::uint8_t>(row_size);
    for (const int plane : planes()) {
        for (std::uint32_t y = 0; y < layout_.height; ++y) {
            if (y % rows_per_check == 0) throw_if_cancelled();
            std::uint8_t* to = plain ? pixels.plain_row(y) : row.data();
            const int result = TIFFReadScanline(tiff, to, y, static_cast<std::uint16_t>(plane));
            if (result != 1 || input_.complained) give_up("at " + row_of(y, layout_.height));
            if (!plain) pixels.put(to, 0, y, layout_.width, plane);
        }
    }
}

void TiffReader::read_tiles(TiffPixels& pixels) {
    const std::uint64_t size = TIFFTileSize64(tiff_.get());
    const auto tile_width = tag<std::uint32_t>(tiff_.get(), TIFFTAG_TILEWIDTH, 0);
    const auto tile_height = tag<std::uint32_t>(tiff_.get(), TIFFTAG_TILELENGTH, 0);
    const std::uint64_t samples =
        std::uint64_t{tile_width} *
        static_cast<std::uint64_t>(layout_.separate ? 1 : layout_.samples_per_pixel);
    const std::uint64_t row_size = (samples * static_cast<std::uint64_t>(layout_.bits) + 7) / 8;
    if (size == 0 || TIFFTileRowSize64(tiff_.get()) != row_size || size != row_size * tile_height) {
        give_up("in its directory");
    }
    if (size > source_.file_size + tiff_decoder_memory) {
        refuse_damaged(source_, "a TIFF with tiles far larger than itself");
    }
    Samples<std::uint8_t> tile(size);
    for (const int plane : planes()) read_tile_plane(pixels, plane, tile);
}

void TiffReader::read_tile_plane(TiffPixels& pixels, int plane, Samples<std::uint8_t>& tile) {
    TIFF* tiff = tiff_.get();
    const auto tile_width = tag<std::uint32_t>(tiff, TIFFTAG_TILEWIDTH, 0);
    const auto tile_height = tag<std::uint32_t>(tiff, TIFFTAG_TILELENGTH, 0);
    const std::size_t row_size = tile.size() / tile_height;
    for (std::uint64_t top = 0; top < layout_.height; top += tile_height) {
        for (std::uint64_t left = 0; left < layout_.width; left += tile_width) {
            throw_if_cancelled();
            const auto x = static_cast<std::uint32_t>(left);
            const auto y = static_cast<std::uint32_t>(top);
            const std::uint32_t index =
                TIFFComputeTile(tiff, x, y, 0, static_cast<std::uint16_t>(plane));
            const tmsize_t got =
                TIFFReadEncodedTile(tiff, index, tile.data(), static_cast<tmsize_t>(tile.size()));
            if (got != static_cast<tmsize_t>(tile.size()) || input_.complained) {
                give_up("in the tile at " + row_of(y, layout_.height));
            }
            const std::uint32_t rows = std::min(tile_height, layout_.height - y);
            const std::uint32_t columns = std::min(tile_width, layout_.width - x);
            for (std::uint32_t row = 0; row < rows; ++row) {
                pixels.put(tile.data() + row * row_size, x, y + row, columns, plane);
            }
        }
    }
}

}  // namespace

Stored read_tiff(const Source& source) {
    return TiffReader(source).read();
}

}  // namespace tincture::formats
