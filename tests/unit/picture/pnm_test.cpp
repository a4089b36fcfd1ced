#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;

Bytes file(const std::string& head, const Bytes& data = {}) {
    return joined({text(head), data});
}

TEST(Pnm, Bitmaps) {
    const Bytes expected{0, 255, 0, 0, 255, 255};
    const Picture plain = read_bytes(file("P1\n# a comment\n3 2\n1 0 1\n100"));
    EXPECT_EQ(plain.model, ColourModel::grey);
    EXPECT_EQ(samples_of(plain), expected);
    EXPECT_EQ(samples_of(read_bytes(file("P4 3 2\n", {0b10100000, 0b10011111}))), expected);
}

TEST(Pnm, GreyAndColourOf8Bits) {
    EXPECT_EQ(samples_of(read_bytes(file("P2 3 1 255 0 128\n255"))), (Bytes{0, 128, 255}));
    const Picture plain = read_bytes(file("P3\n2 1\n255\n1 2 3 4 5 6\n"));
    EXPECT_EQ(plain.model, ColourModel::rgb);
    EXPECT_EQ(samples_of(plain), (Bytes{1, 2, 3, 4, 5, 6}));
    EXPECT_EQ(samples_of(read_bytes(file("P5\n3 1\n255\n", {0, 128, 255}))), (Bytes{0, 128, 255}));
    const Bytes pixels = noise(7 * 5 * 3);
    EXPECT_EQ(samples_of(read_bytes(file("P6 7#width\n5 255\n", pixels))), pixels);
}

TEST(Pnm, OtherMaximaAreRescaledToTheNearest) {
    EXPECT_EQ(samples_of(read_bytes(file("P5 4 1 100 ", {0, 1, 50, 100}))),
              (Bytes{0, 3, 128, 255}));  // 2.55 and 127.5
    EXPECT_EQ(samples_of(read_bytes(file("P2 3 1 1 0 1 0"))), (Bytes{0, 255, 0}));
    EXPECT_EQ(samples16_of(read_bytes(file("P5 3 1 1023 ", {0, 0, 1, 0, 3, 255}))),
              (std::vector<std::uint16_t>{0, 16400, 65535}));  // 256 * 65535 / 1023 = 16399.6
    EXPECT_EQ(samples16_of(read_bytes(file("P5 2 1 65535 ", {0x12, 0x34, 0xFF, 0xFE}))),
              (std::vector<std::uint16_t>{0x1234, 0xFFFE}));
    EXPECT_EQ(samples16_of(read_bytes(file("P3 1 1 300 0 150 300"))),
              (std::vector<std::uint16_t>{0, 32768, 65535}));
}

TEST(Pnm, OnlyTheFirstOfSeveralIsRead) {
    EXPECT_EQ(samples_of(read_bytes(file("P5 1 1 255 \x07P5 1 1 255 \x08"))), (Bytes{7}));
}

TEST(Pnm, WrongNumbers) {
    EXPECT_THAT(error_of(file("P5 3 1 100 ", {0, 101, 5})).what(), HasSubstr("above its largest"));
    EXPECT_THAT(error_of(file("P2 3 1 100 0 101 5")).what(), HasSubstr("above its largest"));
    EXPECT_THAT(error_of(file("P2 2 1 100 0 x")).what(), HasSubstr("something else"));
    EXPECT_THAT(error_of(file("P1 3 1 1 0 2")).what(), HasSubstr("is damaged"));
    EXPECT_THAT(error_of(file("P5 3 1 0 ", {0, 0, 0})).what(), HasSubstr("largest value of 0"));
    EXPECT_THAT(error_of(file("P5 3 1 65536 ", Bytes(6))).what(), HasSubstr("65536"));
    EXPECT_THAT(error_of(file("P5 99999999999 1 255 ")).what(), HasSubstr("too large"));
    EXPECT_THAT(error_of(file("P5 0 5 255 ")).what(), HasSubstr("no pixels"));
    EXPECT_EQ(error_of(file("P6 100000 100000 255 ")).kind(), ErrorKind::limit);
}

TEST(Pnm, SaysHowManyBytesAreMissing) {
    EXPECT_THAT(error_of(file("P6 20 20 255\n", Bytes(100))).what(),
                HasSubstr("is cut short: a PNM that ends after 113 bytes, of 1213"));
    EXPECT_THAT(error_of(file("P2 2 2 255\n1 2 3 ")).what(), HasSubstr("cut short"));
    EXPECT_THAT(error_of(file("P6 20")).what(), HasSubstr("after 5 bytes, before its height"));
}

}  // namespace
}  // namespace tincture
