// What is no picture, and the words that say so.
#include "picture/read.h"

#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <stdlib.h>
#include <sys/stat.h>

#include <filesystem>
#include <fstream>

#include "made_files.h"
#include "support/cancel.h"

namespace tincture {
namespace {

using namespace testing_pictures;
using testing::AllOf;
using testing::HasSubstr;
namespace fs = std::filesystem;

class ReadPath : public testing::Test {
  protected:
    ReadPath() {
        std::string name = testing::TempDir() + "tincture-XXXXXX";
        folder_ = ::mkdtemp(name.data());
    }
    ~ReadPath() override { fs::remove_all(folder_); }

    std::string message_for(const fs::path& path) {
        try {
            (void)read_picture(path);
        } catch (const Error& error) {
            EXPECT_EQ(error.kind(), ErrorKind::input);
            EXPECT_EQ(error.subject(), path.native());
            return error.what();
        }
        return "was read";
    }

    fs::path folder_;
};

TEST_F(ReadPath, WhatIsNoFile) {
    EXPECT_THAT(message_for(folder_ / "none.png"), HasSubstr("does not exist"));
    EXPECT_THAT(message_for(folder_), HasSubstr("is a folder"));
    EXPECT_THAT(message_for("/dev/zero"), HasSubstr("no regular file"));
    const fs::path pipe = folder_ / "pipe";
    ASSERT_EQ(::mkfifo(pipe.c_str(), 0600), 0);
    EXPECT_THAT(message_for(pipe), HasSubstr("no regular file"));  // and does not wait for a writer
    EXPECT_THAT(message_for(folder_ / "none.png" / "x"), HasSubstr("does not exist"));
}

TEST_F(ReadPath, AnyNameWorksAndTheBaseNameIsKept) {
    const Bytes file = encode_png({}, Bytes(3));
    for (const char* name :
         {"a b.png", "-dash", "quote'\".jpg", "line\nbreak", "\xE6\x97\xA5.png", "invalid\xFF"}) {
        const fs::path path = folder_ / name;
        std::ofstream(path, std::ios::binary)
            .write(reinterpret_cast<const char*>(file.data()),
                   static_cast<std::streamsize>(file.size()));
        EXPECT_EQ(read_picture(path).file_name, name);
    }
}

TEST(Read, EmptyAndText) {
    EXPECT_THAT(error_of({}).what(), HasSubstr("is empty"));
    EXPECT_THAT(error_of(text("Just some words.\n")).what(), HasSubstr("not a supported picture"));
    EXPECT_THAT(error_of(text("BMW and BM are words that begin so\n")).what(),
                HasSubstr("not a supported picture"));
    EXPECT_THAT(error_of(text("P")).what(), HasSubstr("not a supported picture"));
    EXPECT_THAT(error_of(text("<html><svg/></html>")).what(), HasSubstr("not a supported picture"));
}

TEST(Read, DrawingsAreToBeExported) {
    const auto advice = AllOf(HasSubstr("300 ppi at final size"), HasSubstr("600 to 1200 ppi"));
    EXPECT_THAT(error_of(text("%PDF-1.7\n...")).what(), AllOf(HasSubstr("is a PDF"), advice));
    EXPECT_THAT(error_of(text("\r\n\r\n%PDF-1.4\n")).what(), HasSubstr("is a PDF"));
    EXPECT_THAT(error_of(text("%!PS-Adobe-3.0 EPSF-3.0\n")).what(),
                AllOf(HasSubstr("PostScript or EPS"), advice));
    EXPECT_THAT(error_of(joined({Bytes{0xC5, 0xD0, 0xD3, 0xC6}, Bytes(40)})).what(),
                HasSubstr("PostScript or EPS"));
    const auto svg = AllOf(HasSubstr("is an SVG drawing"), advice);
    EXPECT_THAT(error_of(text("<svg xmlns='http://www.w3.org/2000/svg'/>")).what(), svg);
    EXPECT_THAT(error_of(text("\xEF\xBB\xBF <?xml version='1.0'?>\n<!-- x -->\n<svg/>")).what(),
                svg);
}

TEST(Read, OtherPictures) {
    const auto box = [](const std::string& brands) {
        return joined({big(8 + brands.size(), 4), text("ftyp"), text(brands), Bytes(40)});
    };
    EXPECT_THAT(error_of(text("GIF89a......")).what(), HasSubstr("is a GIF"));
    EXPECT_THAT(error_of(box(std::string("heic\0\0\0\0mif1heic", 16))).what(),
                HasSubstr("is a HEIC picture"));
    EXPECT_THAT(error_of(box(std::string("isom\0\0\0\0mp42", 12))).what(),
                HasSubstr("not a supported picture"));
    EXPECT_THAT(error_of(box(std::string("mif1\0\0\0\0avif", 12))).what(), HasSubstr("an AVIF"));
    EXPECT_THAT(error_of({0xFF, 0x0A, 1, 2}).what(), HasSubstr("JPEG XL"));
    EXPECT_THAT(error_of(joined({big(12, 4), text("JXL \r\n\x87\n")})).what(),
                HasSubstr("JPEG XL"));
    EXPECT_THAT(error_of(joined({big(12, 4), text("jP  \r\n\x87\n")})).what(),
                HasSubstr("JPEG 2000"));
    EXPECT_THAT(error_of(text("P7\nWIDTH 1\n")).what(), HasSubstr("PAM (P7)"));
    EXPECT_THAT(error_of(joined({text("8BPS"), Bytes(30)})).what(),
                HasSubstr("not a supported picture"));
}

TEST(Read, LimitIsTheNumberOfPixels) {
    const Bytes file = encode_png({.width = 10, .height = 10}, Bytes(300));
    EXPECT_EQ(read_bytes(file, {.max_pixels = 100}).pixel_count(), 100U);
    const Error error = error_of(file, {.max_pixels = 99});
    EXPECT_EQ(error.kind(), ErrorKind::limit);
    EXPECT_STREQ(error.what(),
                 "is too large: 10 x 10 pixels, and the limit is 99 pixels; raise it with "
                 "--max-pixels or give a smaller copy");
}

TEST(Read, PngHeaderThatClaimsTooMuch) {
    Bytes file = encode_png({.width = 10, .height = 10}, Bytes(300));
    const Bytes sides = joined({big(100'000, 4), big(100'000, 4)});
    std::copy(sides.begin(), sides.end(), file.begin() + 16);
    EXPECT_EQ(error_of(file).kind(), ErrorKind::limit);
    std::fill(file.begin() + 16, file.begin() + 20, std::uint8_t{0});
    EXPECT_THAT(error_of(file).what(), HasSubstr("no pixels"));
}

}  // namespace
}  // namespace tincture
