#include "picture/orientation.h"

#include <algorithm>
#include <cstring>
#include <utility>

#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// Rows and columns of a square that fits the first cache in both pictures.
constexpr std::size_t block = 64;

struct Turn {
    bool transpose;    // rows become columns, before the flips
    bool flip_column;  // of the upright picture
    bool flip_row;
};

Turn turn_of(int orientation) {
    switch (orientation) {
        case 2:
            return {false, true, false};
        case 3:
            return {false, true, true};
        case 4:
            return {false, false, true};
        case 5:
            return {true, false, false};
        case 6:
            return {true, true, false};
        case 7:
            return {true, true, true};
        case 8:
            return {true, false, true};
        default:
            return {false, false, false};
    }
}

// Pixels are `size` bytes; `width` and `height` are those of the stored picture.
template <std::size_t size>
void turn_pixels(const unsigned char* from, unsigned char* to, std::size_t width,
                 std::size_t height, Turn turn) {
    const std::size_t rows = turn.transpose ? width : height;
    const std::size_t columns = turn.transpose ? height : width;
    // Steps in the stored picture for one column and one row of the upright one.
    auto by_column = static_cast<std::ptrdiff_t>(turn.transpose ? width : 1);
    auto by_row = static_cast<std::ptrdiff_t>(turn.transpose ? 1 : width);
    std::ptrdiff_t origin = 0;
    if (turn.flip_column) {
        origin += by_column * static_cast<std::ptrdiff_t>(columns - 1);
        by_column = -by_column;
    }
    if (turn.flip_row) {
        origin += by_row * static_cast<std::ptrdiff_t>(rows - 1);
        by_row = -by_row;
    }
    parallel_for((rows + block - 1) / block, [&](std::size_t band) {
        throw_if_cancelled();
        const std::size_t last_row = std::min(rows, (band + 1) * block);
        for (std::size_t left = 0; left < columns; left += block) {
            const std::size_t right = std::min(columns, left + block);
            for (std::size_t row = band * block; row < last_row; ++row) {
                std::ptrdiff_t pixel = origin + by_row * static_cast<std::ptrdiff_t>(row) +
                                       by_column * static_cast<std::ptrdiff_t>(left);
                unsigned char* target = to + (row * columns + left) * size;
                for (std::size_t column = left; column < right; ++column) {
                    std::memcpy(target, from + pixel * static_cast<std::ptrdiff_t>(size), size);
                    target += size;
                    pixel += by_column;
                }
            }
        }
    });
}

template <typename T>
void turn_samples(Samples<T>& samples, int channels, std::size_t width, std::size_t height,
                  Turn turn) {
    if (samples.empty()) return;
    Samples<T> turned(samples.size());
    const auto* from = reinterpret_cast<const unsigned char*>(samples.data());
    auto* to = reinterpret_cast<unsigned char*>(turned.data());
    switch (channels) {
        case 1:
            turn_pixels<sizeof(T)>(from, to, width, height, turn);
            break;
        case 3:
            turn_pixels<3 * sizeof(T)>(from, to, width, height, turn);
            break;
        default:
            turn_pixels<4 * sizeof(T)>(from, to, width, height, turn);
            break;
    }
    samples = std::move(turned);
}

}  // namespace

void apply_orientation(Picture& picture, int orientation) {
    if (orientation < 2 || orientation > 8) return;
    const Turn turn = turn_of(orientation);
    const int channels = channel_count(picture.model);
    turn_samples(picture.samples8, channels, picture.width, picture.height, turn);
    turn_samples(picture.samples16, channels, picture.width, picture.height, turn);
    turn_samples(picture.opaque, 1, picture.width, picture.height, turn);
    if (!turn.transpose) return;
    std::swap(picture.width, picture.height);
    if (picture.resolution) std::swap(picture.resolution->x_dpi, picture.resolution->y_dpi);
}

}  // namespace tincture
