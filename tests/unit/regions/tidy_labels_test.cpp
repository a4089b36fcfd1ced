#include "regions/tidy_labels.h"

#include <gtest/gtest.h>

#include <algorithm>

#include "histogram/pixel_lab.h"
#include "label/edges.h"
#include "label/label_map.h"
#include "regions/specks.h"
#include "tests/unit/label/drawn_scene.h"

namespace tincture {
namespace {

using test_support::DrawnScene;
using Map = std::vector<std::uint8_t>;

constexpr std::uint8_t hole = 3;

// Three inks, the third between the others, with edges, noise and a few pixels that show nothing.
struct Case {
    Case() : space(ColourSpace::standard(ColourModel::rgb)) {
        DrawnScene drawn(120, {{250, 250, 250}, {10, 10, 10}, {128, 128, 128}});
        drawn.disc(1, 50, 50, 30);
        drawn.disc(2, 90, 90, 20);
        for (int i = 0; i < 8; ++i) drawn.disc(1, 8.5 + 13 * i, 110.5, 0.4 + 0.2 * i);
        picture = drawn.picture(0, 3);
        picture.opaque = Samples<std::uint8_t>(picture.pixel_count());
        for (std::size_t i = 0; i < picture.pixel_count(); ++i) picture.opaque[i] = i % 97 != 0;
        table = count_colours(picture, space);
        palette = drawn.palette();
    }

    [[nodiscard]] Samples<std::uint8_t> nearest() const {
        return label_pixels(picture, table, space, palette);
    }
    [[nodiscard]] Map specks_tidied(Samples<std::uint8_t> labels, std::uint32_t smallest) const {
        tidy_specks(labels, picture.width, picture.height, palette, smallest);
        return map_of(labels);
    }
    [[nodiscard]] static Map map_of(const Samples<std::uint8_t>& labels) {
        return {labels.data(), labels.data() + labels.size()};
    }

    // With the number of changes checked.
    [[nodiscard]] Map tidied(const EvidenceFacts& facts, std::optional<std::uint32_t> speck) const {
        Samples<std::uint8_t> labels = nearest();
        const Map before = map_of(labels);
        const std::uint64_t changed =
            tidy_labels(labels, picture, table, space, palette, facts, speck);
        const Map after = map_of(labels);
        std::uint64_t different = 0;
        for (std::size_t i = 0; i < before.size(); ++i) {
            different += before[i] != after[i] ? 1 : 0;
            EXPECT_EQ(before[i] == hole, after[i] == hole);
        }
        EXPECT_EQ(changed, different);
        return after;
    }

    ColourSpace space;
    Picture picture;
    ColourTable table;
    Palette palette;
};

TEST(TidyLabels, FlatArtHasItsEdgesAndSpecksTidied) {
    const Case c;
    const EvidenceFacts flat_art{"flat art", 0.9, 1.5, 3};
    const auto settled = [&] {
        return settled_edges(c.nearest(), PixelLab(c.picture, c.table, c.space), c.palette, 1.5);
    };
    ASSERT_NE(Case::map_of(settled()), Case::map_of(c.nearest()));
    EXPECT_EQ(c.tidied(flat_art, 0), Case::map_of(settled()));
    EXPECT_EQ(c.tidied(flat_art, std::nullopt), c.specks_tidied(settled(), usual_speck));
    EXPECT_EQ(c.tidied(flat_art, 9), c.specks_tidied(settled(), 9));
    EXPECT_NE(c.tidied(flat_art, 9), c.tidied(flat_art, 0));
}

TEST(TidyLabels, OthersKeepTheirLabelsButForSpecksThatAreAskedFor) {
    const Case c;
    for (const EvidenceFacts& facts :
         {EvidenceFacts{"continuous tone", 0.1, 1.5, 0}, EvidenceFacts{}}) {
        EXPECT_EQ(c.tidied(facts, std::nullopt), Case::map_of(c.nearest()));
        EXPECT_EQ(c.tidied(facts, 9), c.specks_tidied(c.nearest(), 9));
        EXPECT_NE(c.tidied(facts, 9), c.tidied(facts, std::nullopt));
    }
}

}  // namespace
}  // namespace tincture
