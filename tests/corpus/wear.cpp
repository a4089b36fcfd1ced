#include "tests/corpus/wear.h"

#include <jpeglib.h>

#include <algorithm>
#include <array>
#include <cstdio>
#include <cstdlib>
#include <vector>

#include "tests/corpus/canvas.h"

namespace tincture::corpus {
namespace {

constexpr std::array states = {State::clean, State::jpeg75,       State::noise,   State::scan,
                               State::half,  State::recompressed, State::enlarged};
constexpr std::array names = {"clean", "jpeg75",       "noise",   "scan",
                              "half",  "recompressed", "enlarged"};

Picture blank(std::uint32_t width, std::uint32_t height) {
    Picture picture;
    picture.width = width;
    picture.height = height;
    picture.samples8 = Samples<std::uint8_t>(picture.pixel_count() * 3);
    return picture;
}

// Errors of libjpeg end the program here: the pictures are our own.
std::vector<std::uint8_t> compressed(const Picture& picture, int quality) {
    jpeg_compress_struct jpeg{};
    jpeg_error_mgr errors{};
    jpeg.err = jpeg_std_error(&errors);
    jpeg_create_compress(&jpeg);
    unsigned char* bytes = nullptr;
    unsigned long size = 0;
    jpeg_mem_dest(&jpeg, &bytes, &size);
    jpeg.image_width = picture.width;
    jpeg.image_height = picture.height;
    jpeg.input_components = 3;
    jpeg.in_color_space = JCS_RGB;
    jpeg_set_defaults(&jpeg);
    jpeg_set_quality(&jpeg, quality, TRUE);
    jpeg.dct_method = JDCT_ISLOW;
    jpeg_start_compress(&jpeg, TRUE);
    std::vector<std::uint8_t> row(std::size_t{picture.width} * 3);
    while (jpeg.next_scanline < jpeg.image_height) {
        const std::uint8_t* from = picture.samples8.data() + jpeg.next_scanline * row.size();
        std::copy(from, from + row.size(), row.begin());
        JSAMPROW rows[] = {row.data()};
        jpeg_write_scanlines(&jpeg, rows, 1);
    }
    jpeg_finish_compress(&jpeg);
    std::vector<std::uint8_t> result(bytes, bytes + size);
    jpeg_destroy_compress(&jpeg);
    std::free(bytes);
    return result;
}

Picture decompressed(const std::vector<std::uint8_t>& bytes) {
    jpeg_decompress_struct jpeg{};
    jpeg_error_mgr errors{};
    jpeg.err = jpeg_std_error(&errors);
    jpeg_create_decompress(&jpeg);
    jpeg_mem_src(&jpeg, bytes.data(), static_cast<unsigned long>(bytes.size()));
    jpeg_read_header(&jpeg, TRUE);
    jpeg.out_color_space = JCS_RGB;
    jpeg.dct_method = JDCT_ISLOW;
    jpeg_start_decompress(&jpeg);
    Picture picture = blank(jpeg.output_width, jpeg.output_height);
    while (jpeg.output_scanline < jpeg.output_height) {
        JSAMPROW rows[] = {picture.samples8.data() +
                           std::size_t{jpeg.output_scanline} * jpeg.output_width * 3};
        jpeg_read_scanlines(&jpeg, rows, 1);
    }
    jpeg_finish_decompress(&jpeg);
    jpeg_destroy_decompress(&jpeg);
    return picture;
}

Picture through_jpeg(const Picture& picture, int quality) {
    return decompressed(compressed(picture, quality));
}

Picture noisy(const Picture& picture, double deviation, std::uint64_t seed) {
    Picture out = copy_of(picture);
    Random random(seed);
    for (std::size_t i = 0; i < out.samples8.size(); ++i) {
        out.samples8[i] = to_byte(out.samples8[i] + 255 * deviation * random.bell());
    }
    return out;
}

// exp(-x * x / 2) for x = 0 to 4, scaled to a sum of 1 over both sides.
constexpr std::array bell = {0.39894347, 0.24197145, 0.05399113, 0.00443186, 0.00013383};

// Blurs one way; `step` is the distance of neighbours in samples, `n` their number in a line.
std::vector<double> blurred(const std::vector<double>& in, std::size_t step, std::size_t n) {
    std::vector<double> out(in.size());
    for (std::size_t i = 0; i < in.size(); ++i) {
        const std::size_t at = i / step % n;
        double sum = in[i] * bell[0];
        for (std::size_t d = 1; d < bell.size(); ++d) {
            const std::size_t back = std::min(d, at);
            const std::size_t on = std::min(d, n - 1 - at);
            sum += bell[d] * (in[i - back * step] + in[i + on * step]);
        }
        out[i] = sum;
    }
    return out;
}

Picture blurred(const Picture& picture) {
    std::vector<double> light(picture.samples8.data(),
                              picture.samples8.data() + picture.samples8.size());
    light = blurred(light, 3, picture.width);
    light = blurred(light, std::size_t{picture.width} * 3, picture.height);
    Picture out = blank(picture.width, picture.height);
    for (std::size_t i = 0; i < light.size(); ++i) out.samples8[i] = to_byte(light[i]);
    return out;
}

Picture halved(const Picture& picture) {
    Picture out = blank(picture.width / 2, picture.height / 2);
    const std::size_t row = std::size_t{picture.width} * 3;
    std::size_t at = 0;
    for (std::size_t y = 0; y < out.height; ++y) {
        for (std::size_t x = 0; x < out.width; ++x) {
            for (std::size_t c = 0; c < 3; ++c) {
                const std::uint8_t* from = picture.samples8.data() + 2 * y * row + 6 * x + c;
                out.samples8[at++] = static_cast<std::uint8_t>(
                    (from[0] + from[3] + from[row] + from[row + 3] + 2) / 4);
            }
        }
    }
    return out;
}

// Twice the size, in straight lines between the centres of the pixels.
Picture doubled(const Picture& picture) {
    Picture out = blank(picture.width * 2, picture.height * 2);
    const auto sample = [&](std::int64_t x, std::int64_t y, std::size_t c) {
        x = std::clamp<std::int64_t>(x, 0, picture.width - 1);
        y = std::clamp<std::int64_t>(y, 0, picture.height - 1);
        return int{picture.samples8[static_cast<std::size_t>(y * picture.width + x) * 3 + c]};
    };
    std::size_t at = 0;
    for (std::int64_t y = 0; y < out.height; ++y) {
        const std::int64_t v = y / 2;
        const std::int64_t next_v = v + (y % 2 == 0 ? -1 : 1);
        for (std::int64_t x = 0; x < out.width; ++x) {
            const std::int64_t u = x / 2;
            const std::int64_t next_u = u + (x % 2 == 0 ? -1 : 1);
            for (std::size_t c = 0; c < 3; ++c) {
                const int sum = 9 * sample(u, v, c) + 3 * sample(next_u, v, c) +
                                3 * sample(u, next_v, c) + sample(next_u, next_v, c);
                out.samples8[at++] = static_cast<std::uint8_t>((sum + 8) / 16);
            }
        }
    }
    return out;
}

}  // namespace

std::span<const State> all_states() {
    return states;
}

std::string name_of(State state) {
    return names[static_cast<std::size_t>(state)];
}

bool keeps_size(State state) {
    return state != State::half;
}

Picture copy_of(const Picture& picture) {
    Picture out = blank(picture.width, picture.height);
    std::copy(picture.samples8.data(), picture.samples8.data() + picture.samples8.size(),
              out.samples8.data());
    return out;
}

Picture worn(const Picture& picture, State state, std::uint64_t seed) {
    switch (state) {
        case State::jpeg75:
            return through_jpeg(picture, 75);
        case State::noise:
            return noisy(picture, 0.02, seed);
        case State::scan:
            return through_jpeg(noisy(blurred(picture), 0.012, seed), 85);
        case State::half:
            return halved(picture);
        case State::recompressed:
            return through_jpeg(picture, 90);
        case State::enlarged:
            return doubled(through_jpeg(halved(picture), 50));
        default:
            return copy_of(picture);
    }
}

}  // namespace tincture::corpus
