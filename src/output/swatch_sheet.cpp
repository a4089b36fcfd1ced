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

constexpr Rgb8 ink{28, 28, 28};
constexpr Rgb8 quiet{92, 92, 92};
constexpr Rgb8 hairline{190, 190, 190};
constexpr Rgb8 bar_grey{112, 112, 112};
constexpr Rgb8 track_grey{234, 234, 234};
constexpr double margin = 32;
constexpr double head_height = 108;  // height above the first row
constexpr double png_scale = 2;      // of the PNG
constexpr std::uint32_t pixels_per_metre =
    7559;  // 192 a inch, so that it prints as large as the SVG

constexpr std::string_view caution =
    "Screen colours are no proof: compare a print or a measured swatch before you order ink.";
constexpr std::string_view no_srgb =
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

constexpr Look roomy{1, 720, 0, 120, 56, 72, 20, 15, 13, 88, 2};
constexpr Look medium{2, 960, 36, 76, 46, 60, 14, 13.5, 12, 82, 2};
constexpr Look dense{4, 1376, 28, 46, 38, 50, 10, 12, 11, 74, 1};

const Look& look_of(std::size_t colours) {
    if (colours <= 12) return roomy;
    return colours <= 48 ? medium : dense;
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
            (look_.width - 2 * margin - look_.gutter * (look_.columns - 1)) / look_.columns;
        for (std::size_t i = 0; i < colours; ++i) {
            const double x = margin + static_cast<double>(i / rows) * (column_width + look_.gutter);
            const double y = head_height + static_cast<double>(i % rows) * look_.row;
            swatch({x, y, column_width, look_.chip_height}, palette_.swatches[i]);
        }
        foot(head_height + static_cast<double>(rows) * look_.row);
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
        const double width = look_.width - 2 * margin;
        const std::string file = legible(study_.picture.file);
        const std::string count = colours(study_.count);
        sheet_.title = "Palette of " + file + ": " + count;
        for (const Swatch& swatch : palette_.swatches) {
            sheet_.description +=
                swatch.name + ' ' + hex(swatch.srgb) + ' ' + fixed(100 * swatch.share, 2) + " %; ";
        }
        sheet_.description += caution;
        text({margin, 46}, shortened(file, 20, Weight::medium, width), 20, ink, Weight::medium);
        text({margin, 68},
             count + (study_.count_was_given ? ", the number that was given"
                                             : ", the number that is proposed"),
             13, quiet);
        text({margin, 86},
             "Lab is CIELAB, D50, 2\u00b0. Bars show the share of the picture; a whole track is " +
                 fixed(100 * whole_track_, 0) + "\u2009%.",
             13, quiet);
    }

    void swatch(const Box& cell, const Swatch& swatch) {
        constexpr double near_white = 88;
        field({cell.x, cell.y, look_.chip_width, look_.chip_height}, swatch.srgb,
              swatch.lab.L >= near_white);
        const double left = cell.x + look_.chip_width + look_.gap;
        const double width = cell.right() - left;
        const std::string share = percent(swatch.share);
        const double name_line = cell.y + std::round(look_.name_size * 0.95);
        const double detail_line = name_line + std::round(look_.detail_size * 1.5);
        const double room = width - text_width(share, look_.name_size, Weight::regular) - 18;
        text({left, name_line},
             shortened(legible(swatch.name), look_.name_size, Weight::medium, room),
             look_.name_size, ink, Weight::medium);
        text({cell.right(), name_line}, share, look_.name_size, ink, Weight::regular, Anchor::end);
        text({left, detail_line}, hex_words(swatch), look_.detail_size, quiet);
        text({left + look_.lab_column, detail_line}, lab_words(swatch, look_), look_.detail_size,
             quiet);
        const double bar = std::round(width * std::min(1.0, swatch.share / whole_track_));
        field({left, cell.bottom() - 3, width, 3}, track_grey);
        if (swatch.share > 0) field({left, cell.bottom() - 3, std::max(1.0, bar), 3}, bar_grey);
    }

    void foot(double y) {
        field({margin, y + 4, look_.width - 2 * margin, 1}, hairline);
        y += 26;
        const bool clipped = std::any_of(palette_.swatches.begin(), palette_.swatches.end(),
                                         [](const Swatch& swatch) { return swatch.hex_de00; });
        if (clipped) {
            text({margin, y}, std::string(no_srgb), 13, quiet);
            y += 19;
        }
        text({margin, y}, std::string(caution), 13, quiet);
        sheet_.height = y + 22;
    }

    const Study& study_;
    const Palette& palette_;
    const Look& look_;
    double whole_track_;
    SwatchSheet sheet_;
};

int pixel(double length) {
    return static_cast<int>(std::lround(length * png_scale));
}

void paint(Band& band, const SheetField& shape) {
    const Box& box = shape.box;
    const int line = pixel(1);
    const int left = pixel(box.x);
    const int top = pixel(box.y);
    const int right = pixel(box.right());
    const int bottom = pixel(box.bottom());
    if (shape.outlined) {
        band.fill(left, top, right, bottom, hairline);
        band.fill(left + line, top + line, right - line, bottom - line, shape.fill);
    } else {
        band.fill(left, top, right, bottom, shape.fill);
    }
}

void paint(Band& band, TextPainter& painter, const SheetText& shape) {
    const int baseline = pixel(shape.baseline.y);
    const int reach = pixel(1.5 * shape.size);  // no glyph is taller or lower
    if (!band.shows(baseline - reach, baseline + reach)) return;
    double x = shape.baseline.x;
    const double width = text_width(shape.words, shape.size, shape.weight);
    if (shape.anchor == Anchor::end) x -= width;
    if (shape.anchor == Anchor::middle) x -= width / 2;
    for (const PlacedGlyph& glyph : painter.paint(shape.words, shape.size * png_scale, shape.weight,
                                                  x * png_scale, baseline)) {
        const GlyphImage& image = *glyph.image;
        for (int row = 0; row < image.height; ++row) {
            for (int column = 0; column < image.width; ++column) {
                const auto at = static_cast<std::size_t>(row) * image.width + column;
                // 16 steps suffice for the eye and leave room for the swatches in a palette of 256.
                const int step = (image.coverage[at] + 8) / 17;
                if (step == 0) continue;
                band.blend(glyph.x + column, glyph.y + row, shape.colour,
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
                        hex(hairline));
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
    TextPainter painter;
    const auto draw = [&](Band& band) {
        for (const auto& shape : sheet.shapes) {
            if (const auto* field = std::get_if<SheetField>(&shape)) {
                paint(band, *field);
            } else {
                paint(band, painter, std::get<SheetText>(shape));
            }
        }
    };
    return draw_png(pixel(sheet.width), pixel(sheet.height), pixels_per_metre, draw);
}

}  // namespace tincture
