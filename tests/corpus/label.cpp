// Labels of goods: a few inks on paper and flat tints of them, as a shop prints them on a roll.
#include <array>
#include <stdexcept>

#include "tests/corpus/inks.h"
#include "tests/corpus/lettering.h"
#include "tests/corpus/pictures.h"

namespace tincture::corpus {
namespace {

constexpr int edge = 480;
constexpr double inks_apart = 14;   // CIEDE2000
constexpr double tints_apart = 10;  // from paper, inks and each other
constexpr double least_share = 0.002;

// Paper, inks, then their tints; which tint belongs to which ink.
struct Colours {
    std::vector<Rgb8> all;
    std::size_t inks = 0;  // paper included
    std::vector<std::size_t> tint_of;

    // A tint of an ink, or the ink itself.
    [[nodiscard]] Pen tint(std::size_t ink) const {
        for (std::size_t i = 0; i < tint_of.size(); ++i) {
            if (tint_of[i] == ink) return {static_cast<std::uint8_t>(inks + i)};
        }
        return {static_cast<std::uint8_t>(ink)};
    }
    [[nodiscard]] Pen ink(std::size_t i) const {
        return {static_cast<std::uint8_t>(1 + i % (inks - 1))};
    }
};

Colours choose_colours(Random& random) {
    Colours colours;
    do {
        colours.all = choose_inks(random, 3 + static_cast<int>(random.below(3)), inks_apart);
    } while (lab_of(colours.all[0]).L < 75);
    // Frame and small print are in the darkest.
    std::swap(colours.all[1],
              *std::min_element(colours.all.begin() + 1, colours.all.end(),
                                [](Rgb8 one, Rgb8 two) { return lab_of(one).L < lab_of(two).L; }));
    colours.inks = colours.all.size();
    for (std::size_t ink = 1; ink < colours.inks; ++ink) {
        const Light mixed =
            mix(light_of(colours.all[ink]), light_of(colours.all[0]), random.between(0.3, 0.7));
        if (add_if_apart(colours.all, {to_byte(mixed.r), to_byte(mixed.g), to_byte(mixed.b)},
                         tints_apart)) {
            colours.tint_of.push_back(ink);
        }
    }
    return colours;
}

// A fruit, with its lit side and its leaf in tints.
void draw_fruit(Canvas& canvas, Random& random, Point c, double size, const Colours& colours,
                std::size_t ink) {
    canvas.disk(c, size / 2, colours.ink(ink));
    canvas.ellipse({c.x - size * 0.14, c.y - size * 0.14}, size * 0.24, size * 0.17, 0.88,
                   colours.tint(colours.ink(ink).ink));
    const std::array<Point, 3> stem = {{{c.x, c.y - size * 0.45},
                                        {c.x + size * 0.05, c.y - size * 0.6},
                                        {c.x + size * 0.14, c.y - size * 0.68}}};
    canvas.line(stem, 4, colours.ink(ink + 1));
    canvas.ellipse({c.x + size * 0.3, c.y - size * 0.58}, size * 0.2, size * 0.09,
                   random.between(-0.1, 0), colours.tint(colours.ink(ink + 1).ink));
}

void draw_bars(Canvas& canvas, Random& random, const Box& box, Pen pen) {
    for (double x = box.left; x < box.right;) {
        const double bar = 2 + static_cast<double>(random.below(3));
        canvas.rectangle({x, box.top, std::min(x + bar, box.right), box.bottom}, pen);
        x += bar + 2 + static_cast<double>(random.below(3));
    }
}

void draw_badge(Canvas& canvas, Random& random, const Colours& colours) {
    const Point c{240, random.between(200, 230)};
    const double size = random.between(120, 150);
    const bool round = random.below(2) == 0;
    const Pen outer = colours.ink(0);
    const Pen inner = colours.tint(colours.ink(random.below(3)).ink);
    if (round) {
        canvas.disk(c, size, outer);
        canvas.disk(c, size - 9, inner);
        canvas.ring(c, size - 15, size - 17, outer);
    } else {
        canvas.rounded_rectangle({c.x - size * 1.3, c.y - size, c.x + size * 1.3, c.y + size}, 28,
                                 outer);
        canvas.rounded_rectangle(
            {c.x - size * 1.3 + 9, c.y - size + 9, c.x + size * 1.3 - 9, c.y + size - 9}, 20,
            inner);
    }
    const double spread = size * 0.48;
    draw_fruit(canvas, random, {c.x - spread, c.y - size * 0.2}, size * 0.5, colours, 1);
    draw_fruit(canvas, random, {c.x + spread * 0.9, c.y - size * 0.12}, size * 0.56, colours, 2);
    draw_fruit(canvas, random, {c.x, c.y - size * 0.3}, size * 0.68, colours, 1);
}

void draw_banner(Canvas& canvas, Random& random, const Colours& colours, double y) {
    const Pen band = colours.ink(1);
    const Pen fold = colours.tint(band.ink);
    for (const double side : {-1.0, 1.0}) {
        const std::array<Point, 5> tail = {{{240 + side * 150, y + 14},
                                            {240 + side * 218, y + 14},
                                            {240 + side * 200, y + 40},
                                            {240 + side * 218, y + 66},
                                            {240 + side * 150, y + 66}}};
        canvas.polygon(tail, fold);
    }
    canvas.rectangle({70, y, 410, y + 54}, band);
    Lettering title;
    title.height = random.between(26, 34);
    title.thickness = title.height * random.between(0.13, 0.18);
    draw_words(canvas, random, {90, y + 27 - title.height / 2}, 300, title, Pen{0});
}

void draw_small_print(Canvas& canvas, Random& random, const Colours& colours) {
    const Pen dark = colours.ink(0);
    Lettering text;
    text.height = random.between(10, 13);
    text.thickness = random.between(1.6, 2.2);
    draw_paragraph(canvas, random, {40, 404, 300, 450}, text.height * 1.6, text, dark);
    draw_bars(canvas, random, {330, 404, 440, 446}, dark);
    Pen rule = dark;
    rule.stroke = canvas.new_stroke();
    const std::array<Point, 2> line = {{{40, 394}, {440, 394}}};
    canvas.line(line, 2, rule);
}

}  // namespace

Sample draw_label(Random& random) {
    for (int tries = 0; tries < 200; ++tries) {
        Colours colours = choose_colours(random);
        if (colours.tint_of.empty()) continue;
        Canvas canvas(edge, edge, 3, 0);
        const Pen outline = colours.ink(0);
        canvas.frame(canvas.whole().inset(14), 6, outline);
        Pen thin = colours.ink(1);
        canvas.frame(canvas.whole().inset(24), 3, thin);
        for (std::size_t i = 0; i + 1 < colours.inks; ++i) {  // each ink and tint has a corner
            const double x =
                40 + 400.0 * static_cast<double>(i) / static_cast<double>(colours.inks - 1);
            canvas.polygon(star({x + 30, 52}, 13, 6, 10, 0.75), colours.ink(i));
            canvas.disk({x + 62, 52}, 9, colours.tint(colours.ink(i).ink));
        }
        draw_badge(canvas, random, colours);
        draw_banner(canvas, random, colours, random.between(318, 332));
        draw_small_print(canvas, random, colours);
        Sample sample = flat_sample(canvas, std::move(colours.all));
        const auto short_of = [](double share) { return share < least_share; };
        if (std::none_of(sample.shares.begin(), sample.shares.end(), short_of)) return sample;
    }
    throw std::logic_error("no label came out complete");
}

}  // namespace tincture::corpus
