#include "picture/av1_frame_size.h"

#include <gtest/gtest.h>

#include <string>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using formats::av1_frame_size;

// Bits written as characters, spaces for the reader, padded with zeros to whole bytes.
Bytes bits(const std::string& characters) {
    Bytes out;
    std::size_t count = 0;
    for (const char c : characters) {
        if (c == ' ') continue;
        if (count++ % 8 == 0) out.push_back(0);
        if (c == '1') out.back() |= static_cast<std::uint8_t>(128U >> (count - 1) % 8);
    }
    return out;
}

Bytes unit(unsigned type, const Bytes& payload) {
    return joined(
        {Bytes{static_cast<std::uint8_t>(type << 3 | 2)}, little(payload.size(), 1), payload});
}

// 3 and 5 bits for 6 x 19.
const std::string sides = "0010 0100 101 10010";

TEST(Av1FrameSize, ReducedHeader) {
    const auto size = av1_frame_size(unit(1, bits("000 1 1 00000" + sides)));
    ASSERT_TRUE(size);
    EXPECT_EQ(size->width, 6U);
    EXPECT_EQ(size->height, 19U);
}

TEST(Av1FrameSize, FullHeaderBehindADelimiter) {
    const std::string point = "000000000000";
    // No timing; no display delay; two points, of which one has a tier.
    const std::string plain = "000 0 0 0 0 00001" + point + "00111" + point + "01000 1" + sides;
    // Timing with a variable-length number of 1 + 2 bits, a model of 10 bits of delay, display
    // delay.
    const std::string ticks(64, '1');
    const std::string model = "01001" + std::string(32, '1') + "11111 11111";
    const std::string full = "000 0 0 1" + ticks + "1 01 1" + " 1" + model + " 1 00000" + point +
                             "00000 1" + std::string(21, '1') + "1 1010" + sides;
    for (const std::string& header : {plain, full}) {
        const auto size = av1_frame_size(joined({unit(2, {}), unit(1, bits(header))}));
        ASSERT_TRUE(size) << header;
        EXPECT_EQ(size->width, 6U);
        EXPECT_EQ(size->height, 19U);
    }
}

TEST(Av1FrameSize, NothingWhereThereIsNoHeader) {
    EXPECT_FALSE(av1_frame_size({}));
    EXPECT_FALSE(av1_frame_size(unit(2, {})));
    EXPECT_FALSE(av1_frame_size(unit(6, Bytes(9))));
    const Bytes whole = unit(1, bits("000 1 1 00000" + sides));
    for (std::size_t size = 0; size < whole.size(); ++size) {
        EXPECT_FALSE(av1_frame_size(
            Bytes(whole.begin(), whole.begin() + static_cast<std::ptrdiff_t>(size))));
    }
    EXPECT_FALSE(av1_frame_size(Bytes{0x0E, 0x00, 0xFF}));
    EXPECT_FALSE(av1_frame_size(Bytes(20, 0xFF)));
}

}  // namespace
}  // namespace tincture
