#include "label/label_map.h"

#include <algorithm>
#include <array>

#include "cluster/nearest.h"
#include "histogram/key_index.h"
#include "histogram/lab_cells.h"
#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// Pictures are labelled in stripes of this many pixels.
constexpr std::size_t stripe_size = 1 << 18;

// Below this many pixels a table of all 24-bit colours costs more than it saves.
constexpr std::size_t direct_from_pixels = 1'000'000;

Centres centres_of(const Palette& palette) {
    Centres centres{3, palette.count, {}};
    for (const Swatch& swatch : palette.swatches) {
        centres.x.insert(centres.x.end(),
                         {static_cast<float>(swatch.lab.L), static_cast<float>(swatch.lab.a),
                          static_cast<float>(swatch.lab.b)});
    }
    return centres;
}

// Labels of Lab colours.
std::vector<std::uint16_t> labels_of(const std::array<const float*, 3>& lab, std::size_t n,
                                     const Centres& centres) {
    std::vector<std::uint16_t> label(n);
    constexpr std::size_t block_size = 8192;
    parallel_for((n + block_size - 1) / block_size, [&](std::size_t block) {
        const std::size_t start = block * block_size;
        const std::size_t size = std::min(block_size, n - start);
        const std::array<const float*, 3> plane = {lab[0] + start, lab[1] + start, lab[2] + start};
        std::vector<float> squared(size);
        nearest_centres({plane.data(), 3, size}, centres, label.data() + start, squared.data());
    });
    return label;
}

// Calls label_run(begin, end) for all stripes of the picture, in parallel.
template <typename Run>
void for_each_stripe(std::size_t pixels, const Run& label_run) {
    parallel_for((pixels + stripe_size - 1) / stripe_size, [&](std::size_t stripe) {
        throw_if_cancelled();
        label_run(stripe * stripe_size, std::min(pixels, (stripe + 1) * stripe_size));
    });
}

// One place for each 24-bit colour.
void label_by_place(const Picture& picture, const ColourTable& table,
                    const std::vector<std::uint16_t>& label, std::uint8_t* out) {
    const auto place = [](std::uint32_t r, std::uint32_t g, std::uint32_t b) {
        return r << 16 | g << 8 | b;
    };
    LargeArray<std::uint8_t> label_at(std::size_t{1} << 24);
    for (std::size_t i = 0; i < table.size(); ++i) {
        const std::uint64_t key = table.key[i];
        label_at[place(key >> 32 & 0xFF, key >> 16 & 0xFF, key & 0xFF)] =
            static_cast<std::uint8_t>(label[i]);
    }
    for_each_stripe(picture.pixel_count(), [&](std::size_t begin, std::size_t end) {
        const std::uint8_t* s = picture.samples8.data() + 3 * begin;
        for (std::size_t i = begin; i < end; ++i, s += 3) {
            out[i] = label_at[place(s[0], s[1], s[2])];
        }
    });
}

template <typename Sample>
void label_by_key(const Picture& picture, const Sample* samples, const KeyIndex& index,
                  const std::vector<std::uint16_t>& label, std::uint8_t* out) {
    const int channels = channel_count(picture.model);
    const auto label_of = [&](std::uint64_t key) {
        const std::uint32_t at = index.find(key);
        return at == KeyIndex::missing ? std::uint8_t{0} : static_cast<std::uint8_t>(label[at]);
    };
    for_each_stripe(picture.pixel_count(), [&](std::size_t begin, std::size_t end) {
        std::uint64_t last_key = 0;
        std::uint8_t last = label_of(last_key);
        for (std::size_t i = begin; i < end; ++i) {
            const std::uint64_t key =
                colour_key(samples + i * static_cast<std::size_t>(channels), channels);
            if (key != last_key) {
                last = label_of(key);
                last_key = key;
            }
            out[i] = last;
        }
    });
}

// Where the table lists no colours, each pixel goes through the profile again.
void label_by_lab(const Picture& picture, const ColourSpace& space, const Centres& centres,
                  std::uint8_t* out) {
    std::array<std::vector<float>, 3> lab;
    for (std::vector<float>& plane : lab)
        plane.resize(std::min(stripe_size, picture.pixel_count()));
    for (std::size_t start = 0; start < picture.pixel_count(); start += stripe_size) {
        throw_if_cancelled();
        const std::size_t n = std::min(stripe_size, picture.pixel_count() - start);
        picture_to_lab(picture, space, start, n, {lab[0].data(), lab[1].data(), lab[2].data()});
        const std::vector<std::uint16_t> label =
            labels_of({lab[0].data(), lab[1].data(), lab[2].data()}, n, centres);
        std::transform(label.begin(), label.end(), out + start,
                       [](std::uint16_t k) { return static_cast<std::uint8_t>(k); });
    }
}

}  // namespace

Samples<std::uint8_t> label_pixels(const Picture& picture, const ColourTable& table,
                                   const ColourSpace& space, const Palette& palette) {
    Samples<std::uint8_t> labels(picture.pixel_count());
    const Centres centres = centres_of(palette);
    if (table.cell_de > 0) {
        label_by_lab(picture, space, centres, labels.data());
    } else {
        const std::vector<std::uint16_t> label =
            labels_of({table.L.data(), table.a.data(), table.b.data()}, table.size(), centres);
        if (picture.bits == 8 && picture.model == ColourModel::rgb &&
            picture.pixel_count() >= direct_from_pixels) {
            label_by_place(picture, table, label, labels.data());
        } else if (picture.bits == 8) {
            label_by_key(picture, picture.samples8.data(), KeyIndex(table), label, labels.data());
        } else {
            label_by_key(picture, picture.samples16.data(), KeyIndex(table), label, labels.data());
        }
    }
    if (!picture.opaque.empty()) {
        const auto transparent = static_cast<std::uint8_t>(palette.count);
        for (std::size_t i = 0; i < labels.size(); ++i) {
            if (picture.opaque[i] == 0) labels[i] = transparent;
        }
    }
    return labels;
}

std::vector<std::uint64_t> count_labels(const Samples<std::uint8_t>& labels, int count) {
    std::array<std::uint64_t, 256> found{};
    for (std::size_t i = 0; i < labels.size(); ++i) ++found[labels[i]];
    return {found.begin(), found.begin() + count};
}

std::uint64_t count_differences(const Samples<std::uint8_t>& one,
                                const Samples<std::uint8_t>& two) {
    std::uint64_t different = 0;
    for (std::size_t i = 0; i < one.size(); ++i) different += one[i] != two[i] ? 1 : 0;
    return different;
}

}  // namespace tincture
