#include "picture/picture_space.h"

#include <fstream>
#include <iterator>

#include "support/error.h"

namespace tincture {
namespace {

constexpr std::uintmax_t largest_profile = 64'000'000;

std::vector<std::uint8_t> read_profile(const std::filesystem::path& path) {
    std::error_code failed;
    const std::uintmax_t size = std::filesystem::file_size(path, failed);
    if (failed || !std::filesystem::is_regular_file(path)) {
        throw Error(ErrorKind::input, path.string(),
                    "is no file that can be read as a colour profile; check the name");
    }
    if (size > largest_profile) {
        throw Error(ErrorKind::input, path.string(), "is too large for a colour profile");
    }
    std::ifstream file(path, std::ios::binary);
    std::vector<std::uint8_t> bytes(static_cast<std::size_t>(size));
    file.read(reinterpret_cast<char*>(bytes.data()), static_cast<std::streamsize>(size));
    if (!file) {
        throw Error(ErrorKind::input, path.string(), "cannot be read; check its permissions");
    }
    return bytes;
}

}  // namespace

ColourSpace picture_space(const Picture& picture, const std::string& subject,
                          const std::optional<std::filesystem::path>& named) {
    if (!picture.icc.empty()) {
        try {
            return ColourSpace::from_icc(picture.icc, picture.model, subject);
        } catch (const Error&) {
            if (!named) throw;
        }
    }
    if (named) {
        return ColourSpace::from_icc(read_profile(*named), picture.model, named->string());
    }
    if (picture.model == ColourModel::cmyk) {
        throw Error(ErrorKind::input, subject,
                    "is CMYK without a colour profile; name the ICC profile of its printing "
                    "condition with --profile FILE");
    }
    return ColourSpace::standard(picture.model);
}

ColourSpace written_space(const Picture& picture, const std::string& subject,
                          const std::optional<std::filesystem::path>& named) {
    if (picture.model == ColourModel::rgb) {
        ColourSpace space = picture_space(picture, subject, named);
        if (space.is_writable()) return space;
    }
    return ColourSpace::standard(ColourModel::rgb);
}

}  // namespace tincture
