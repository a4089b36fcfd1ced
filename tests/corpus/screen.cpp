// Screen captures of an invented program: flat panels, rules of one pixel, small text, a chart.
#include <array>
#include <stdexcept>

#include "tests/corpus/inks.h"
#include "tests/corpus/lettering.h"
#include "tests/corpus/pictures.h"

namespace tincture::corpus {
namespace {

constexpr int width = 560;
constexpr int height = 420;
constexpr double apart = 10;  // CIEDE2000: panels of programs lie closer than inks on a poster
constexpr double least_share = 0.002;

// What each ink is for; those from `first_series` on are for the chart.
enum Role : std::uint8_t { window, panel, text, quiet, accent, first_series };

Light grey_with_hue(Random& random, double level) {
    return {255 * level + random.between(-8, 8), 255 * level + random.between(-8, 8),
            255 * level + random.between(-8, 8)};
}

Rgb8 rounded(Light light) {
    return {to_byte(light.r), to_byte(light.g), to_byte(light.b)};
}

std::vector<Rgb8> choose(Random& random) {
    const bool dark = random.below(3) == 0;
    while (true) {
        const double base = dark ? random.between(0.08, 0.2) : random.between(0.95, 1);
        const double side =
            dark ? base + random.between(0.12, 0.2) : base - random.between(0.12, 0.25);
        std::vector<Rgb8> inks = {rounded(grey_with_hue(random, base))};
        const bool fits =
            add_if_apart(inks, rounded(grey_with_hue(random, side)), apart) &&
            add_if_apart(inks, rounded(grey_with_hue(random, dark ? 0.92 : 0.12)), apart) &&
            add_if_apart(inks, rounded(grey_with_hue(random, dark ? 0.6 : 0.5)), apart);
        if (!fits) continue;
        const std::size_t n = 6 + random.below(4);
        while (inks.size() < n) static_cast<void>(add_if_apart(inks, any_ink(random), apart));
        return inks;
    }
}

Lettering small_text(Random& random) {
    Lettering style;
    style.height = random.between(7.5, 9.5);
    style.thickness = random.between(1.1, 1.5);
    style.spacing = 0.35;
    return style;
}

void draw_sidebar(Canvas& canvas, Random& random, const Lettering& style, double right) {
    canvas.rectangle({0, 40, right, height}, Pen{panel});
    canvas.rectangle({right, 40, right + 1, height}, Pen{quiet});
    const std::size_t chosen = random.below(7);
    for (std::size_t i = 0; i < 7; ++i) {
        const double y = 58 + 30 * static_cast<double>(i);
        if (i == chosen) canvas.rounded_rectangle({8, y - 9, right - 8, y + 17}, 5, Pen{accent});
        canvas.rounded_rectangle({16, y - 1, 25, y + 8}, 2, Pen{i == chosen ? window : quiet});
        draw_words(canvas, random, {34, y}, right - 60, style, Pen{i == chosen ? window : text});
    }
}

void draw_bar_chart(Canvas& canvas, Random& random, const Lettering& style, const Box& box,
                    std::size_t series) {
    canvas.rounded_rectangle(box.inset(-1), 6, Pen{quiet});
    canvas.rounded_rectangle(box, 5, Pen{window});
    draw_words(canvas, random, {box.left + 12, box.top + 10}, 90, style, Pen{text});
    for (double y = box.bottom - 18; y > box.top + 34; y -= 28) {
        canvas.rectangle({box.left + 12, y, box.right - 12, y + 1}, Pen{panel});
    }
    std::size_t i = 0;
    for (double x = box.left + 18; x + 14 < box.right - 12; x += 19, ++i) {
        const double top =
            box.bottom - 18 - std::floor(random.between(0.25, 1) * (box.height() - 60));
        const std::size_t turn = i % (series + 1);
        const std::size_t ink = turn == 0 ? std::size_t{accent} : first_series + turn - 1;
        canvas.rectangle({x, top, x + 14, box.bottom - 18}, Pen{static_cast<std::uint8_t>(ink)});
    }
}

void draw_table(Canvas& canvas, Random& random, const Lettering& style, const Box& box) {
    canvas.rectangle({box.left, box.top, box.right, box.top + 22}, Pen{panel});
    int row = 0;
    for (double y = box.top; y + 22 <= box.bottom; y += 22, ++row) {
        for (int column = 0; column < 4; ++column) {
            draw_words(canvas, random, {box.left + 10 + column * box.width() / 4, y + 7},
                       random.between(20, box.width() / 4 - 20), style,
                       Pen{row == 0 || column == 0 ? text : quiet});
        }
        canvas.rectangle({box.left, y + 21, box.right, y + 22}, Pen{quiet});
    }
}

}  // namespace

Sample draw_screen(Random& random) {
    for (int tries = 0; tries < 100; ++tries) {
        std::vector<Rgb8> inks = choose(random);
        Canvas canvas(width, height, 5, window);
        const Lettering style = small_text(random);
        canvas.rectangle({0, 0, width, 40}, Pen{text});
        Lettering title = style;
        title.height = 13;
        title.thickness = 2;
        draw_words(canvas, random, {18, 14}, 130, title, Pen{window});
        for (double x = width - 30; x > width - 110; x -= 28) canvas.disk({x, 20}, 8, Pen{quiet});
        const double side = std::floor(random.between(110, 150));
        draw_sidebar(canvas, random, style, side);
        const double middle = std::floor((side + width) / 2);
        const std::size_t series = inks.size() - first_series;
        const double low = std::floor(random.between(200, 240));
        draw_bar_chart(canvas, random, style, {side + 18, 58, middle - 6, low}, series);
        draw_bar_chart(canvas, random, style, {middle + 10, 58, width - 16.0, low}, series);
        draw_table(canvas, random, style, {side + 18, low + 16, width - 16.0, 374});
        canvas.rounded_rectangle({width - 106.0, 384, width - 16.0, 408}, 5, Pen{accent});
        draw_words(canvas, random, {width - 92.0, 392}, 60, style, Pen{window});
        canvas.rounded_rectangle({width - 206.0, 384, width - 116.0, 408}, 5, Pen{quiet});
        draw_words(canvas, random, {width - 192.0, 392}, 60, style, Pen{window});
        Sample sample = flat_sample(canvas, std::move(inks));
        const auto short_of = [](double share) { return share < least_share; };
        if (std::none_of(sample.shares.begin(), sample.shares.end(), short_of)) return sample;
    }
    throw std::logic_error("no screen came out complete");
}

}  // namespace tincture::corpus
