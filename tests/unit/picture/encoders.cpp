// The encoders of made_files.h.
#include <gtest/gtest.h>
#include <webp/encode.h>

#include <algorithm>
#include <cstdlib>
#include <cstring>
#include <memory>

#include "made_files.h"

namespace tincture::testing_pictures {
namespace {

// A file in memory for libtiff.
struct MemoryFile {
    Bytes bytes;
    std::size_t position = 0;
};

tmsize_t memory_read(thandle_t handle, void* to, tmsize_t size) {
    auto* file = static_cast<MemoryFile*>(handle);
    const std::size_t left = file->bytes.size() - std::min(file->position, file->bytes.size());
    const std::size_t count = std::min(static_cast<std::size_t>(size), left);
    if (count > 0) std::memcpy(to, &file->bytes[file->position], count);
    file->position += count;
    return static_cast<tmsize_t>(count);
}

tmsize_t memory_write(thandle_t handle, void* from, tmsize_t size) {
    auto* file = static_cast<MemoryFile*>(handle);
    const auto count = static_cast<std::size_t>(size);
    file->bytes.resize(std::max(file->bytes.size(), file->position + count));
    std::memcpy(&file->bytes[file->position], from, count);
    file->position += count;
    return size;
}

toff_t memory_seek(thandle_t handle, toff_t offset, int whence) {
    auto* file = static_cast<MemoryFile*>(handle);
    const std::size_t base = whence == SEEK_SET   ? 0
                             : whence == SEEK_CUR ? file->position
                                                  : file->bytes.size();
    return file->position = base + offset;
}

int memory_close(thandle_t) {
    return 0;
}
toff_t memory_size(thandle_t handle) {
    return static_cast<MemoryFile*>(handle)->bytes.size();
}

}  // namespace

Bytes encode_png(const PngSpec& spec, const Bytes& rows) {
    Bytes out;
    png_structp png = png_create_write_struct(PNG_LIBPNG_VER_STRING, nullptr, nullptr, nullptr);
    png_infop info = png_create_info_struct(png);
    png_set_write_fn(
        png, &out,
        [](png_structp p, png_bytep data, std::size_t size) {
            auto* to = static_cast<Bytes*>(png_get_io_ptr(p));
            to->insert(to->end(), data, data + size);
        },
        [](png_structp) {});
    png_set_IHDR(png, info, spec.width, spec.height, spec.depth, spec.type, spec.interlace,
                 PNG_COMPRESSION_TYPE_DEFAULT, PNG_FILTER_TYPE_DEFAULT);
    spec.extras(png, info);
    png_write_info_before_PLTE(png, info);
    for (const auto& [name, data] : spec.raw_chunks) {
        png_write_chunk(png, reinterpret_cast<png_const_bytep>(name.c_str()), data.data(),
                        data.size());
    }
    png_write_info(png, info);
    const std::size_t row_size = rows.size() / spec.height;
    std::vector<png_bytep> pointers;
    for (std::size_t y = 0; y < spec.height; ++y) {
        pointers.push_back(const_cast<png_bytep>(rows.data() + y * row_size));
    }
    png_write_image(png, pointers.data());
    png_write_end(png, info);
    png_destroy_write_struct(&png, &info);
    return out;
}

Bytes encode_jpeg(const JpegSpec& spec, const Bytes& samples) {
    jpeg_compress_struct jpeg{};
    jpeg_error_mgr errors{};
    jpeg.err = jpeg_std_error(&errors);
    jpeg_create_compress(&jpeg);
    unsigned char* data = nullptr;
    unsigned long size = 0;
    jpeg_mem_dest(&jpeg, &data, &size);
    jpeg.image_width = spec.width;
    jpeg.image_height = spec.height;
    jpeg.input_components = spec.channels;
    jpeg.in_color_space = spec.space;
    jpeg_set_defaults(&jpeg);
    jpeg_set_quality(&jpeg, spec.quality, TRUE);
    spec.setup(&jpeg);
    jpeg_start_compress(&jpeg, TRUE);
    spec.markers(&jpeg);
    const std::size_t row_size = std::size_t{spec.width} * static_cast<std::size_t>(spec.channels);
    while (jpeg.next_scanline < jpeg.image_height) {
        JSAMPROW row = const_cast<JSAMPROW>(samples.data() + jpeg.next_scanline * row_size);
        jpeg_write_scanlines(&jpeg, &row, 1);
    }
    jpeg_finish_compress(&jpeg);
    jpeg_destroy_compress(&jpeg);
    Bytes out(data, data + size);
    std::free(data);
    return out;
}

Bytes plain_jpeg_decode(const Bytes& file, J_COLOR_SPACE space) {
    jpeg_decompress_struct jpeg{};
    jpeg_error_mgr errors{};
    jpeg.err = jpeg_std_error(&errors);
    jpeg_create_decompress(&jpeg);
    jpeg_mem_src(&jpeg, file.data(), static_cast<unsigned long>(file.size()));
    jpeg_read_header(&jpeg, TRUE);
    jpeg.out_color_space = space;
    jpeg_start_decompress(&jpeg);
    const std::size_t row_size =
        std::size_t{jpeg.output_width} * static_cast<std::size_t>(jpeg.output_components);
    Bytes out(row_size * jpeg.output_height);
    while (jpeg.output_scanline < jpeg.output_height) {
        JSAMPROW row = out.data() + jpeg.output_scanline * row_size;
        jpeg_read_scanlines(&jpeg, &row, 1);
    }
    jpeg_finish_decompress(&jpeg);
    jpeg_destroy_decompress(&jpeg);
    return out;
}

Bytes encode_tiff(const TiffSpec& spec, const Bytes& rows) {
    MemoryFile file;
    TIFF* tiff = TIFFClientOpen("made", spec.mode, &file, memory_read, memory_write, memory_seek,
                                memory_close, memory_size, nullptr, nullptr);
    EXPECT_NE(tiff, nullptr);
    TIFFSetField(tiff, TIFFTAG_IMAGEWIDTH, spec.width);
    TIFFSetField(tiff, TIFFTAG_IMAGELENGTH, spec.height);
    TIFFSetField(tiff, TIFFTAG_BITSPERSAMPLE, spec.bits);
    TIFFSetField(tiff, TIFFTAG_SAMPLESPERPIXEL, spec.channels);
    TIFFSetField(tiff, TIFFTAG_PHOTOMETRIC, spec.photometric);
    TIFFSetField(tiff, TIFFTAG_PLANARCONFIG, spec.planes);
    TIFFSetField(tiff, TIFFTAG_COMPRESSION, spec.compression);
    TIFFSetField(tiff, TIFFTAG_ROWSPERSTRIP, 5);
    spec.tags(tiff);
    if (spec.pixels) {
        spec.pixels(tiff);
    } else {
        Bytes copy = rows;  // libtiff may turn the bytes around in place
        const auto row_size = static_cast<std::size_t>(TIFFScanlineSize(tiff));
        const int planes = spec.planes == PLANARCONFIG_SEPARATE ? spec.channels : 1;
        std::uint8_t* row = copy.data();
        for (int plane = 0; plane < planes; ++plane) {
            for (std::uint32_t y = 0; y < spec.height; ++y, row += row_size) {
                EXPECT_LE(row + row_size, copy.data() + copy.size());
                EXPECT_EQ(TIFFWriteScanline(tiff, row, y, static_cast<std::uint16_t>(plane)), 1);
            }
        }
    }
    TIFFClose(tiff);
    return file.bytes;
}

Bytes encode_webp(std::uint32_t width, std::uint32_t height, const Bytes& samples, bool alpha,
                  bool lossless) {
    WebPConfig config;
    EXPECT_TRUE(WebPConfigInit(&config));
    config.lossless = lossless ? 1 : 0;
    config.exact = 1;  // colours under transparency too
    WebPPicture picture;
    EXPECT_TRUE(WebPPictureInit(&picture));
    picture.use_argb = lossless ? 1 : 0;
    picture.width = static_cast<int>(width);
    picture.height = static_cast<int>(height);
    WebPMemoryWriter writer;
    WebPMemoryWriterInit(&writer);
    picture.writer = WebPMemoryWrite;
    picture.custom_ptr = &writer;
    const int row_size = static_cast<int>(width) * (alpha ? 4 : 3);
    EXPECT_TRUE(alpha ? WebPPictureImportRGBA(&picture, samples.data(), row_size)
                      : WebPPictureImportRGB(&picture, samples.data(), row_size));
    EXPECT_TRUE(WebPEncode(&config, &picture));
    WebPPictureFree(&picture);
    Bytes out(writer.mem, writer.mem + writer.size);
    WebPMemoryWriterClear(&writer);
    return out;
}

Bytes wrap_webp(const Bytes& simple, std::uint32_t width, std::uint32_t height, const Bytes& icc,
                const Bytes& exif, bool alpha) {
    const auto chunk = [](const char* name, const Bytes& data) {
        return joined({text(name), little(data.size(), 4), data, Bytes(data.size() % 2)});
    };
    // RFC 9649, 2.7: profile 0x20, alpha 0x10, EXIF 0x08.
    const unsigned flags =
        (icc.empty() ? 0U : 0x20U) | (alpha ? 0x10U : 0U) | (exif.empty() ? 0U : 0x08U);
    const Bytes pixels(simple.begin() + 12, simple.end());
    const Bytes body = joined(
        {text("WEBP"),
         chunk("VP8X", joined({little(flags, 4), little(width - 1, 3), little(height - 1, 3)})),
         icc.empty() ? Bytes() : chunk("ICCP", icc), pixels,
         exif.empty() ? Bytes() : chunk("EXIF", exif)});
    return joined({text("RIFF"), little(body.size(), 4), body});
}

Bytes encode_avif(const AvifSpec& spec, const Bytes& samples) {
    avifImage* image = avifImageCreate(spec.width, spec.height, spec.depth, spec.format);
    image->yuvRange = AVIF_RANGE_FULL;
    if (spec.format == AVIF_PIXEL_FORMAT_YUV444) {
        image->matrixCoefficients = AVIF_MATRIX_COEFFICIENTS_IDENTITY;
    }
    spec.setup(image);
    const std::size_t row_size = samples.size() / spec.height;
    EXPECT_EQ(avifImageAllocatePlanes(image, AVIF_PLANES_YUV), AVIF_RESULT_OK);
    if (spec.format == AVIF_PIXEL_FORMAT_YUV400) {
        for (std::size_t y = 0; y < spec.height; ++y) {
            std::memcpy(image->yuvPlanes[0] + y * image->yuvRowBytes[0], &samples[y * row_size],
                        row_size);
        }
    } else {
        avifRGBImage rgb;
        avifRGBImageSetDefaults(&rgb, image);
        rgb.format = AVIF_RGB_FORMAT_RGB;
        rgb.pixels = const_cast<std::uint8_t*>(samples.data());
        rgb.rowBytes = static_cast<std::uint32_t>(row_size);
        EXPECT_EQ(avifImageRGBToYUV(image, &rgb), AVIF_RESULT_OK);
    }
    spec.finish(image);
    avifEncoder* encoder = avifEncoderCreate();
    encoder->speed = AVIF_SPEED_FASTEST;
    encoder->minQuantizer = encoder->maxQuantizer = AVIF_QUANTIZER_LOSSLESS;
    encoder->minQuantizerAlpha = encoder->maxQuantizerAlpha = AVIF_QUANTIZER_LOSSLESS;
    avifRWData data = AVIF_DATA_EMPTY;
    EXPECT_EQ(avifEncoderWrite(encoder, image, &data), AVIF_RESULT_OK) << encoder->diag.error;
    Bytes out(data.data, data.data + data.size);
    avifRWDataFree(&data);
    avifEncoderDestroy(encoder);
    avifImageDestroy(image);
    return out;
}

}  // namespace tincture::testing_pictures
