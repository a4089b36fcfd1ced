#include "picture/exif.h"

#include <gtest/gtest.h>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;

TEST(Exif, OrientationAndResolution) {
    const ExifFacts facts = read_exif(exif_block(6, 300, 150));
    EXPECT_EQ(facts.orientation, 6);
    ASSERT_TRUE(facts.resolution);
    EXPECT_EQ(facts.resolution->x_dpi, 300);
    EXPECT_EQ(facts.resolution->y_dpi, 150);
    EXPECT_EQ(read_exif(joined({text(std::string("Exif\0\0", 6)), exif_block(7)})).orientation, 7);
}

TEST(Exif, BigEndianAndCentimetres) {
    const auto entry = [](unsigned tag, unsigned type, const Bytes& data) {
        return joined({big(tag, 2), big(type, 2), big(1, 4), data});
    };
    const Bytes block =
        joined({text("MM"), big(42, 2), big(8, 4), big(4, 2),
                entry(0x0112, 3, joined({big(8, 2), big(0, 2)})), entry(0x011A, 5, big(62, 4)),
                entry(0x011B, 5, big(62, 4)), entry(0x0128, 3, joined({big(3, 2), big(0, 2)})),
                big(0, 4), big(200, 4), big(2, 4)});
    const ExifFacts facts = read_exif(block);
    EXPECT_EQ(facts.orientation, 8);
    ASSERT_TRUE(facts.resolution);
    EXPECT_EQ(facts.resolution->x_dpi, 254);
}

TEST(Exif, NonsenseKeepsTheDefaults) {
    EXPECT_EQ(read_exif({}).orientation, 1);
    EXPECT_EQ(read_exif(exif_block(0)).orientation, 1);
    EXPECT_EQ(read_exif(exif_block(9)).orientation, 1);
    EXPECT_FALSE(read_exif(exif_block(1, 0, 300)).resolution);
    Bytes other_magic = exif_block(6);
    other_magic[2] = 43;
    EXPECT_EQ(read_exif(other_magic).orientation, 1);
    Bytes far_away = exif_block(6, 300, 300);
    far_away[4] = far_away[5] = far_away[6] = far_away[7] = 0xFF;
    EXPECT_EQ(read_exif(far_away).orientation, 1);
}

// Every length and every wrong byte: nothing is read outside of the block.
TEST(Exif, StaysInsideOfTheBlock) {
    const Bytes block = exif_block(6, 300, 300);
    for (std::size_t size = 0; size < block.size(); ++size) {
        const Bytes cut(block.begin(), block.begin() + static_cast<std::ptrdiff_t>(size));
        const int orientation = read_exif(cut).orientation;
        EXPECT_TRUE(orientation == 1 || orientation == 6);
    }
    for (std::size_t at = 0; at < block.size(); ++at) {
        for (const int value : {0x00, 0x7F, 0xFF}) {
            Bytes wrong = block;
            wrong[at] = static_cast<std::uint8_t>(value);
            const ExifFacts facts = read_exif(wrong);
            EXPECT_GE(facts.orientation, 1);
            EXPECT_LE(facts.orientation, 8);
        }
    }
}

}  // namespace
}  // namespace tincture
