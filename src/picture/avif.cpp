// AVIF through libavif (AV1 Image File Format 1.1): still pictures.
#include <avif/avif.h>

#include <algorithm>
#include <cstring>
#include <memory>
#include <vector>

#include "picture/av1_frame_size.h"
#include "picture/exif.h"
#include "picture/formats.h"
#include "picture/made_profile.h"
#include "support/cancel.h"

namespace tincture::formats {
namespace {

struct DestroyDecoder {
    void operator()(avifDecoder* decoder) const { avifDecoderDestroy(decoder); }
};
struct DestroyImage {
    void operator()(avifImage* image) const { avifImageDestroy(image); }
};
using Decoder = std::unique_ptr<avifDecoder, DestroyDecoder>;
using Image = std::unique_ptr<avifImage, DestroyImage>;

// The file as libavif reads it. While it decodes, every piece that it asks for is the stream of an
// image, whose frames may be larger than the file says outside of it; its AV1 decoder has no limit.
struct Input {
    avifIO io{};
    const Source* source = nullptr;
    bool decoding = false;
    std::optional<Av1FrameSize> too_large;
};

avifResult on_read(avifIO* io, std::uint32_t, std::uint64_t offset, std::size_t size,
                   avifROData* out) {
    auto* input = static_cast<Input*>(io->data);
    const auto& bytes = input->source->bytes;
    if (offset > bytes.size()) return AVIF_RESULT_IO_ERROR;
    const auto piece = bytes.subspan(offset, std::min<std::size_t>(size, bytes.size() - offset));
    out->data = piece.data();
    out->size = piece.size();
    if (!input->decoding) return AVIF_RESULT_OK;
    const auto frame = av1_frame_size(piece);
    if (frame && frame->width > input->source->max_pixels / frame->height) {
        input->too_large = frame;
        return AVIF_RESULT_IO_ERROR;
    }
    return AVIF_RESULT_OK;
}

// The largest size that the file claims anywhere, for files that libavif refuses without saying
// why: boxes "ispe" (ISO/IEC 23008-12), of four bytes name, four of version, then width and height.
void check_claimed_sizes(const Source& source) {
    constexpr std::string_view name = "ispe";
    const std::string_view all(reinterpret_cast<const char*>(source.bytes.data()),
                               source.bytes.size());
    const std::string_view head = all.substr(0, std::size_t{64} << 10);
    for (std::size_t at = head.find(name); at != std::string_view::npos;
         at = head.find(name, at + 1)) {
        if (head.size() - at < 16 || big32(&source.bytes[at + 4]) != 0) continue;
        check_size(source, big32(&source.bytes[at + 8]), big32(&source.bytes[at + 12]));
    }
}

[[noreturn]] void give_up(const Source& source, avifResult result) {
    if (result == AVIF_RESULT_OUT_OF_MEMORY) throw std::bad_alloc();
    check_claimed_sizes(source);
    if (result == AVIF_RESULT_TRUNCATED_DATA || result == AVIF_RESULT_IO_ERROR ||
        result == AVIF_RESULT_WAITING_ON_IO) {
        refuse_cut_short(source, "an AVIF that ends after " + std::to_string(source.bytes.size()) +
                                     " bytes, before all of its pixels");
    }
    refuse_damaged(
        source, std::string("an AVIF that cannot be decoded (") + avifResultToString(result) + ")");
}

Decoder parse(const Source& source, Input& input) {
    Decoder decoder(avifDecoderCreate());
    if (decoder == nullptr) throw std::bad_alloc();
    // The faster decoder in libavif prints what it dislikes about a damaged file on stderr.
    if (avifCodecName(AVIF_CODEC_CHOICE_AOM, AVIF_CODEC_FLAG_CAN_DECODE) != nullptr) {
        decoder->codecChoice = AVIF_CODEC_CHOICE_AOM;
    }
    // libavif takes no limit above its own.
    decoder->imageSizeLimit = static_cast<std::uint32_t>(
        std::min<std::uint64_t>(source.max_pixels, AVIF_DEFAULT_IMAGE_SIZE_LIMIT));
    decoder->imageDimensionLimit = 0;
    decoder->ignoreXMP = AVIF_TRUE;
    // Fields that older encoders left out and that no pixel depends on.
    decoder->strictFlags = AVIF_STRICT_CLAP_VALID;
    if (decoder->imageSizeLimit == 0) check_claimed_sizes(source);
    input.source = &source;
    input.io.read = on_read;
    input.io.sizeHint = source.bytes.size();
    input.io.persistent = AVIF_TRUE;
    input.io.data = &input;
    avifDecoderSetIO(decoder.get(), &input.io);
    const avifResult result = avifDecoderParse(decoder.get());
    if (result != AVIF_RESULT_OK) give_up(source, result);
    check_size(source, decoder->image->width, decoder->image->height);
    if (decoder->imageCount > 1) {
        refuse(source, "is an animated AVIF: save the picture that you need as PNG or still AVIF");
    }
    return decoder;
}

// The clean aperture, which libavif leaves to the caller: a view, not a copy.
Image view_of(const Source& source, const avifImage& image) {
    avifCropRect rect{0, 0, image.width, image.height};
    avifDiagnostics why;
    if ((image.transformFlags & AVIF_TRANSFORM_CLAP) != 0 &&
        avifCropRectConvertCleanApertureBox(&rect, &image.clap, image.width, image.height,
                                            image.yuvFormat, &why) == AVIF_FALSE) {
        refuse_damaged(source, "an AVIF with a frame outside of its pixels");
    }
    Image view(avifImageCreateEmpty());
    if (view == nullptr) throw std::bad_alloc();
    if (avifImageSetViewRect(view.get(), &image, &rect) != AVIF_RESULT_OK) {
        refuse_damaged(source, "an AVIF with a frame outside of its pixels");
    }
    return view;
}

// Every value of a plane as it is in the picture.
template <typename T>
std::vector<T> full_range_table(const avifImage& image) {
    const std::uint32_t maximum = (1U << image.depth) - 1;
    constexpr std::uint32_t full = (1U << (8 * sizeof(T))) - 1;
    const bool limited = image.yuvRange == AVIF_RANGE_LIMITED;
    const std::uint32_t unit = 1U << (image.depth - 8);
    const std::uint32_t black = limited ? 16 * unit : 0;
    const std::uint32_t range = limited ? 219 * unit : maximum;
    std::vector<T> table(std::size_t{maximum} + 1);
    for (std::uint32_t i = 0; i <= maximum; ++i) {
        const std::uint32_t value = i < black ? 0 : std::min(i - black, range);
        table[i] = static_cast<T>(rescale(value, range, full));
    }
    return table;
}

// Calls row(y, pointer to the values) for each row of a plane.
template <typename T, typename Row>
void each_row(const std::uint8_t* plane, std::uint32_t row_bytes, std::uint32_t height,
              const Row& row) {
    for (std::uint32_t y = 0; y < height; ++y) {
        if (y % rows_per_check == 0) throw_if_cancelled();
        row(std::size_t{y}, reinterpret_cast<const T*>(plane + std::size_t{y} * row_bytes));
    }
}

// Grey and unconverted RGB, exactly: libavif rounds in floating point of 24 bits.
template <typename T>
void copy_planes(const avifImage& image, Samples<T>& to) {
    const std::vector<T> table = full_range_table<T>(image);
    const bool grey = image.yuvFormat == AVIF_PIXEL_FORMAT_YUV400;
    const std::size_t channels = grey ? 1 : 3;
    // ITU-T H.273, matrix 0: Y is green, Cb is blue, Cr is red.
    constexpr std::size_t channel_of_plane[] = {1, 2, 0};
    for (std::size_t plane = 0; plane < channels; ++plane) {
        const std::size_t channel = grey ? 0 : channel_of_plane[plane];
        each_row<T>(image.yuvPlanes[plane], image.yuvRowBytes[plane], image.height,
                    [&](std::size_t y, const T* row) {
                        T* target = to.data() + y * image.width * channels + channel;
                        for (std::size_t x = 0; x < image.width; ++x) {
                            target[x * channels] =
                                table[std::min<std::size_t>(row[x], table.size() - 1)];
                        }
                    });
    }
}

void convert_yuv(const Source& source, const avifImage& image, Picture& picture) {
    avifImage colours = image;  // without alpha, with which libavif would multiply
    colours.alphaPlane = nullptr;
    avifRGBImage rgb;
    avifRGBImageSetDefaults(&rgb, &colours);
    rgb.format = AVIF_RGB_FORMAT_RGB;
    rgb.depth = static_cast<std::uint32_t>(picture.bits);
    rgb.avoidLibYUV = AVIF_TRUE;  // it may round differently on other processors
    rgb.chromaUpsampling = AVIF_CHROMA_UPSAMPLING_BILINEAR;
    rgb.rowBytes = picture.width * 3 * static_cast<std::uint32_t>(picture.bits / 8);
    rgb.pixels = picture.bits == 8 ? picture.samples8.data()
                                   : reinterpret_cast<std::uint8_t*>(picture.samples16.data());
    const avifResult result = avifImageYUVToRGB(&colours, &rgb);
    if (result != AVIF_RESULT_OK) give_up(source, result);
}

template <typename T>
void apply_alpha(const avifImage& image, Picture& picture, Samples<T>& samples) {
    if (image.alphaPlane == nullptr) return;
    const auto channels = static_cast<std::size_t>(channel_count(picture.model));
    const std::uint32_t maximum = (1U << image.depth) - 1;
    constexpr std::uint32_t full = (1U << (8 * sizeof(T))) - 1;
    OpaquePlane opaque(picture.pixel_count());
    each_row<T>(
        image.alphaPlane, image.alphaRowBytes, image.height, [&](std::size_t y, const T* alpha) {
            const std::size_t first = y * image.width;
            opaque.set(first, alpha, 1, image.width, maximum / 2 + 1);
            if (image.alphaPremultiplied == AVIF_FALSE) return;
            T* sample = samples.data() + first * channels;
            for (std::size_t i = 0; i < image.width * channels; ++i) {
                const std::uint32_t a = std::min<std::uint32_t>(alpha[i / channels], maximum);
                sample[i] =
                    static_cast<T>(unpremultiply(sample[i], rescale(a, maximum, full), full));
            }
        });
    picture.opaque = opaque.take();
}

template <typename T>
void fill(const Source& source, const avifImage& image, Picture& picture, Samples<T>& samples) {
    const bool planes_are_channels =
        image.yuvFormat == AVIF_PIXEL_FORMAT_YUV400 ||
        (image.yuvFormat == AVIF_PIXEL_FORMAT_YUV444 &&
         image.matrixCoefficients == AVIF_MATRIX_COEFFICIENTS_IDENTITY);
    if (planes_are_channels) {
        copy_planes(image, samples);
    } else {
        convert_yuv(source, image, picture);
    }
    apply_alpha(image, picture, samples);
}

// ISO/IEC 23008-12: "irot" turns by 90 degrees against the clock, then "imir" swaps top and bottom
// (mode 0) or left and right (mode 1).
int orientation_of(const avifImage& image) {
    constexpr int turned[4] = {1, 8, 3, 6};
    constexpr int turned_then_mirrored[4][2] = {{4, 2}, {5, 7}, {2, 4}, {7, 5}};
    const bool turns = (image.transformFlags & AVIF_TRANSFORM_IROT) != 0;
    const int angle = turns ? image.irot.angle & 3 : 0;
    if ((image.transformFlags & AVIF_TRANSFORM_IMIR) == 0) return turned[angle];
    return turned_then_mirrored[angle][image.imir.mode & 1];
}

void take_colours(const Source& source, const avifImage& image, Picture& picture) {
    if (image.icc.size > 0) {
        picture.icc.assign(image.icc.data, image.icc.data + image.icc.size);
        return;
    }
    const Cicp cicp{image.colorPrimaries, image.transferCharacteristics};
    if (is_high_dynamic_range(cicp)) {
        refuse(source, "is a high-dynamic-range AVIF (PQ or HLG): save it as sRGB");
    }
    auto profile = profile_of_cicp(picture.model, cicp);
    if (!profile) {
        refuse(source, "is an AVIF in a rare colour space (CICP " + std::to_string(cicp.primaries) +
                           "/" + std::to_string(cicp.transfer) + "): save it as sRGB");
    }
    picture.icc = std::move(*profile);
}

}  // namespace

Stored read_avif(const Source& source) {
    Input input;  // outlives the decoder
    const Decoder decoder = parse(source, input);
    throw_if_cancelled();
    input.decoding = true;
    const avifResult result = avifDecoderNextImage(decoder.get());
    if (input.too_large) check_size(source, input.too_large->width, input.too_large->height);
    if (result != AVIF_RESULT_OK) give_up(source, result);
    const avifImage& image = *decoder->image;
    check_size(source, image.width, image.height);
    throw_if_cancelled();

    const Image view = view_of(source, image);
    Stored stored;
    Picture& picture = stored.picture;
    const bool grey = image.yuvFormat == AVIF_PIXEL_FORMAT_YUV400;
    const int bits = image.depth == 8 ? 8 : 16;
    take_colours(source, image, picture);
    allocate(picture, view->width, view->height, grey ? ColourModel::grey : ColourModel::rgb, bits);
    if (bits == 8) {
        fill(source, *view, picture, picture.samples8);
    } else {
        fill(source, *view, picture, picture.samples16);
    }
    picture.resolution = read_exif({image.exif.data, image.exif.size}).resolution;
    stored.orientation = orientation_of(image);
    return stored;
}

}  // namespace tincture::formats
