#include "output/typeface.h"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <stdexcept>

#define STB_TRUETYPE_IMPLEMENTATION
#define STBTT_STATIC
#include <stb/stb_truetype.h>

#include "output/typeface_data.h"
#include "support/utf8.h"

namespace tincture {
namespace {

stbtt_fontinfo load(const unsigned char* data) {
    stbtt_fontinfo font;
    if (stbtt_InitFont(&font, data, 0) == 0) throw std::logic_error("the built-in font is damaged");
    return font;
}

const stbtt_fontinfo& font_of(Weight weight) {
    static const stbtt_fontinfo regular = load(tincture_roboto_regular);
    static const stbtt_fontinfo medium = load(tincture_roboto_medium);
    return weight == Weight::medium ? medium : regular;
}

// Calls use(glyph, pen), the pen in font units from the start; returns the whole advance.
template <typename Use>
int walk(std::u32string_view codes, const stbtt_fontinfo& font, const Use& use) {
    int pen = 0;
    int previous = -1;
    for (const char32_t code : codes) {
        const int glyph = stbtt_FindGlyphIndex(&font, static_cast<int>(code));
        if (previous >= 0) pen += stbtt_GetGlyphKernAdvance(&font, previous, glyph);
        use(glyph, pen);
        int advance = 0;
        int bearing = 0;
        stbtt_GetGlyphHMetrics(&font, glyph, &advance, &bearing);
        pen += advance;
        previous = glyph;
    }
    return pen;
}

double em_scale(const stbtt_fontinfo& font, double size) {
    return stbtt_ScaleForMappingEmToPixels(&font, 1.0F) * size;
}

double width_of(std::u32string_view codes, double size, Weight weight) {
    const stbtt_fontinfo& font = font_of(weight);
    return walk(codes, font, [](int, int) {}) * em_scale(font, size);
}

}  // namespace

double text_width(std::string_view utf8, double size, Weight weight) {
    return width_of(code_points(utf8), size, weight);
}

std::string shortened(std::string_view utf8, double size, Weight weight, double width) {
    std::u32string codes = code_points(utf8);
    if (width_of(codes, size, weight) <= width) return to_utf8(codes);
    const auto with = [&codes](std::size_t kept) {
        const std::size_t tail = kept / 2;  // the end of a name holds its extension
        return codes.substr(0, kept - tail) + U"\u2026" + codes.substr(codes.size() - tail);
    };
    std::size_t fits = 0;
    for (std::size_t too_many = codes.size(); too_many - fits > 1;) {
        const std::size_t middle = fits + (too_many - fits) / 2;
        (width_of(with(middle), size, weight) <= width ? fits : too_many) = middle;
    }
    return to_utf8(with(fits));
}

const GlyphImage& TextPainter::image_of(int glyph, double size, Weight weight, int quarter) {
    const auto [entry, missing] = images_.try_emplace({glyph, size, weight, quarter});
    GlyphImage& image = entry->second;
    if (!missing) return image;
    const stbtt_fontinfo& font = font_of(weight);
    const auto scale = static_cast<float>(em_scale(font, size));
    const float shift = static_cast<float>(quarter) / 4.0F;
    int right = 0;
    int bottom = 0;
    stbtt_GetGlyphBitmapBoxSubpixel(&font, glyph, scale, scale, shift, 0, &image.left, &image.top,
                                    &right, &bottom);
    image.width = right - image.left;
    image.height = bottom - image.top;
    if (image.width <= 0 || image.height <= 0) {
        image.width = image.height = 0;
        return image;
    }
    image.coverage.resize(static_cast<std::size_t>(image.width) * image.height);
    stbtt_MakeGlyphBitmapSubpixel(&font, image.coverage.data(), image.width, image.height,
                                  image.width, scale, scale, shift, 0, glyph);
    return image;
}

std::vector<PlacedGlyph> TextPainter::paint(std::string_view utf8, double size, Weight weight,
                                            double x, double baseline) {
    const stbtt_fontinfo& font = font_of(weight);
    const double scale = em_scale(font, size);
    const int row = static_cast<int>(std::lround(baseline));
    std::vector<PlacedGlyph> glyphs;
    walk(code_points(utf8), font, [&](int glyph, int pen) {
        const auto quarters = static_cast<int>(std::floor((x + pen * scale) * 4 + 0.5));
        const int quarter = ((quarters % 4) + 4) % 4;
        const GlyphImage& image = image_of(glyph, size, weight, quarter);
        glyphs.push_back({(quarters - quarter) / 4 + image.left, row + image.top, &image});
    });
    return glyphs;
}

}  // namespace tincture
