// JPEG through libjpeg (ITU-T T.81, JFIF, and the Adobe marker of ITU-T T.872).
#include <cstdio>
// jpeglib.h needs <cstdio> before it.
#include <jpeglib.h>
// jerror.h needs jpeglib.h before it.
#include <jerror.h>

#include <algorithm>
#include <array>
#include <csetjmp>
#include <cstdlib>
#include <memory>

#include "picture/exif.h"
#include "picture/formats.h"
#include "support/cancel.h"

namespace tincture::formats {
namespace {

// More than any encoder makes; a file of many empty scans would keep the decoder busy for hours.
constexpr int most_scans = 500;
constexpr std::uint32_t rows_at_once = 16;

// libjpeg hands its own structures on; these begin with them.
struct ErrorManager {
    jpeg_error_mgr base;
    std::jmp_buf jump;
    int code;  // message code of what ended the reading, 0: nothing
};
struct ProgressManager {
    jpeg_progress_mgr base;
    bool cancelled;
    bool too_many_scans;
};

ErrorManager& errors_of(j_common_ptr common) {
    return *reinterpret_cast<ErrorManager*>(common->err);
}

[[noreturn]] void on_error(j_common_ptr common) {
    ErrorManager& errors = errors_of(common);
    errors.code = errors.base.msg_code;
    std::longjmp(errors.jump, 1);
}

// The bytes that were skipped before a marker are harmless where no pixel can have been among them:
// before the first scan, and where they are zeros, which some cameras pad with.
bool is_padding(j_decompress_ptr jpeg, std::span<const std::uint8_t> bytes) {
    if (jpeg->input_scan_number == 0) return true;
    const auto count = static_cast<std::size_t>(std::max(0, jpeg->err->msg_parm.i[0]));
    const std::size_t left = jpeg->src->bytes_in_buffer;
    if (left > bytes.size() || bytes.size() - left < count) return false;
    const auto end = bytes.end() - static_cast<std::ptrdiff_t>(left);
    return std::all_of(end - static_cast<std::ptrdiff_t>(count), end,
                       [](std::uint8_t byte) { return byte == 0; });
}

// A warning is a negative level. libjpeg makes pixels up and goes on; here it ends the reading.
void on_message(j_common_ptr common, int level) {
    if (level >= 0) return;
    switch (common->err->msg_code) {
        case JWRN_JFIF_MAJOR:      // a number in the header that nothing depends on
        case JWRN_NOT_SEQUENTIAL:  // a field that baseline decoding ignores
            return;
        case JWRN_EXTRANEOUS_DATA: {
            const auto* bytes =
                static_cast<const std::span<const std::uint8_t>*>(common->client_data);
            if (is_padding(reinterpret_cast<j_decompress_ptr>(common), *bytes)) return;
            break;
        }
        default:
            break;
    }
    on_error(common);
}

void on_output(j_common_ptr) {}

void on_progress(j_common_ptr common) {
    auto* progress = reinterpret_cast<ProgressManager*>(common->progress);
    progress->cancelled = cancel_requested();
    progress->too_many_scans =
        reinterpret_cast<j_decompress_ptr>(common)->input_scan_number > most_scans;
    if (progress->cancelled || progress->too_many_scans) {
        std::longjmp(errors_of(common).jump, 1);
    }
}

class JpegReader {
  public:
    explicit JpegReader(const Source& source) : source_(source), bytes_(source.bytes) {}
    ~JpegReader() { jpeg_destroy_decompress(&jpeg_); }
    JpegReader(const JpegReader&) = delete;
    JpegReader& operator=(const JpegReader&) = delete;

    Stored read() {
        open();
        read_header();
        read_facts();  // libjpeg forgets them with the last row
        read_pixels();
        return std::move(stored_);
    }

  private:
    // Runs `body`; does not return if libjpeg gave up in it. `body` must not own anything, because
    // libjpeg leaves it with longjmp.
    template <typename Body>
    void run(const Body& body) {
        if (!ran(body)) give_up();
    }
    template <typename Body>
    bool ran(const Body& body) {
        if (setjmp(errors_.jump) != 0) return false;
        body();
        return true;
    }

    void open();
    void read_header();
    void read_pixels();
    void check_all_scans_came();
    void read_facts();
    [[nodiscard]] std::string place() const;
    [[noreturn]] void give_up();

    const Source& source_;
    std::span<const std::uint8_t> bytes_;
    jpeg_decompress_struct jpeg_{};
    ErrorManager errors_{};
    ProgressManager progress_{};
    Stored stored_;
};

std::string JpegReader::place() const {
    if (jpeg_.input_scan_number == 0) return "in its header";
    if (jpeg_.output_scanline == 0 && jpeg_.input_scan_number > 1) {
        return "in pass " + std::to_string(jpeg_.input_scan_number) + " over its pixels";
    }
    if (jpeg_.output_scanline < jpeg_.output_height) {
        return "at " + row_of(jpeg_.output_scanline, jpeg_.output_height);
    }
    return "behind its last row";
}

void JpegReader::give_up() {
    if (progress_.cancelled) throw_if_cancelled();
    if (progress_.too_many_scans) {
        refuse_damaged(source_, "a JPEG with more than " + std::to_string(most_scans) +
                                    " passes over its pixels");
    }
    switch (errors_.code) {
        case JERR_OUT_OF_MEMORY:
            throw std::bad_alloc();
        case JERR_BAD_PRECISION:
            refuse(source_, "is a JPEG of " + std::to_string(jpeg_.data_precision) +
                                " bits, and only 8 are read: save it as a 16-bit PNG or TIFF");
        case JERR_SOF_UNSUPPORTED:
            refuse(
                source_,
                "is a JPEG of a rare kind (lossless or hierarchical), which is not read: save it "
                "as PNG or TIFF");
        case JERR_EMPTY_IMAGE:
            check_size(source_, jpeg_.image_width, jpeg_.image_height);
            break;
        case JERR_IMAGE_TOO_BIG:
            refuse(source_, "is a JPEG with a side of more than " +
                                std::to_string(JPEG_MAX_DIMENSION) + " pixels: save it as PNG");
        case JERR_INPUT_EMPTY:
        case JERR_INPUT_EOF:
        case JWRN_JPEG_EOF:
            refuse_cut_short(source_, "a JPEG that ends after " +
                                          std::to_string(source_.bytes.size()) + " bytes, " +
                                          place());
        default:
            break;
    }
    refuse_damaged(source_, "a JPEG with wrong data " + place());
}

void JpegReader::open() {
    jpeg_.err = jpeg_std_error(&errors_.base);
    errors_.base.error_exit = on_error;
    errors_.base.emit_message = on_message;
    errors_.base.output_message = on_output;
    jpeg_.client_data = &bytes_;
    run([&] {
        jpeg_create_decompress(&jpeg_);  // keeps err and client_data
        jpeg_mem_src(&jpeg_, bytes_.data(), static_cast<unsigned long>(bytes_.size()));
        jpeg_save_markers(&jpeg_, JPEG_APP0 + 1, 0xFFFF);  // EXIF
        jpeg_save_markers(&jpeg_, JPEG_APP0 + 2, 0xFFFF);  // ICC
    });
    progress_.base.progress_monitor = on_progress;
    jpeg_.progress = &progress_.base;
}

void JpegReader::read_header() {
    run([&] { jpeg_read_header(&jpeg_, TRUE); });
    check_size(source_, jpeg_.image_width, jpeg_.image_height);
    ColourModel model = ColourModel::rgb;
    switch (jpeg_.jpeg_color_space) {
        case JCS_GRAYSCALE:
            model = ColourModel::grey;
            jpeg_.out_color_space = JCS_GRAYSCALE;
            break;
        case JCS_RGB:
        case JCS_YCbCr:
            jpeg_.out_color_space = JCS_RGB;
            break;
        case JCS_CMYK:
        case JCS_YCCK:
            model = ColourModel::cmyk;
            jpeg_.out_color_space = JCS_CMYK;
            break;
        default:
            refuse(source_, "is a JPEG with " + std::to_string(jpeg_.num_components) +
                                " channels of unknown meaning: save it as grey, RGB or CMYK");
    }
    jpeg_.dct_method = JDCT_ISLOW;
    run([&] { jpeg_start_decompress(&jpeg_); });
    allocate(stored_.picture, jpeg_.output_width, jpeg_.output_height, model, 8);
}

void JpegReader::read_pixels() {
    const std::size_t row_size =
        std::size_t{jpeg_.output_width} * static_cast<std::size_t>(jpeg_.output_components);
    std::uint8_t* const base = stored_.picture.samples8.data();
    // The Adobe marker comes with inverted inks: 255 is none (common practice, ITU-T T.872 6.5.3).
    const bool inverted =
        stored_.picture.model == ColourModel::cmyk && jpeg_.saw_Adobe_marker != FALSE;
    while (jpeg_.output_scanline < jpeg_.output_height) {
        throw_if_cancelled();
        std::uint8_t* const first = base + jpeg_.output_scanline * row_size;
        const std::uint32_t wanted =
            std::min(rows_at_once, jpeg_.output_height - jpeg_.output_scanline);
        std::array<JSAMPROW, rows_at_once> rows{};
        for (std::uint32_t i = 0; i < wanted; ++i) rows[i] = first + i * row_size;
        const std::uint32_t start = jpeg_.output_scanline;
        run([&] {
            while (jpeg_.output_scanline < start + wanted) {
                const std::uint32_t done = jpeg_.output_scanline - start;
                jpeg_read_scanlines(&jpeg_, rows.data() + done, wanted - done);
            }
        });
        if (!inverted) continue;
        for (std::size_t i = 0; i < wanted * row_size; ++i) {
            first[i] = static_cast<std::uint8_t>(255 - first[i]);
        }
    }
    check_all_scans_came();
    run([&] { jpeg_finish_decompress(&jpeg_); });
}

// A progressive file that lost its last passes and was closed tidily draws no warning.
void JpegReader::check_all_scans_came() {
    if (jpeg_.coef_bits == nullptr || jpeg_.progressive_mode == FALSE) return;
    for (int component = 0; component < jpeg_.num_components; ++component) {
        const auto& bits = jpeg_.coef_bits[component];
        const bool unfinished =
            std::any_of(std::begin(bits), std::end(bits), [](int bit) { return bit > 0; });
        if (unfinished || bits[0] < 0) {
            refuse_cut_short(source_, "a JPEG whose last passes over the pixels are missing");
        }
    }
}

void JpegReader::read_facts() {
    Picture& picture = stored_.picture;
    JOCTET* profile = nullptr;
    unsigned size = 0;
    if (!ran([&] { jpeg_read_icc_profile(&jpeg_, &profile, &size); })) {
        refuse_damaged(source_, "a JPEG with a colour profile of which parts are missing");
    }
    const std::unique_ptr<JOCTET, decltype(&std::free)> owner(profile, &std::free);
    if (profile != nullptr) picture.icc.assign(profile, profile + size);

    ExifFacts exif;
    for (auto* marker = jpeg_.marker_list; marker != nullptr; marker = marker->next) {
        const std::span<const std::uint8_t> data(marker->data, marker->data_length);
        constexpr std::array<std::uint8_t, 6> mark{'E', 'x', 'i', 'f', 0, 0};
        if (marker->marker == JPEG_APP0 + 1 && data.size() > mark.size() &&
            std::equal(mark.begin(), mark.end(), data.begin())) {
            exif = read_exif(data);
            break;
        }
    }
    stored_.orientation = exif.orientation;
    const double per_inch = jpeg_.density_unit == 1 ? 1.0 : jpeg_.density_unit == 2 ? 2.54 : 0.0;
    if (jpeg_.saw_JFIF_marker != FALSE) {
        picture.resolution =
            sensible_resolution(jpeg_.X_density * per_inch, jpeg_.Y_density * per_inch);
    }
    if (!picture.resolution) picture.resolution = exif.resolution;
}

}  // namespace

Stored read_jpeg(const Source& source) {
    return JpegReader(source).read();
}

}  // namespace tincture::formats
