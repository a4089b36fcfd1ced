#include "picture/sniff.h"

#include <algorithm>
#include <array>
#include <string_view>

#include "picture/formats.h"

namespace tincture::formats {
namespace {

using namespace std::string_view_literals;

// "BM" alone begins many a text: the size of the header behind it settles it.
bool is_bmp(std::string_view head) {
    if (!head.starts_with("BM") || head.size() < 18) return false;
    constexpr std::array<std::uint32_t, 7> header_sizes{12, 40, 52, 56, 64, 108, 124};
    const std::uint32_t size = little32(reinterpret_cast<const std::uint8_t*>(&head[14]));
    return std::find(header_sizes.begin(), header_sizes.end(), size) != header_sizes.end();
}

bool is_pnm(std::string_view head) {
    return head.size() > 2 && head[0] == 'P' && head[1] >= '1' && head[1] <= '6' &&
           " \t\r\n\v\f#"sv.find(head[2]) != std::string_view::npos;
}

// ISO/IEC 14496-12, the "ftyp" box: the brands that the file can be read as.
FileKind kind_of_brands(std::string_view head) {
    const std::uint32_t box_size = big32(reinterpret_cast<const std::uint8_t*>(head.data()));
    const std::string_view box = head.substr(0, box_size);
    bool heic = false;
    for (std::size_t at = 8; at + 4 <= box.size(); at += 4) {
        if (at == 12) continue;  // the minor version
        const std::string_view brand = box.substr(at, 4);
        if (brand == "avif" || brand == "avis") return FileKind::avif;
        heic = heic || brand.starts_with("hei") || brand.starts_with("hev") || brand == "mif1" ||
               brand == "msf1";
    }
    return heic ? FileKind::heic : FileKind::unknown;
}

bool is_svg(std::string_view head) {
    if (head.starts_with("\xEF\xBB\xBF")) head.remove_prefix(3);
    const std::size_t start = head.find_first_not_of(" \t\r\n");
    if (start == std::string_view::npos) return false;
    head.remove_prefix(start);
    if (head.starts_with("<svg") || head.starts_with("<!DOCTYPE svg")) return true;
    return (head.starts_with("<?xml") || head.starts_with("<!--")) &&
           head.find("<svg") != std::string_view::npos;
}

}  // namespace

FileKind sniff(std::span<const std::uint8_t> bytes) {
    const std::string_view head(reinterpret_cast<const char*>(bytes.data()), bytes.size());
    const auto starts = [&](std::string_view magic) { return head.starts_with(magic); };

    if (starts("\xFF\xD8\xFF")) return FileKind::jpeg;
    if (starts("\x89PNG\r\n\x1A\n")) return FileKind::png;
    if (starts("II*\0"sv) || starts("MM\0*"sv) || starts("II+\0"sv) || starts("MM\0+"sv)) {
        return FileKind::tiff;
    }
    if (starts("RIFF") && head.size() >= 12 && head.substr(8, 4) == "WEBP") return FileKind::webp;
    if (head.size() >= 12 && head.substr(4, 4) == "ftyp") return kind_of_brands(head);
    if (is_bmp(head)) return FileKind::bmp;
    if (is_pnm(head)) return FileKind::pnm;

    if (starts("P7\n")) return FileKind::pam;
    if (starts("GIF8")) return FileKind::gif;
    if (starts("%!PS") || starts("\xC5\xD0\xD3\xC6")) return FileKind::postscript;
    if (starts("\xFF\x0A") || starts("\0\0\0\x0CJXL "sv)) return FileKind::jpeg_xl;
    if (starts("\0\0\0\x0CjP  "sv) || starts("\xFF\x4F\xFF\x51")) return FileKind::jpeg_2000;
    // A PDF may have other bytes before its mark (ISO 32000-1, annex H, note 13).
    if (head.substr(0, 1024).find("%PDF-") != std::string_view::npos) return FileKind::pdf;
    if (is_svg(head)) return FileKind::svg;
    return FileKind::unknown;
}

}  // namespace tincture::formats
