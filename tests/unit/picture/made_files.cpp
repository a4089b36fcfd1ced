#include "made_files.h"

#include <gtest/gtest.h>
#include <sys/mman.h>
#include <unistd.h>

#include <cmath>
#include <cstring>
#include <filesystem>
#include <random>

namespace tincture::testing_pictures {
namespace {

// A file in memory, which has a path all the same.
class MadeFile {
  public:
    explicit MadeFile(const Bytes& bytes) : descriptor_(::memfd_create("made", MFD_CLOEXEC)) {
        EXPECT_GE(descriptor_, 0);
        EXPECT_EQ(::write(descriptor_, bytes.data(), bytes.size()),
                  static_cast<ssize_t>(bytes.size()));
        path_ = "/proc/self/fd/" + std::to_string(descriptor_);
    }
    ~MadeFile() { ::close(descriptor_); }
    MadeFile(const MadeFile&) = delete;
    MadeFile& operator=(const MadeFile&) = delete;
    [[nodiscard]] const std::filesystem::path& path() const { return path_; }

  private:
    int descriptor_;
    std::filesystem::path path_;
};

Bytes number(std::uint64_t value, int bytes, bool big_endian) {
    Bytes out;
    for (int i = 0; i < bytes; ++i) {
        out.push_back(static_cast<std::uint8_t>(value >> (8 * (big_endian ? bytes - 1 - i : i))));
    }
    return out;
}

}  // namespace

Bytes noise(std::size_t size, unsigned seed) {
    std::mt19937 random(seed);
    Bytes out(size);
    for (auto& byte : out) byte = static_cast<std::uint8_t>(random() >> 24);
    return out;
}

std::vector<std::uint16_t> noise16(std::size_t size, unsigned seed) {
    std::mt19937 random(seed);
    std::vector<std::uint16_t> out(size);
    for (auto& value : out) value = static_cast<std::uint16_t>(random() >> 16);
    return out;
}

Bytes smooth(std::uint32_t width, std::uint32_t height, int channels) {
    Bytes out;
    for (std::uint32_t y = 0; y < height; ++y) {
        for (std::uint32_t x = 0; x < width; ++x) {
            for (int c = 0; c < channels; ++c) {
                const double wave = std::sin(0.2 * x + c) * std::cos(0.15 * y - c);
                out.push_back(static_cast<std::uint8_t>(127.5 + 100 * wave));
            }
        }
    }
    return out;
}

Bytes bytes_of(const std::vector<std::uint16_t>& values) {
    Bytes out(values.size() * 2);
    std::memcpy(out.data(), values.data(), out.size());
    return out;
}

Bytes little(std::uint64_t value, int bytes) {
    return number(value, bytes, false);
}
Bytes big(std::uint64_t value, int bytes) {
    return number(value, bytes, true);
}
Bytes text(const std::string& characters) {
    return {characters.begin(), characters.end()};
}

Bytes joined(const std::vector<Bytes>& parts) {
    Bytes out;
    for (const Bytes& part : parts) out.insert(out.end(), part.begin(), part.end());
    return out;
}

Picture read_bytes(const Bytes& file, const ReadOptions& options) {
    const MadeFile made(file);
    return read_picture(made.path(), options);
}

Error error_of(const Bytes& file, const ReadOptions& options) {
    const MadeFile made(file);
    try {
        const Picture picture = read_picture(made.path(), options);
        ADD_FAILURE() << "was read: " << picture.width << " x " << picture.height;
    } catch (const Error& error) {
        EXPECT_EQ(error.subject(), made.path().native());
        return error;
    }
    return {ErrorKind::usage, "", ""};
}

Bytes samples_of(const Picture& picture) {
    EXPECT_EQ(picture.bits, 8);
    EXPECT_TRUE(picture.samples16.empty());
    EXPECT_EQ(picture.samples8.size(),
              picture.pixel_count() * static_cast<std::size_t>(channel_count(picture.model)));
    return {picture.samples8.data(), picture.samples8.data() + picture.samples8.size()};
}

std::vector<std::uint16_t> samples16_of(const Picture& picture) {
    EXPECT_EQ(picture.bits, 16);
    EXPECT_TRUE(picture.samples8.empty());
    EXPECT_EQ(picture.samples16.size(),
              picture.pixel_count() * static_cast<std::size_t>(channel_count(picture.model)));
    return {picture.samples16.data(), picture.samples16.data() + picture.samples16.size()};
}

Bytes opaque_of(const Picture& picture) {
    if (!picture.opaque.empty()) {
        EXPECT_EQ(picture.opaque.size(), picture.pixel_count());
    }
    return {picture.opaque.data(), picture.opaque.data() + picture.opaque.size()};
}

Bytes exif_block(int orientation, unsigned x_dpi, unsigned y_dpi) {
    const auto value = static_cast<std::uint64_t>(orientation);
    const auto entry = [](unsigned tag, unsigned type, std::uint64_t data) {
        return joined({little(tag, 2), little(type, 2), little(1, 4), little(data, 4)});
    };
    // Four entries behind a header of 8 and a count of 2, then the two fractions.
    const std::uint64_t fractions = 8 + 2 + 4 * 12 + 4;
    return joined({text("II"), little(42, 2), little(8, 4), little(4, 2), entry(0x0112, 3, value),
                   entry(0x011A, 5, fractions), entry(0x011B, 5, fractions + 8),
                   entry(0x0128, 3, 2), little(0, 4), little(x_dpi, 4), little(1, 4),
                   little(y_dpi, 4), little(1, 4)});
}

}  // namespace tincture::testing_pictures
