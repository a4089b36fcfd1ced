#include "picture/exif.h"

#include <cstring>

#include "picture/formats.h"

namespace tincture {
namespace {

enum Tag : std::uint32_t {
    orientation_tag = 0x0112,
    x_resolution_tag = 0x011A,
    y_resolution_tag = 0x011B,
    resolution_unit_tag = 0x0128,
};
enum Type : std::uint32_t { short_type = 3, rational_type = 5 };
constexpr std::size_t entry_size = 12;

// A TIFF block of either byte order; reads outside of it give 0.
class Block {
  public:
    explicit Block(std::span<const std::uint8_t> bytes) : bytes_(bytes) {
        big_ = bytes.size() >= 8 && bytes[0] == 'M' && bytes[1] == 'M';
        const bool little = bytes.size() >= 8 && bytes[0] == 'I' && bytes[1] == 'I';
        valid_ = (big_ || little) && u16(2) == 42;
    }
    [[nodiscard]] bool valid() const { return valid_; }
    [[nodiscard]] std::uint32_t u16(std::size_t at) const {
        if (at > bytes_.size() || bytes_.size() - at < 2) return 0;
        return big_ ? formats::big16(&bytes_[at]) : formats::little16(&bytes_[at]);
    }
    [[nodiscard]] std::uint32_t u32(std::size_t at) const {
        if (at > bytes_.size() || bytes_.size() - at < 4) return 0;
        return big_ ? formats::big32(&bytes_[at]) : formats::little32(&bytes_[at]);
    }
    // 0 for a denominator of 0.
    [[nodiscard]] double rational(std::size_t at) const {
        const std::uint32_t denominator = u32(at + 4);
        return denominator == 0 ? 0.0 : static_cast<double>(u32(at)) / denominator;
    }

  private:
    std::span<const std::uint8_t> bytes_;
    bool big_ = false;
    bool valid_ = false;
};

}  // namespace

ExifFacts read_exif(std::span<const std::uint8_t> block) {
    if (block.size() >= 6 && std::memcmp(block.data(), "Exif\0\0", 6) == 0) {
        block = block.subspan(6);
    }
    ExifFacts facts;
    const Block tiff(block);
    if (!tiff.valid()) return facts;

    double x = 0;
    double y = 0;
    std::uint32_t unit = 2;
    const std::size_t directory = tiff.u32(4);
    const std::size_t entries = tiff.u16(directory);
    for (std::size_t i = 0; i < entries; ++i) {
        const std::size_t entry = directory + 2 + i * entry_size;
        const std::uint32_t tag = tiff.u16(entry);
        const std::uint32_t type = tiff.u16(entry + 2);
        if (tiff.u32(entry + 4) != 1) continue;
        if (type == short_type && tag == orientation_tag) {
            const std::uint32_t value = tiff.u16(entry + 8);
            if (value >= 1 && value <= 8) facts.orientation = static_cast<int>(value);
        } else if (type == short_type && tag == resolution_unit_tag) {
            unit = tiff.u16(entry + 8);
        } else if (type == rational_type && tag == x_resolution_tag) {
            x = tiff.rational(tiff.u32(entry + 8));
        } else if (type == rational_type && tag == y_resolution_tag) {
            y = tiff.rational(tiff.u32(entry + 8));
        }
    }
    const double per_inch = unit == 2 ? 1.0 : unit == 3 ? 2.54 : 0.0;
    facts.resolution = sensible_resolution(x * per_inch, y * per_inch);
    return facts;
}

}  // namespace tincture
