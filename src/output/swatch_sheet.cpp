#include "output/swatch_sheet.h"

#include <algorithm>
#include <cmath>
#include <string_view>

#include "colour/notation.h"
#include "output/small_png.h"
#include "support/format.h"
#include "support/utf8.h"

namespace tincture {
namespace {

constexpr Rgb8 kInk{28, 28, 28};
constexpr Rgb8 kQuiet{92, 92, 92};
constexpr Rgb8 kHairline{190, 190, 190};
constexpr Rgb8 kBar{112, 112, 112};
constexpr Rgb8 kTrack{234, 234, 234};
constexpr double kMargin = 32;
constexpr double kHead = 108;  // height above the first row
constexpr double kScale = 2;   // of the PNG
constexpr std::uint32_t kPixelsPerMetre =
    7559;  // 192 a inch, so that it prints as large as the SVG

constexpr std::string_view kCaution =
    "Screen colours are no proof: compare a print or a measured swatch before you order ink.";
constexpr std::string_view kNoSrgb =
    "\u2248 sRGB cannot hold this colour: the chip and its hex form are only the nearest.";

// How a sheet looks at some number of colours.
struct Look {
    int columns;
    double width;  // of the page
    double gutter;
    double chip_width;
    double chip_height;
    double row;
    double gap;  // from the chip to its text
    double name_size;
    double detail_size;
    double lab_column;  // from the hex form to Lab
    int decimals;       // of Lab
};

constexpr Look kRoomy{1, 720, 0, 120, 56, 72, 20, 15, 13, 88, 2};
constexpr Look kMedium{2, 960, 36, 76, 46, 60, 14, 13.5, 12, 82, 2};
constexpr Look kDense{4, 1376, 28, 46, 38, 50, 10, 12, 11, 74, 1};

const Look& look_of(std::size_t colours) {
    if (colours <= 12) return kRoomy;
    return colours <= 48 ? kMedium : kDense;
}

std::string percent(double share) {
    const double value = 100 * share;
    if (value > 0 && value < 0.005) return "<0.01\u2009%";
    return fixed(value, 2) + "\u2009%";
}

std::string hex_words(const Swatch& swatch) {
    return swatch.hex_de00 ? "\u2248\u2009" + hex(swatch.srgb) : hex(swatch.srgb);
}

std::string lab_words(const Swatch& swatch, const Look& look) {
    std::string text = "Lab";
    for (const double value : {swatch.lab.L, swatch.lab.a, swatch.lab.b}) {
        text += "\u2002" + readable(value, look.decimals);  // a plain second space would be lost
    }
    if (swatch.kept) text += "\u2003kept";
    return text;
}

// The share that a whole track stands for: the least round one that holds the largest share.
double track_share(const Palette& palette) {
    double largest = 0;
    for (const Swatch& swatch : palette.swatches) largest = std::max(largest, swatch.share);
    for (const double share : {0.01, 0.02, 0.05, 0.1, 0.2, 0.5}) {
        if (largest <= share) return share;
    }
    return 1;
}

class Sheet {
  public:
    Sheet(const Study& study, const Palette& palette)
        : study_(study),
          palette_(palette),
          look_(look_of(palette.swatches.size())),
          whole_track_(track_share(palette)) {}

    SwatchSheet lay_out() {
        const auto colours = palette_.swatches.size();
        const auto columns = static_cast<std::size_t>(look_.columns);
        const std::size_t rows = std::max<std::size_t>(1, (colours + columns - 1) / columns);
        sheet_.width = look_.width;
        head();
        const double column_width =
            (look_.width - 2 * kMargin - look_.gutter * (look_.columns - 1)) / look_.columns;
        for (std::size_t i = 0; i < colours; ++i) {
            const double x =
                kMargin + static_cast<double>(i / rows) * (column_width + look_.gutter);
            const double y = kHead + static_cast<double>(i % rows) * look_.row;
            swatch({x, y, column_width, look_.chip_height}, palette_.swatches[i]);
        }
        foot(kHead + static_cast<double>(rows) * look_.row);
        return std::move(sheet_);
    }

  private:
    void field(const Box& box, Rgb8 fill, bool outlined = false) {
        sheet_.shapes.emplace_back(SheetField{box, fill, outlined});
    }

    void text(Point baseline, std::string words, double size, Rgb8 colour,
              Weight weight = Weight::regular, Anchor anchor = Anchor::start) {
        sheet_.shapes.emplace_back(
            SheetText{baseline, std::move(words), size, weight, colour, anchor});
    }

    void head() {
        const double width = look_.width - 2 * kMargin;
        const std::string file = legible(study_.picture.file);
        const std::string count =
            std::to_string(study_.count) + (study_.count == 1 ? " colour" : " colours");
        sheet_.title = "Palette of " + file + ": " + count;
        for (const Swatch& swatch : palette_.swatches) {
            sheet_.description +=
                swatch.name + ' ' + hex(swatch.srgb) + ' ' + fixed(100 * swatch.share, 2) + " %; ";
        }
        sheet_.description += kCaution;
        text({kMargin, 46}, shortened(file, 20, Weight::medium, width), 20, kInk, Weight::medium);
        text({kMargin, 68},
             count + (study_.count_was_given ? ", the number that was given"
                                             : ", the number that is proposed"),
             13, kQuiet);
        text({kMargin, 86},
             "Lab is CIELAB, D50, 2\u00b0. Bars show the share of the picture; a whole track is " +
                 fixed(100 * whole_track_, 0) + "\u2009%.",
             13, kQuiet);
    }

    void swatch(const Box& cell, const Swatch& swatch) {
        constexpr double kNearWhite = 88;
        field({cell.x, cell.y, look_.chip_width, look_.chip_height}, swatch.srgb,
              swatch.lab.L >= kNearWhite);
        const double left = cell.x + look_.chip_width + look_.gap;
        const double width = cell.right() - left;
        const std::string share = percent(swatch.share);
        const double name_line = cell.y + std::round(look_.name_size * 0.95);
        const double detail_line = name_line + std::round(look_.detail_size * 1.5);
        const double room = width - text_width(share, look_.name_size, Weight::regular) - 18;
        text({left, name_line},
             shortened(legible(swatch.name), look_.name_size, Weight::medium, room),
             look_.name_size, kInk, Weight::medium);
        text({cell.right(), name_line}, share, look_.name_size, kInk, Weight::regular, Anchor::end);
        text({left, detail_line}, hex_words(swatch), look_.detail_size, kQuiet);
        text({left + look_.lab_column, detail_line}, lab_words(swatch, look_), look_.detail_size,
             kQuiet);
        const double bar = std::round(width * std::min(1.0, swatch.share / whole_track_));
        field({left, cell.bottom() - 3, width, 3}, kTrack);
        if (swatch.share > 0) field({left, cell.bottom() - 3, std::max(1.0, bar), 3}, kBar);
    }

    void foot(double y) {
        field({kMargin, y + 4, look_.width - 2 * kMargin, 1}, kHairline);
        y += 26;
        const bool clipped = std::any_of(palette_.swatches.begin(), palette_.swatches.end(),
                                         [](const Swatch& swatch) { return swatch.hex_de00; });
        if (clipped) {
            text({kMargin, y}, std::string(kNoSrgb), 13, kQuiet);
            y += 19;
        }
        text({kMargin, y}, std::string(kCaution), 13, kQuiet);
        sheet_.height = y + 22;
    }

    const Study& study_;
    const Palette& palette_;
    const Look& look_;
    double whole_track_;
    SwatchSheet sheet_;
};

int pixel(double length) {
    return static_cast<int>(std::lround(length * kScale));
}

void paint(Canvas& canvas, const SheetField& shape) {
    const Box& box = shape.box;
    const int line = pixel(1);
    const int left = pixel(box.x);
    const int top = pixel(box.y);
    const int right = pixel(box.right());
    const int bottom = pixel(box.bottom());
    if (shape.outlined) {
        canvas.fill(left, top, right, bottom, kHairline);
        canvas.fill(left + line, top + line, right - line, bottom - line, shape.fill);
    } else {
        canvas.fill(left, top, right, bottom, shape.fill);
    }
}

void paint(Canvas& canvas, TextPainter& painter, const SheetText& shape) {
    double x = shape.baseline.x;
    const double width = text_width(shape.words, shape.size, shape.weight);
    if (shape.anchor == Anchor::end) x -= width;
    if (shape.anchor == Anchor::middle) x -= width / 2;
    for (const PlacedGlyph& glyph : painter.paint(shape.words, shape.size * kScale, shape.weight,
                                                  x * kScale, shape.baseline.y * kScale)) {
        const GlyphImage& image = *glyph.image;
        for (int row = 0; row < image.height; ++row) {
            for (int column = 0; column < image.width; ++column) {
                const auto at = static_cast<std::size_t>(row) * image.width + column;
                // 16 steps suffice for the eye and leave room for the swatches in a palette of 256.
                const int step = (image.coverage[at] + 8) / 17;
                canvas.blend(glyph.x + column, glyph.y + row, shape.colour,
                             static_cast<std::uint8_t>(17 * step));
            }
        }
    }
}

}  // namespace

SwatchSheet lay_out_swatches(const Study& study) {
    return Sheet(study, palette_at(study, study.count)).lay_out();
}

std::string swatches_svg(const Study& study) {
    const SwatchSheet sheet = lay_out_swatches(study);
    SvgWriter svg(sheet.width, sheet.height, "tincture-swatches", sheet.title, sheet.description);
    for (const auto& shape : sheet.shapes) {
        if (const auto* field = std::get_if<SheetField>(&shape)) {
            const std::string fill = hex(field->fill);
            if (field->outlined) {
                const Box& box = field->box;  // the line lies within, as in the PNG
                svg.box({box.x + 0.5, box.y + 0.5, box.width - 1, box.height - 1}, fill,
                        hex(kHairline));
            } else {
                svg.box(field->box, fill);
            }
        } else {
            const SheetText& text = std::get<SheetText>(shape);
            const std::string colour = hex(text.colour);
            svg.text(text.baseline, text.words, {text.size, text.weight, colour, text.anchor});
        }
    }
    return std::move(svg).finish();
}

std::vector<std::uint8_t> swatches_png(const Study& study) {
    const SwatchSheet sheet = lay_out_swatches(study);
    Canvas canvas(static_cast<std::uint32_t>(pixel(sheet.width)),
                  static_cast<std::uint32_t>(pixel(sheet.height)));
    TextPainter painter;
    for (const auto& shape : sheet.shapes) {
        if (const auto* field = std::get_if<SheetField>(&shape)) {
            paint(canvas, *field);
        } else {
            paint(canvas, painter, std::get<SheetText>(shape));
        }
    }
    return encode_png(canvas, kPixelsPerMetre);
}

}  // namespace tincture
