// Pictures whose colours are known, drawn from a seed. Everything in them is invented.
#pragma once

#include <cstdint>
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "colour/rgb.h"
#include "picture/picture.h"
#include "tests/corpus/canvas.h"

namespace tincture::corpus {

enum class Kind {
    poster,   // 2 to 12 inks at least 14 CIEDE2000 apart, shapes and lettering
    near,     // a poster with one or two pairs of inks 5 to 14 CIEDE2000 apart
    small,    // a poster with one ink on 0.02 to 0.2 % of its area
    fine,     // a poster with lettering of 1 to 2 pixels
    label,    // inks and flat tints of them
    lines,    // outlines of 1 to 3 pixels and hatching
    screen,   // flat panels, rules and small text
    fade,     // flat art with fades and soft shadows: its count is that of the flat inks
    photo,    // photograph-like: no count is natural
    accent,   // the same with a planted colour on 0.3 % of the area, far from all others
    placard,  // a poster by another hand: other shapes, sizes and layouts, edges mixed as light
};

[[nodiscard]] std::span<const Kind> all_kinds();
[[nodiscard]] std::string name_of(Kind kind);

struct Sample {
    Kind kind = Kind::poster;
    std::uint64_t seed = 0;
    Picture picture;                     // 8-bit sRGB without a profile
    std::vector<Rgb8> inks;              // empty where no count is natural
    std::vector<std::uint8_t> truth;     // for each pixel the ink at its centre; placard: of most
    std::vector<double> shares;          // for each ink its part of `truth`
    std::vector<std::uint16_t> strokes;  // for each pixel the stroke of two pixels it is in, or 0
    std::optional<Rgb8> accent;

    [[nodiscard]] bool natural_count() const { return !inks.empty(); }
    [[nodiscard]] int count() const { return static_cast<int>(inks.size()); }
};

// The same picture for the same kind and seed, on every machine.
[[nodiscard]] Sample draw_sample(Kind kind, std::uint64_t seed);

// For those who draw: one a kind, with random numbers of its own. Posters, and the strata of them.
[[nodiscard]] Sample draw_poster(Random& random, Kind kind);
[[nodiscard]] Sample draw_label(Random& random);
[[nodiscard]] Sample draw_lines(Random& random);
[[nodiscard]] Sample draw_screen(Random& random);
[[nodiscard]] Sample draw_fade(Random& random);
[[nodiscard]] Sample draw_photo(Random& random, bool planted_accent);
[[nodiscard]] Sample draw_placard(Random& random);

// The part of the truth of each of `n` inks.
[[nodiscard]] std::vector<double> shares_of(std::span<const std::uint8_t> truth, std::size_t n);
// Truth, shares and strokes of a drawn canvas; renders it flat.
[[nodiscard]] Sample flat_sample(const Canvas& canvas, std::vector<Rgb8> inks);

}  // namespace tincture::corpus
