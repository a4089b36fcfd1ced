#include "picture/read.h"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <new>
#include <system_error>

#include "picture/formats.h"
#include "picture/orientation.h"
#include "picture/sniff.h"
#include "support/cancel.h"
#include "support/error.h"

namespace tincture {
namespace {

using formats::FileKind;
using formats::Source;
using formats::Stored;

constexpr const char* export_advice =
    ": export it as PNG or TIFF at 300 ppi at final size, 600 to 1200 ppi for line art";
constexpr const char* save_advice = ": save it as PNG, TIFF or JPEG";

class Descriptor {
  public:
    explicit Descriptor(int value) : value_(value) {}
    ~Descriptor() {
        if (value_ >= 0) ::close(value_);
    }
    Descriptor(const Descriptor&) = delete;
    Descriptor& operator=(const Descriptor&) = delete;
    [[nodiscard]] int get() const { return value_; }

  private:
    int value_;
};

std::string reason(int error) {
    return std::generic_category().message(error);
}

// Refuses what is no regular file before opening it: opening a pipe would wait for its writer.
void check_kind_of_file(const Source& source) {
    struct stat facts {};
    if (::stat(source.subject.c_str(), &facts) != 0) {
        if (errno == ENOENT) formats::refuse(source, "does not exist: check the name");
        formats::refuse(source, "cannot be opened: " + reason(errno));
    }
    if (S_ISDIR(facts.st_mode)) {
        formats::refuse(source, "is a folder: name a picture in it");
    }
    if (!S_ISREG(facts.st_mode)) {
        formats::refuse(source, "is no regular file: save the picture to a file first");
    }
}

// Reads from the start of the file; fewer bytes come back where the file has become shorter.
std::size_t read_bytes(const Source& source, std::uint8_t* to, std::size_t size) {
    constexpr std::size_t piece = std::size_t{16} << 20;
    std::size_t done = 0;
    while (done < size) {
        throw_if_cancelled();
        const ssize_t got = ::pread(source.descriptor, to + done, std::min(piece, size - done),
                                    static_cast<off_t>(done));
        if (got < 0 && errno == EINTR) continue;
        if (got < 0) formats::refuse(source, "cannot be read: " + reason(errno));
        if (got == 0) break;
        done += static_cast<std::size_t>(got);
    }
    return done;
}

[[noreturn]] void refuse_kind(const Source& source, FileKind kind) {
    const auto because = [&](const std::string& what) { formats::refuse(source, what); };
    switch (kind) {
        case FileKind::gif:
            because(std::string("is a GIF, which is not read") + save_advice);
            break;
        case FileKind::heic:
            because(std::string("is a HEIC picture, which is not read") + save_advice);
            break;
        case FileKind::jpeg_2000:
            because(std::string("is a JPEG 2000 picture, which is not read") + save_advice);
            break;
        case FileKind::jpeg_xl:
            because(std::string("is a JPEG XL picture, which is not read") + save_advice);
            break;
        case FileKind::pam:
            because("is a PAM (P7) picture, which is not read: save it as PNG, PPM or PGM");
            break;
        case FileKind::pdf:
            because(std::string("is a PDF") + export_advice);
            break;
        case FileKind::postscript:
            because(std::string("is a PostScript or EPS file") + export_advice);
            break;
        case FileKind::svg:
            because(std::string("is an SVG drawing") + export_advice);
            break;
        default:
            break;
    }
    formats::refuse(source,
                    "is not a supported picture: give a PNG, JPEG, TIFF, WebP, AVIF, BMP or PNM");
}

Stored read_kind(Source source, FileKind kind) {
    if (kind == FileKind::tiff) return formats::read_tiff(source);
    if (kind > FileKind::webp) refuse_kind(source, kind);

    Samples<std::uint8_t> bytes(source.file_size);
    source.bytes = {bytes.data(), read_bytes(source, bytes.data(), bytes.size())};
    switch (kind) {
        case FileKind::avif:
            return formats::read_avif(source);
        case FileKind::bmp:
            return formats::read_bmp(source);
        case FileKind::jpeg:
            return formats::read_jpeg(source);
        case FileKind::png:
            return formats::read_png(source);
        case FileKind::pnm:
            return formats::read_pnm(source);
        default:
            return formats::read_webp(source);
    }
}

Picture read_checked(const std::filesystem::path& path, Source& source) {
    check_kind_of_file(source);
    const Descriptor file(::open(path.c_str(), O_RDONLY | O_CLOEXEC | O_NONBLOCK));
    struct stat facts {};
    if (file.get() < 0 || ::fstat(file.get(), &facts) != 0) {
        formats::refuse(source, "cannot be opened: " + reason(errno));
    }
    if (facts.st_size <= 0) formats::refuse(source, "is empty: it has no bytes");
    source.descriptor = file.get();
    source.file_size = static_cast<std::uint64_t>(facts.st_size);

    std::array<std::uint8_t, formats::sniff_size> head{};
    const std::size_t head_size = read_bytes(source, head.data(), head.size());
    Stored stored = read_kind(source, formats::sniff({head.data(), head_size}));
    apply_orientation(stored.picture, stored.orientation);
    stored.picture.file_name = path.filename().native();
    return std::move(stored.picture);
}

}  // namespace

Picture read_picture(const std::filesystem::path& path, const ReadOptions& options) {
    Source source;
    source.subject = path.native();
    source.max_pixels = options.max_pixels;
    try {
        return read_checked(path, source);
    } catch (const std::bad_alloc&) {
        throw Error(ErrorKind::limit, source.subject,
                    "needs more memory than is free: give a smaller copy of it");
    }
}

}  // namespace tincture
