// WebP through libwebp (RFC 9649): still pictures.
#include <webp/decode.h>
#include <webp/demux.h>

#include <cstring>
#include <memory>

#include "picture/exif.h"
#include "picture/formats.h"
#include "support/cancel.h"

namespace tincture::formats {
namespace {

struct DeleteDemuxer {
    void operator()(WebPDemuxer* demuxer) const { WebPDemuxDelete(demuxer); }
};
using Demuxer = std::unique_ptr<WebPDemuxer, DeleteDemuxer>;

// RIFF states its own size, so a file that was cut is told from a damaged one.
void check_length(const Source& source) {
    const std::uint64_t size = source.bytes.size();
    if (size < 20) refuse_cut_short(source, "a WebP of " + std::to_string(size) + " bytes");
    const std::uint64_t claimed = std::uint64_t{little32(&source.bytes[4])} + 8;
    if (claimed > size) {
        refuse_cut_short(source, "a WebP that ends after " + std::to_string(size) + " of " +
                                     std::to_string(claimed) + " bytes");
    }
}

std::span<const std::uint8_t> chunk_of(const Demuxer& demuxer, const char* name) {
    WebPChunkIterator chunk;
    if (WebPDemuxGetChunk(demuxer.get(), name, 1, &chunk) == 0) return {};
    const std::span<const std::uint8_t> data(chunk.chunk.bytes, chunk.chunk.size);
    WebPDemuxReleaseChunkIterator(&chunk);  // the bytes stay: they are those of the file
    return data;
}

void decode(const Source& source, std::span<const std::uint8_t> frame, WEBP_CSP_MODE mode,
            Samples<std::uint8_t>& to, std::size_t row_size) {
    WebPDecoderConfig config;
    if (WebPInitDecoderConfig(&config) == 0) refuse(source, "cannot be read: libwebp is too old");
    config.output.colorspace = mode;
    config.output.is_external_memory = 1;
    config.output.u.RGBA.rgba = to.data();
    config.output.u.RGBA.stride = static_cast<int>(row_size);
    config.output.u.RGBA.size = to.size();
    const VP8StatusCode status = WebPDecode(frame.data(), frame.size(), &config);
    WebPFreeDecBuffer(&config.output);
    if (status == VP8_STATUS_OUT_OF_MEMORY) throw std::bad_alloc();
    if (status == VP8_STATUS_NOT_ENOUGH_DATA || status == VP8_STATUS_SUSPENDED) {
        refuse_cut_short(source, "a WebP with too little data for its pixels");
    }
    if (status != VP8_STATUS_OK) refuse_damaged(source, "a WebP whose pixels make no sense");
}

void decode_with_alpha(const Source& source, std::span<const std::uint8_t> frame,
                       Picture& picture) {
    const std::size_t pixels = picture.pixel_count();
    Samples<std::uint8_t> rgba(pixels * 4);
    decode(source, frame, MODE_RGBA, rgba, std::size_t{picture.width} * 4);
    OpaquePlane opaque(pixels);
    opaque.set(0, rgba.data() + 3, 4, pixels, 128);
    picture.opaque = opaque.take();
    for (std::size_t i = 0; i < pixels; ++i) {
        std::memcpy(picture.samples8.data() + i * 3, rgba.data() + i * 4, 3);
    }
}

}  // namespace

Stored read_webp(const Source& source) {
    check_length(source);
    const WebPData data{source.bytes.data(), source.bytes.size()};
    const Demuxer demuxer(WebPDemux(&data));
    if (demuxer == nullptr) refuse_damaged(source, "a WebP whose parts do not fit together");
    check_size(source, WebPDemuxGetI(demuxer.get(), WEBP_FF_CANVAS_WIDTH),
               WebPDemuxGetI(demuxer.get(), WEBP_FF_CANVAS_HEIGHT));
    if ((WebPDemuxGetI(demuxer.get(), WEBP_FF_FORMAT_FLAGS) & ANIMATION_FLAG) != 0) {
        refuse(source, "is an animated WebP: save the picture that you need as PNG or still WebP");
    }
    WebPIterator frame;
    if (WebPDemuxGetFrame(demuxer.get(), 1, &frame) == 0) {
        refuse_damaged(source, "a WebP without pixels");
    }
    const std::span<const std::uint8_t> bytes(frame.fragment.bytes, frame.fragment.size);
    const bool complete = frame.complete != 0;
    WebPDemuxReleaseIterator(&frame);  // the bytes stay: they are those of the file
    WebPBitstreamFeatures features;
    if (!complete || WebPGetFeatures(bytes.data(), bytes.size(), &features) != VP8_STATUS_OK) {
        refuse_damaged(source, "a WebP whose pixels make no sense");
    }
    const auto width = static_cast<std::uint32_t>(features.width);
    const auto height = static_cast<std::uint32_t>(features.height);
    check_size(source, width, height);

    Stored stored;
    allocate(stored.picture, width, height, ColourModel::rgb, 8);
    throw_if_cancelled();
    if (features.has_alpha != 0) {
        decode_with_alpha(source, bytes, stored.picture);
    } else {
        decode(source, bytes, MODE_RGB, stored.picture.samples8, std::size_t{width} * 3);
    }
    const auto profile = chunk_of(demuxer, "ICCP");
    stored.picture.icc.assign(profile.begin(), profile.end());
    const ExifFacts exif = read_exif(chunk_of(demuxer, "EXIF"));
    stored.picture.resolution = exif.resolution;
    stored.orientation = exif.orientation;
    return stored;
}

}  // namespace tincture::formats
