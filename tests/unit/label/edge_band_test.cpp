#include "label/edge_band.h"

#include <gtest/gtest.h>

#include <algorithm>

#include "tests/support/pictures.h"

namespace tincture {
namespace {

using test_support::Random;

constexpr int margin = EdgeBand::margin;

struct Padded {
    const std::vector<std::uint8_t>& labels;
    int width, height, first;

    // The pixel of the map that a padded one shows.
    [[nodiscard]] std::size_t pixel(int x, int row) const {
        const int y = std::clamp(first + row - margin, 0, height - 1);
        return static_cast<std::size_t>(y * width + std::clamp(x - margin, 0, width - 1));
    }
    [[nodiscard]] std::uint8_t label(int x, int row) const { return labels[pixel(x, row)]; }
    [[nodiscard]] bool core(int x, int row) const {
        for (int d = 0; d < 9; ++d) {
            if (label(x + d % 3 - 1, row + d / 3 - 1) != label(x, row)) return false;
        }
        return true;
    }
};

TEST(EdgeBand, LabelsCoresEdgesAndColours) {
    Random random(51);
    const ColourSpace space = ColourSpace::standard(ColourModel::rgb);
    EdgeBand band;  // one for all: nothing may be left from the band before
    for (const test_support::Size size :
         {test_support::Size{1, 1}, {40, 7}, {23, 90}, {9, 200}, {40, 60}}) {
        const Picture picture = test_support::photograph_like(random, 8, size);
        const ColourTable table = count_colours(picture, space);
        const PixelLab pixels(picture, table, space);
        std::vector<std::uint8_t> labels(picture.pixel_count(), 1);
        for (std::uint8_t& l : labels) {
            if (random.below(40) == 0) l = static_cast<std::uint8_t>(random.below(4));
        }
        for (std::uint32_t first = 0; first < size.height; first += 50) {
            const LabelRows rows{labels.data(), size.width, size.height, first,
                                 std::min(50U, size.height - first)};
            const Padded wanted{labels, static_cast<int>(size.width), static_cast<int>(size.height),
                                static_cast<int>(first)};
            load_labels(rows, 3, band);
            const bool any = !band.edges.empty();
            read_lab(rows, pixels, band);
            load_colours(rows, 2, band);
            ASSERT_EQ(band.width, wanted.width + 2 * margin);
            ASSERT_EQ(band.height, static_cast<int>(rows.rows) + 2 * margin);
            std::size_t edges = 0;
            for (int row = 1; row + 1 < band.height; ++row) {
                for (int x = 1; x + 1 < band.width; ++x) {
                    const std::size_t i = band.at(x, row);
                    ASSERT_EQ(band.label[i], wanted.label(x, row));
                    ASSERT_EQ(band.core[i] != 0, wanted.core(x, row));
                    const bool edge = !wanted.core(x, row) && wanted.label(x, row) != 3 &&
                                      x >= margin && x < band.width - margin && row >= margin / 2 &&
                                      row < band.height - margin / 2;
                    ASSERT_EQ(band.edge_at(i) != EdgeBand::no_edge, edge);
                    edges += edge ? 1 : 0;
                    if (!any || x < 2 || row < 2 || x + 2 >= band.width) continue;
                    if (row + 2 >= band.height) continue;
                    bool near = false;
                    for (int d = 0; d < 25; ++d) {
                        near |= band.edge_at(band.at(x + d % 5 - 2, row + d / 5 - 2)) !=
                                EdgeBand::no_edge;
                    }
                    ASSERT_EQ(band.zone[i] != 0, near);
                    if (!near) continue;
                    LabBand lab;
                    pixels.read(static_cast<std::uint32_t>(wanted.pixel(x, row) / size.width), 1,
                                lab);
                    const std::size_t s = wanted.pixel(x, row) % size.width;
                    const auto part = [](std::int16_t steps) {
                        return static_cast<float>(steps) / lab_band_steps;
                    };
                    const Mixed mixed = mixed_of(part(lab.L[s]), part(lab.a[s]), part(lab.b[s]));
                    ASSERT_EQ(band.y[i], mixed.y);
                    ASSERT_EQ(band.u[i], mixed.u);
                    ASSERT_EQ(band.v[i], mixed.v);
                }
            }
            EXPECT_EQ(band.edges.size(), edges);
        }
    }
}

}  // namespace
}  // namespace tincture
