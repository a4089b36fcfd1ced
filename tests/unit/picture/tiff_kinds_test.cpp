// Which kinds of TIFF are refused, and in what words; pages; tags that lie outside of the file.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <algorithm>

#include "made_files.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::HasSubstr;

std::string refusal_of(const TiffSpec& spec, std::size_t bytes) {
    const Error error = error_of(encode_tiff(spec, Bytes(bytes)));
    EXPECT_EQ(error.kind(), ErrorKind::input);
    return error.what();
}

TEST(TiffKinds, SamplesThatAreNoSmallWholeNumbers) {
    TiffSpec spec{.width = 4, .height = 4, .bits = 32};
    EXPECT_THAT(refusal_of(spec, 192), HasSubstr("32 bits a channel: save it with 8 or 16"));
    spec.tags = [](TIFF* tiff) { TIFFSetField(tiff, TIFFTAG_SAMPLEFORMAT, SAMPLEFORMAT_IEEEFP); };
    EXPECT_THAT(refusal_of(spec, 192), HasSubstr("floating-point samples"));
    spec.bits = 16;
    spec.tags = [](TIFF* tiff) { TIFFSetField(tiff, TIFFTAG_SAMPLEFORMAT, SAMPLEFORMAT_INT); };
    EXPECT_THAT(refusal_of(spec, 96), HasSubstr("signed samples"));
    spec.bits = 12;
    spec.tags = [](TIFF*) {};
    EXPECT_THAT(refusal_of(spec, 96), HasSubstr("12 bits a channel"));
}

TEST(TiffKinds, OtherColours) {
    TiffSpec spec{.width = 4, .height = 4};
    spec.photometric = PHOTOMETRIC_CIELAB;
    EXPECT_THAT(refusal_of(spec, 48), HasSubstr("CIELAB: save it as RGB or CMYK"));
    spec.photometric = PHOTOMETRIC_YCBCR;
    spec.tags = [](TIFF* tiff) { TIFFSetField(tiff, TIFFTAG_YCBCRSUBSAMPLING, 1, 1); };
    EXPECT_THAT(refusal_of(spec, 48), HasSubstr("YCbCr"));

    TiffSpec one{.width = 4, .height = 4, .channels = 1};
    one.photometric = PHOTOMETRIC_CFA;
    EXPECT_THAT(refusal_of(one, 16), HasSubstr("raw file of a camera"));
    one.photometric = PHOTOMETRIC_MASK;
    EXPECT_THAT(refusal_of(one, 16), HasSubstr("rare kind of colours"));
}

TEST(TiffKinds, OtherInksThanCmyk) {
    TiffSpec spec{.width = 4, .height = 4, .channels = 4};
    spec.photometric = PHOTOMETRIC_SEPARATED;
    spec.tags = [](TIFF* tiff) { TIFFSetField(tiff, TIFFTAG_INKSET, INKSET_MULTIINK); };
    EXPECT_THAT(refusal_of(spec, 64), HasSubstr("other inks than CMYK"));
    spec.channels = 6;
    spec.tags = [](TIFF* tiff) {
        const std::uint16_t kinds[] = {EXTRASAMPLE_UNASSALPHA, EXTRASAMPLE_UNSPECIFIED};
        TIFFSetField(tiff, TIFFTAG_EXTRASAMPLES, 2, kinds);
    };
    EXPECT_THAT(refusal_of(spec, 96), HasSubstr("1 channels besides CMYK"));
}

TEST(TiffKinds, TooFewChannelsAreDamage) {
    TiffSpec spec{.width = 4, .height = 4, .channels = 1};
    spec.photometric = PHOTOMETRIC_SEPARATED;
    EXPECT_THAT(refusal_of(spec, 16), HasSubstr("1 channels where its colours need 4"));
}

TEST(TiffKinds, ThumbnailFirstIsRefused) {
    TiffSpec spec{.width = 4, .height = 4};
    spec.tags = [](TIFF* tiff) { TIFFSetField(tiff, TIFFTAG_SUBFILETYPE, FILETYPE_REDUCEDIMAGE); };
    EXPECT_THAT(refusal_of(spec, 48), HasSubstr("begins with a thumbnail"));
}

TEST(TiffKinds, OnlyTheFirstPageIsRead) {
    TiffSpec spec{.width = 4, .height = 2};
    const Bytes first = noise(24);
    spec.pixels = [&](TIFF* tiff) {
        Bytes page = first;
        TIFFWriteScanline(tiff, page.data(), 0, 0);
        TIFFWriteScanline(tiff, page.data() + 12, 1, 0);
        TIFFWriteDirectory(tiff);
        TIFFSetField(tiff, TIFFTAG_IMAGEWIDTH, 1);
        TIFFSetField(tiff, TIFFTAG_IMAGELENGTH, 1);
        TIFFSetField(tiff, TIFFTAG_BITSPERSAMPLE, 8);
        TIFFSetField(tiff, TIFFTAG_PHOTOMETRIC, PHOTOMETRIC_MINISBLACK);
        TIFFWriteScanline(tiff, page.data(), 0, 0);
    };
    EXPECT_EQ(samples_of(read_bytes(encode_tiff(spec, {}))), first);
}

// Where a two-byte number of a little-endian file is that begins a directory entry.
std::size_t entry_of(const Bytes& file, unsigned tag) {
    const Bytes wanted = little(tag, 2);
    const std::size_t directory = file[4] | static_cast<std::size_t>(file[5]) << 8;
    for (std::size_t at = directory + 2; at + 12 <= file.size(); at += 12) {
        if (file[at] == wanted[0] && file[at + 1] == wanted[1]) return at;
    }
    return 0;
}

void put(Bytes& file, std::size_t at, const Bytes& bytes) {
    std::copy(bytes.begin(), bytes.end(), file.begin() + static_cast<std::ptrdiff_t>(at));
}

TEST(TiffKinds, ProfileOutsideOfTheFileIsDamage) {
    TiffSpec spec{.width = 4, .height = 4, .mode = "wl"};
    const Bytes profile = noise(100);
    spec.tags = [&](TIFF* tiff) {
        TIFFSetField(tiff, TIFFTAG_ICCPROFILE, static_cast<std::uint32_t>(profile.size()),
                     profile.data());
    };
    Bytes file = encode_tiff(spec, Bytes(48));
    const std::size_t entry = entry_of(file, TIFFTAG_ICCPROFILE);
    ASSERT_NE(entry, 0U);
    put(file, entry + 8, little(file.size() - 50, 4));
    EXPECT_THAT(error_of(file).what(), HasSubstr("is damaged: a TIFF"));
}

TEST(TiffKinds, UnknownTagsAreHarmless) {
    TiffSpec spec{.width = 4, .height = 4, .mode = "wl"};
    const Bytes pixels = noise(48);
    Bytes file = encode_tiff(spec, pixels);
    const std::size_t entry = entry_of(file, TIFFTAG_PLANARCONFIG);  // 1 is the default
    ASSERT_NE(entry, 0U);
    put(file, entry, little(65000, 2));
    EXPECT_EQ(samples_of(read_bytes(file)), pixels);
}

TEST(TiffKinds, HugeSidesAreALimit) {
    TiffSpec spec{.width = 4, .height = 4, .mode = "wl"};
    Bytes file = encode_tiff(spec, Bytes(48));
    for (const unsigned tag : {TIFFTAG_IMAGEWIDTH, TIFFTAG_IMAGELENGTH}) {
        const std::size_t entry = entry_of(file, tag);
        ASSERT_NE(entry, 0U);
        put(file, entry + 2, little(4, 2));
        put(file, entry + 8, little(100'000, 4));
    }
    const Error error = error_of(file);
    EXPECT_EQ(error.kind(), ErrorKind::limit);
    EXPECT_THAT(error.what(), HasSubstr("100000 x 100000"));
}

// libtiff warns and makes the rest of the strip up.
TEST(TiffKinds, WarningsAboutPixelsAreDamage) {
    TiffSpec spec{.width = 48, .height = 32};
    spec.compression = COMPRESSION_JPEG;
    spec.tags = [](TIFF* tiff) { TIFFSetField(tiff, TIFFTAG_ROWSPERSTRIP, 32); };
    Bytes file = encode_tiff(spec, smooth(48, 32, 3));
    (void)read_bytes(file);
    const Bytes scan{0xFF, 0xDA};
    const auto start = std::search(file.begin(), file.end(), scan.begin(), scan.end());
    ASSERT_NE(start, file.end());
    start[40] = 0xFF;  // the end of the picture, in the middle of its first rows
    start[41] = 0xD9;
    EXPECT_THAT(error_of(file).what(), HasSubstr("is damaged: a TIFF with wrong data at row"));
}

TEST(TiffKinds, SaysWhereItWasCut) {
    for (const char* mode : {"wl", "wb", "wl8", "wb8"}) {
        const TiffSpec spec{.width = 40, .height = 40, .mode = mode};
        Bytes file = encode_tiff(spec, noise(4800));  // the directory comes behind the pixels
        file.resize(2000);
        EXPECT_THAT(
            error_of(file).what(),
            HasSubstr("is cut short: a TIFF that ends after 2000 bytes, before its directory"))
            << mode;
    }
}

TEST(TiffKinds, SaysHowManyBytesAreMissing) {
    const TiffSpec spec{.width = 40, .height = 40, .mode = "wl"};
    Bytes file = encode_tiff(spec, noise(4800));
    const std::size_t entry = entry_of(file, TIFFTAG_STRIPOFFSETS);
    ASSERT_NE(entry, 0U);
    const std::size_t offsets = file[entry + 8] | static_cast<std::size_t>(file[entry + 9]) << 8;
    put(file, offsets + 7 * 4, little(file.size() - 10, 4));  // the last of 8 strips of 600 bytes
    EXPECT_THAT(error_of(file).what(),
                HasSubstr("is cut short: a TIFF that ends after " + std::to_string(file.size()) +
                          " of at least " + std::to_string(file.size() + 590) + " bytes"));
}

}  // namespace
}  // namespace tincture
