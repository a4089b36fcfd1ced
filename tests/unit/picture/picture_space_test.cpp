#include "picture/picture_space.h"

#include <gtest/gtest.h>

#include <filesystem>
#include <fstream>

#include "support/error.h"
#include "tests/support/pictures.h"
#include "tests/support/profiles.h"

namespace tincture {
namespace {

using test_support::Bytes;

// A profile on disk that is gone when the test is over.
class ProfileFile {
  public:
    ProfileFile(const std::string& name, const Bytes& bytes)
        : path_(std::filesystem::path(::testing::TempDir()) / name) {
        std::ofstream(path_, std::ios::binary)
            .write(reinterpret_cast<const char*>(bytes.data()),
                   static_cast<std::streamsize>(bytes.size()));
    }
    ~ProfileFile() { std::filesystem::remove(path_); }
    ProfileFile(const ProfileFile&) = delete;
    ProfileFile& operator=(const ProfileFile&) = delete;
    [[nodiscard]] const std::filesystem::path& path() const { return path_; }

  private:
    std::filesystem::path path_;
};

Picture one_pixel(ColourModel model, const Bytes& icc) {
    Picture picture = test_support::picture_of(
        model, 8, 1, 1, std::vector<std::uint16_t>(static_cast<std::size_t>(channel_count(model))));
    picture.icc = icc;
    return picture;
}

std::string subject_of_error(const Picture& picture,
                             const std::optional<std::filesystem::path>& named) {
    try {
        (void)picture_space(picture, "the picture", named);
    } catch (const Error& error) {
        EXPECT_EQ(error.kind(), ErrorKind::input);
        return error.subject();
    }
    ADD_FAILURE() << "no error";
    return {};
}

TEST(PictureSpace, TheEmbeddedProfileComesFirst) {
    const Bytes wide = test_support::wide_gamut_profile();
    const ProfileFile other("space-other.icc", test_support::rgb_table_profile());
    const ColourSpace space = picture_space(one_pixel(ColourModel::rgb, wide), "", other.path());
    EXPECT_EQ(space.icc().size(), wide.size());
}

TEST(PictureSpace, TheNamedProfileStandsInForADamagedOne) {
    const Bytes wide = test_support::wide_gamut_profile();
    const ProfileFile file("space-wide.icc", wide);
    for (const Bytes& embedded : {Bytes{}, Bytes{1, 2, 3}, test_support::cmyk_profile()}) {
        const ColourSpace space =
            picture_space(one_pixel(ColourModel::rgb, embedded), "", file.path());
        EXPECT_EQ(space.icc().size(), wide.size());
    }
}

TEST(PictureSpace, WithoutProfiles) {
    EXPECT_TRUE(picture_space(one_pixel(ColourModel::rgb, {}), "", {}).is_standard());
    EXPECT_TRUE(picture_space(one_pixel(ColourModel::grey, {}), "", {}).is_standard());
    EXPECT_EQ(subject_of_error(one_pixel(ColourModel::cmyk, {}), {}), "the picture");
    EXPECT_EQ(subject_of_error(one_pixel(ColourModel::rgb, {1, 2, 3}), {}), "the picture");
}

TEST(PictureSpace, AFileThatIsNoProfile) {
    const Picture picture = one_pixel(ColourModel::rgb, {});
    const std::filesystem::path missing = "no such folder/no such profile.icc";
    EXPECT_EQ(subject_of_error(picture, missing), missing.string());
    EXPECT_EQ(subject_of_error(picture, ::testing::TempDir()), ::testing::TempDir());
    const ProfileFile empty("space-empty.icc", {});
    EXPECT_EQ(subject_of_error(picture, empty.path()), empty.path().string());
    const ProfileFile text("space-text.icc", {'t', 'e', 'x', 't'});
    EXPECT_EQ(subject_of_error(picture, text.path()), text.path().string());
    // Also where it was to stand in for an embedded one.
    EXPECT_EQ(subject_of_error(one_pixel(ColourModel::rgb, {9}), text.path()),
              text.path().string());
}

TEST(WrittenSpace, IsThePicturesOwnWhereItCanBe) {
    const Bytes wide = test_support::wide_gamut_profile();
    EXPECT_EQ(written_space(one_pixel(ColourModel::rgb, wide), "", {}).icc().size(), wide.size());
    const std::vector<std::pair<ColourModel, Bytes>> others = {
        {ColourModel::rgb, test_support::rgb_table_profile()},
        {ColourModel::rgb, {}},
        {ColourModel::grey, wide},
        {ColourModel::grey, test_support::grey_profile()},
        {ColourModel::cmyk, test_support::cmyk_profile()}};
    for (const auto& [model, icc] : others) {
        const ColourSpace space = written_space(one_pixel(model, icc), "", {});
        EXPECT_TRUE(space.is_standard());
        EXPECT_EQ(space.model(), ColourModel::rgb);
        EXPECT_TRUE(space.is_writable());
    }
}

}  // namespace
}  // namespace tincture
