#include "tests/support/pictures.h"

#include <algorithm>
#include <cmath>
#include <numeric>

namespace tincture::test_support {
namespace {

std::uint16_t scaled(double value, int bits) {
    const double full = bits == 16 ? 65535.0 : 255.0;
    return static_cast<std::uint16_t>(std::nearbyint(std::clamp(value, 0.0, 1.0) * full));
}

}  // namespace

Picture picture_of(ColourModel model, int bits, std::uint32_t width, std::uint32_t height,
                   const std::vector<std::uint16_t>& samples,
                   const std::vector<std::uint8_t>& opaque) {
    Picture picture;
    picture.width = width;
    picture.height = height;
    picture.model = model;
    picture.bits = bits;
    if (bits == 16) {
        picture.samples16 = Samples<std::uint16_t>(samples.size());
        std::copy(samples.begin(), samples.end(), picture.samples16.data());
    } else {
        picture.samples8 = Samples<std::uint8_t>(samples.size());
        std::transform(samples.begin(), samples.end(), picture.samples8.data(),
                       [](std::uint16_t s) { return static_cast<std::uint8_t>(s); });
    }
    if (!opaque.empty()) {
        picture.opaque = Samples<std::uint8_t>(opaque.size());
        std::copy(opaque.begin(), opaque.end(), picture.opaque.data());
    }
    return picture;
}

std::uint16_t sample_at(const Picture& picture, std::size_t i) {
    return picture.bits == 16 ? picture.samples16[i] : picture.samples8[i];
}

bool is_opaque(const Picture& picture, std::size_t pixel) {
    return picture.opaque.empty() || picture.opaque[pixel] != 0;
}

Picture shuffled_pixels(const Picture& picture, Random& random) {
    std::vector<std::size_t> order(picture.pixel_count());
    std::iota(order.begin(), order.end(), std::size_t{0});
    for (std::size_t i = order.size(); i > 1; --i) std::swap(order[i - 1], order[random.below(i)]);
    const auto channels = static_cast<std::size_t>(channel_count(picture.model));
    std::vector<std::uint16_t> samples;
    std::vector<std::uint8_t> opaque;
    for (const std::size_t pixel : order) {
        for (std::size_t c = 0; c < channels; ++c) {
            samples.push_back(sample_at(picture, pixel * channels + c));
        }
        if (!picture.opaque.empty()) opaque.push_back(picture.opaque[pixel]);
    }
    return picture_of(picture.model, picture.bits, picture.width, picture.height, samples, opaque);
}

Picture noise_picture(Random& random, ColourModel model, int bits, Size size, std::size_t levels) {
    std::vector<std::uint16_t> samples(std::size_t{size.width} * size.height *
                                       static_cast<std::size_t>(channel_count(model)));
    for (std::uint16_t& sample : samples) {
        const auto level = static_cast<double>(random.below(levels));
        sample = scaled(level / static_cast<double>(std::max<std::size_t>(1, levels - 1)), bits);
    }
    return picture_of(model, bits, size.width, size.height, samples);
}

Picture flat_picture(Random& random, ColourModel model, Size size, std::size_t colours) {
    const auto channels = static_cast<std::size_t>(channel_count(model));
    std::vector<std::uint16_t> inks(colours * channels);
    for (std::uint16_t& ink : inks) ink = static_cast<std::uint16_t>(random.below(256));
    std::vector<std::uint16_t> samples;
    for (std::size_t i = 0; i < std::size_t{size.width} * size.height; ++i) {
        const std::size_t x = i % size.width;
        const std::size_t y = i / size.width;
        const std::size_t ink = (x * colours / size.width + y / 7) % colours;
        samples.insert(samples.end(), inks.begin() + static_cast<std::ptrdiff_t>(ink * channels),
                       inks.begin() + static_cast<std::ptrdiff_t>((ink + 1) * channels));
    }
    return picture_of(model, 8, size.width, size.height, samples);
}

Picture photograph_like(Random& random, int bits, Size size) {
    struct Light {
        double x, y, reach;
        double colour[3];
    };
    std::vector<Light> lights(7);
    for (Light& light : lights) {
        light = {random.unit(),
                 random.unit(),
                 random.between(0.05, 0.4),
                 {random.unit(), random.unit(), random.unit()}};
    }
    std::vector<std::uint16_t> samples;
    for (std::size_t i = 0; i < std::size_t{size.width} * size.height; ++i) {
        const double x = static_cast<double>(i % size.width) / size.width;
        const double y = static_cast<double>(i / size.width) / size.height;
        double sum[3] = {0.1 * y, 0.12 * y, 0.2 * (1 - y)};
        for (const Light& light : lights) {
            const double away = (x - light.x) * (x - light.x) + (y - light.y) * (y - light.y);
            const double share = 0.8 / (1 + away / (light.reach * light.reach));
            for (std::size_t c = 0; c < 3; ++c) sum[c] += share * share * light.colour[c];
        }
        for (const double value : sum)
            samples.push_back(scaled(value + 0.01 * random.bell(), bits));
    }
    return picture_of(ColourModel::rgb, bits, size.width, size.height, samples);
}

void punch_holes(Picture& picture, Random& random) {
    picture.opaque = Samples<std::uint8_t>(picture.pixel_count());
    for (std::size_t i = 0; i < picture.opaque.size(); ++i) {
        picture.opaque[i] = random.below(4) == 0 ? 0 : 1;
    }
}

}  // namespace tincture::test_support
