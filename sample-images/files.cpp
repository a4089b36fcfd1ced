#include "files.h"

#include <jpeglib.h>
#include <png.h>
#include <tiffio.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdio>
#include <memory>
#include <stdexcept>
#include <utility>

namespace tincture::samples {
namespace {

using File = std::unique_ptr<std::FILE, int (*)(std::FILE*)>;

File create(const std::string& path) {
    File file(std::fopen(path.c_str(), "wb"), &std::fclose);
    if (!file) throw std::runtime_error("cannot write " + path);
    return file;
}

// A full disk may show only now.
void finish(File file, const std::string& path) {
    const bool failed = std::ferror(file.get()) != 0;
    if (std::fclose(file.release()) != 0 || failed)
        throw std::runtime_error("cannot write " + path);
}

[[noreturn]] void png_failed(png_structp, png_const_charp message) {
    throw std::runtime_error(std::string("libpng: ") + message);
}

[[noreturn]] void jpeg_failed(j_common_ptr) {
    throw std::runtime_error("libjpeg cannot write");
}

constexpr std::uint32_t model_pixel_scale = 33550;
constexpr std::uint32_t model_tie_point = 33922;
constexpr std::uint32_t geo_key_directory = 34735;
constexpr std::uint32_t gdal_metadata = 42112;

void register_tags(TIFF* tiff) {
    static std::array<std::string, 4> names{"ModelPixelScale", "ModelTiepoint", "GeoKeyDirectory",
                                            "GDALMetadata"};
    static const std::array<TIFFFieldInfo, 4> fields{{
        {model_pixel_scale, -1, -1, TIFF_DOUBLE, FIELD_CUSTOM, 1, 1, names[0].data()},
        {model_tie_point, -1, -1, TIFF_DOUBLE, FIELD_CUSTOM, 1, 1, names[1].data()},
        {geo_key_directory, -1, -1, TIFF_SHORT, FIELD_CUSTOM, 1, 1, names[2].data()},
        {gdal_metadata, -1, -1, TIFF_ASCII, FIELD_CUSTOM, 1, 0, names[3].data()},
    }};
    TIFFMergeFieldInfo(tiff, fields.data(), static_cast<std::uint32_t>(fields.size()));
}

// Names of the bands and the scale to reflectance, where GDAL looks for them.
std::string band_metadata(const Scene& scene) {
    std::string xml = "<GDALMetadata>\n";
    for (std::size_t i = 0; i < scene.bands.size(); ++i) {
        const std::string sample = " sample=\"" + std::to_string(i) + "\" role=\"";
        xml += "  <Item name=\"DESCRIPTION\"" + sample + "description\">" + scene.bands[i];
        xml += "</Item>\n  <Item name=\"OFFSET\"" + sample + "offset\">0</Item>\n";
        xml += "  <Item name=\"SCALE\"" + sample + "scale\">0.0001</Item>\n";
    }
    return xml + "</GDALMetadata>\n";
}

void set_tags(TIFF* tiff, const Scene& scene, std::uint32_t tile) {
    const auto bands = static_cast<std::uint16_t>(scene.bands.size());
    TIFFSetField(tiff, TIFFTAG_IMAGEWIDTH, static_cast<std::uint32_t>(scene.width));
    TIFFSetField(tiff, TIFFTAG_IMAGELENGTH, static_cast<std::uint32_t>(scene.height));
    TIFFSetField(tiff, TIFFTAG_TILEWIDTH, tile);
    TIFFSetField(tiff, TIFFTAG_TILELENGTH, tile);
    TIFFSetField(tiff, TIFFTAG_SAMPLESPERPIXEL, bands);
    TIFFSetField(tiff, TIFFTAG_BITSPERSAMPLE, 16);
    TIFFSetField(tiff, TIFFTAG_SAMPLEFORMAT, SAMPLEFORMAT_UINT);
    TIFFSetField(tiff, TIFFTAG_PLANARCONFIG, PLANARCONFIG_CONTIG);
    TIFFSetField(tiff, TIFFTAG_PHOTOMETRIC, PHOTOMETRIC_MINISBLACK);
    const std::vector<std::uint16_t> extra(bands - 1U, EXTRASAMPLE_UNSPECIFIED);
    TIFFSetField(tiff, TIFFTAG_EXTRASAMPLES, static_cast<std::uint16_t>(bands - 1), extra.data());
    TIFFSetField(tiff, TIFFTAG_COMPRESSION, COMPRESSION_ADOBE_DEFLATE);
    TIFFSetField(tiff, TIFFTAG_PREDICTOR, PREDICTOR_HORIZONTAL);
    TIFFSetField(tiff, TIFFTAG_ZIPQUALITY, 9);

    const std::array<double, 3> scale{scene.pixel, scene.pixel, 0};
    const std::array<double, 6> tie{0, 0, 0, scene.left, scene.top, 0};
    // Version 1.1.0, three keys: projected model, pixels are areas, the reference system.
    const std::array<std::uint16_t, 16> keys{1,    1, 0, 3, 1024, 0, 1, 1,
                                             1025, 0, 1, 1, 3072, 0, 1, scene.epsg};
    TIFFSetField(tiff, model_pixel_scale, static_cast<int>(scale.size()), scale.data());
    TIFFSetField(tiff, model_tie_point, static_cast<int>(tie.size()), tie.data());
    TIFFSetField(tiff, geo_key_directory, static_cast<int>(keys.size()), keys.data());
    TIFFSetField(tiff, gdal_metadata, band_metadata(scene).c_str());
}

}  // namespace

void write_png(const std::string& path, int width, int height,
               const std::vector<std::uint8_t>& rgba, bool alpha, double dpi) {
    File file = create(path);
    png_structp png = png_create_write_struct(PNG_LIBPNG_VER_STRING, nullptr, &png_failed, nullptr);
    png_infop info = png_create_info_struct(png);
    png_init_io(png, file.get());
    png_set_compression_level(png, 9);
    png_set_IHDR(png, info, static_cast<png_uint_32>(width), static_cast<png_uint_32>(height), 8,
                 alpha ? PNG_COLOR_TYPE_RGB_ALPHA : PNG_COLOR_TYPE_RGB, PNG_INTERLACE_NONE,
                 PNG_COMPRESSION_TYPE_DEFAULT, PNG_FILTER_TYPE_DEFAULT);
    png_set_sRGB(png, info, PNG_sRGB_INTENT_RELATIVE);
    const auto per_metre = static_cast<png_uint_32>(std::floor(dpi / 0.0254 + 0.5));
    png_set_pHYs(png, info, per_metre, per_metre, PNG_RESOLUTION_METER);
    png_write_info(png, info);
    std::vector<std::uint8_t> row;
    for (int y = 0; y < height; ++y) {
        row.clear();
        for (int x = 0; x < width; ++x) {
            const auto pixel = rgba.begin() + (static_cast<std::ptrdiff_t>(y) * width + x) * 4;
            row.insert(row.end(), pixel, pixel + (alpha ? 4 : 3));
        }
        png_write_row(png, row.data());
    }
    png_write_end(png, nullptr);
    png_destroy_write_struct(&png, &info);
    finish(std::move(file), path);
}

void write_jpeg(const std::string& path, int width, int height,
                const std::vector<std::uint8_t>& rgb, int quality, int dpi) {
    File file = create(path);
    jpeg_compress_struct jpeg{};
    jpeg_error_mgr errors{};
    jpeg.err = jpeg_std_error(&errors);
    errors.error_exit = &jpeg_failed;
    jpeg_create_compress(&jpeg);
    jpeg_stdio_dest(&jpeg, file.get());
    jpeg.image_width = static_cast<JDIMENSION>(width);
    jpeg.image_height = static_cast<JDIMENSION>(height);
    jpeg.input_components = 3;
    jpeg.in_color_space = JCS_RGB;
    jpeg_set_defaults(&jpeg);
    jpeg_set_quality(&jpeg, quality, TRUE);
    jpeg.comp_info[0].h_samp_factor = 1;
    jpeg.comp_info[0].v_samp_factor = 1;
    jpeg.optimize_coding = TRUE;
    jpeg.density_unit = 1;
    jpeg.X_density = static_cast<UINT16>(dpi);
    jpeg.Y_density = static_cast<UINT16>(dpi);
    jpeg_start_compress(&jpeg, TRUE);
    while (jpeg.next_scanline < jpeg.image_height) {
        const std::size_t start = std::size_t{jpeg.next_scanline} * width * 3;
        JSAMPROW row = const_cast<JSAMPROW>(rgb.data() + start);
        jpeg_write_scanlines(&jpeg, &row, 1);
    }
    jpeg_finish_compress(&jpeg);
    jpeg_destroy_compress(&jpeg);
    finish(std::move(file), path);
}

void write_geotiff(const std::string& path, const Scene& scene) {
    constexpr int tile = 128;
    TIFFSetErrorHandler(nullptr);  // what failed is thrown below
    const std::unique_ptr<TIFF, void (*)(TIFF*)> tiff(TIFFOpen(path.c_str(), "w"), &TIFFClose);
    if (!tiff) throw std::runtime_error("cannot write " + path);
    register_tags(tiff.get());
    set_tags(tiff.get(), scene, tile);
    const std::size_t bands = scene.bands.size();
    for (int top = 0; top < scene.height; top += tile) {
        for (int left = 0; left < scene.width; left += tile) {
            std::vector<std::uint16_t> block(std::size_t{tile} * tile * bands);
            for (int y = 0; y < tile; ++y) {
                for (int x = 0; x < tile; ++x) {
                    // Beyond the scene the last row and column are repeated: they compress well.
                    const int row = std::min(top + y, scene.height - 1);
                    const int column = std::min(left + x, scene.width - 1);
                    const auto* from =
                        scene.samples.data() +
                        (static_cast<std::size_t>(row) * scene.width + column) * bands;
                    std::copy(from, from + bands,
                              block.data() + static_cast<std::size_t>(y * tile + x) * bands);
                }
            }
            if (TIFFWriteTile(tiff.get(), block.data(), static_cast<std::uint32_t>(left),
                              static_cast<std::uint32_t>(top), 0, 0) < 0) {
                throw std::runtime_error("cannot write " + path);
            }
        }
    }
}

}  // namespace tincture::samples
