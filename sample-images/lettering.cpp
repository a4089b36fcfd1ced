#include "lettering.h"

#include <algorithm>
#include <fstream>
#include <iterator>
#include <stdexcept>
#include <vector>

#define STB_TRUETYPE_IMPLEMENTATION
#include <stb_truetype.h>

#include "numbers.h"

namespace tincture::samples {
namespace {

constexpr int curve_steps = 10;

// The texts are our own, so they are taken to be valid UTF-8 of up to three bytes.
std::vector<int> code_points(std::string_view text) {
    std::vector<int> points;
    for (std::size_t i = 0; i < text.size();) {
        const auto byte = [&](std::size_t k) { return static_cast<unsigned char>(text[i + k]); };
        if (byte(0) < 0x80) {
            points.push_back(byte(0));
            i += 1;
        } else if (byte(0) < 0xE0) {
            points.push_back((byte(0) & 0x1F) << 6 | (byte(1) & 0x3F));
            i += 2;
        } else {
            points.push_back((byte(0) & 0x0F) << 12 | (byte(1) & 0x3F) << 6 | (byte(2) & 0x3F));
            i += 3;
        }
    }
    return points;
}

}  // namespace

struct Typeface::Font {
    std::vector<unsigned char> bytes;
    stbtt_fontinfo info{};
    double units = 2048;  // font units to the em

    struct Place {
        int glyph;
        double x;  // font units from the first letter's origin
    };

    // Where the glyphs stand; `end` is the advance after the last one.
    std::vector<Place> set(std::string_view text, double tracking, double& end) const {
        std::vector<Place> places;
        double x = 0;
        int previous = 0;
        for (const int point : code_points(text)) {
            const int glyph = stbtt_FindGlyphIndex(&info, point);
            if (!places.empty()) {
                x += stbtt_GetGlyphKernAdvance(&info, previous, glyph) + tracking / 1000 * units;
            }
            places.push_back({glyph, x});
            int advance = 0;
            int bearing = 0;
            stbtt_GetGlyphHMetrics(&info, glyph, &advance, &bearing);
            x += advance;
            previous = glyph;
        }
        end = x;
        return places;
    }

    // The glyph about its origin on the base line, y downwards, in font units.
    Outline outline(int glyph) const {
        Outline result;
        stbtt_vertex* vertices = nullptr;
        const int count = stbtt_GetGlyphShape(&info, glyph, &vertices);
        Point last;
        for (int i = 0; i < count; ++i) {
            const stbtt_vertex& v = vertices[i];
            const Point to{static_cast<double>(v.x), static_cast<double>(-v.y)};
            const Point bend{static_cast<double>(v.cx), static_cast<double>(-v.cy)};
            if (v.type == STBTT_vmove) result.rings.emplace_back();
            const int steps = v.type == STBTT_vcurve ? curve_steps : 1;
            for (int k = 1; k <= steps; ++k) {
                const double t = static_cast<double>(k) / steps;
                const double a = (1 - t) * (1 - t);
                const double b = steps == 1 ? 0 : 2 * t * (1 - t);
                const double c = t * t;
                result.rings.back().push_back(
                    {a * last.x + b * bend.x + c * to.x, a * last.y + b * bend.y + c * to.y});
            }
            last = to;
        }
        stbtt_FreeShape(&info, vertices);
        return result;
    }

    // Left and right end of the ink of a line, in font units.
    std::pair<double, double> extent(const std::vector<Place>& places) const {
        double left = 1e9;
        double right = -1e9;
        for (const Place& place : places) {
            int x0 = 0, y0 = 0, x1 = 0, y1 = 0;
            if (stbtt_GetGlyphBox(&info, place.glyph, &x0, &y0, &x1, &y1) == 0 || x1 <= x0)
                continue;
            left = std::min(left, place.x + x0);
            right = std::max(right, place.x + x1);
        }
        return {left, right};
    }
};

Typeface::Typeface(const std::string& name) : font_(std::make_unique<Font>()) {
    const std::string folder = TINCTURE_FONT_DIR;
    for (const std::string& path :
         {folder + "/" + name + ".ttf", folder + "/../" + name + ".ttf"}) {
        std::ifstream file(path, std::ios::binary);
        if (!file) continue;
        font_->bytes.assign(std::istreambuf_iterator<char>(file), {});
        if (stbtt_InitFont(&font_->info, font_->bytes.data(), 0) == 0) break;
        font_->units = 1 / static_cast<double>(stbtt_ScaleForMappingEmToPixels(&font_->info, 1));
        return;
    }
    throw std::runtime_error("cannot read the font " + name + ".ttf; set TINCTURE_FONT_DIR");
}

Typeface::~Typeface() = default;

double Typeface::width(std::string_view text, double size, double tracking) const {
    double end = 0;
    const auto [left, right] = font_->extent(font_->set(text, tracking, end));
    return (right - left) * size / font_->units;
}

double Typeface::cap_height(double size) const {
    int x0 = 0, y0 = 0, x1 = 0, y1 = 0;
    stbtt_GetCodepointBox(&font_->info, 'H', &x0, &y0, &x1, &y1);
    return y1 * size / font_->units;
}

double Typeface::size_to_fill(std::string_view text, double width_px, double tracking) const {
    return width_px / width(text, 1, tracking);
}

Outline Typeface::text(std::string_view text, Point origin, double size, Align align,
                       double tracking) const {
    double end = 0;
    const auto places = font_->set(text, tracking, end);
    const auto [left, right] = font_->extent(places);
    const double scale = size / font_->units;
    const double shift = align == Align::left    ? left
                         : align == Align::right ? right
                                                 : (left + right) / 2;
    Outline result;
    for (const auto& place : places) {
        result.add(font_->outline(place.glyph)
                       .scaled(scale, scale)
                       .moved(origin.x + (place.x - shift) * scale, origin.y));
    }
    return result;
}

Outline Typeface::around(std::string_view text, Point centre, double radius, double angle,
                         double size, double tracking, bool inside) const {
    double end = 0;
    const auto places = font_->set(text, tracking, end);
    const double scale = size / font_->units;
    Outline result;
    for (const auto& place : places) {
        int advance = 0;
        int bearing = 0;
        stbtt_GetGlyphHMetrics(&font_->info, place.glyph, &advance, &bearing);
        const double middle = place.x + advance / 2.0;
        const double along = (middle - end / 2) * scale / radius;
        const double turn = inside ? angle - along : angle + along;
        result.add(font_->outline(place.glyph)
                       .moved(-advance / 2.0, 0)
                       .scaled(scale, scale)
                       .turned(inside ? turn - pi / 2 : turn + pi / 2)
                       .moved(centre.x + radius * cosine(turn), centre.y + radius * sine(turn)));
    }
    return result;
}

}  // namespace tincture::samples
