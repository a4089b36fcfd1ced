// A jar label in three inks, tints of two of them and bare stock, die-cut with rounded corners, for
// an invented marmalade. The berry stands where the sun would rise.
#include <array>
#include <cmath>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "canvas.h"
#include "files.h"
#include "lettering.h"
#include "numbers.h"
#include "pictures.h"

namespace tincture::samples {
namespace {

constexpr int width = 1500;
constexpr int height = 1000;
constexpr double panel_left = 416;
constexpr double panel_right = 1084;
constexpr Point sun{750, 412};
constexpr double sun_radius = 168;

enum Colour : std::uint8_t { stock, green, green60, green30, orange, orange60, orange30, red };

struct Faces {
    Typeface black{"Roboto-Black"};
    Typeface heading{"RobotoCondensed-Bold"};
    Typeface medium{"RobotoCondensed-Medium"};
    Typeface regular{"RobotoCondensed-Regular"};
    Typeface light{"RobotoCondensed-Light"};
    Typeface italic{"Roboto-LightItalic"};
    Typeface emphasis{"Roboto-MediumItalic"};
};

// Breaks the text into lines no wider than `measure`; returns the base line of the last.
double paragraph(Canvas& canvas, const Typeface& face, std::string_view text, Point at, double size,
                 double measure, double leading) {
    std::string line;
    const auto flush = [&] {
        canvas.fill(face.text(line, at, size), green);
        line.clear();
    };
    while (!text.empty()) {
        const std::size_t end = std::min(text.find(' '), text.size());
        const std::string word(text.substr(0, end));
        text.remove_prefix(std::min(end + 1, text.size()));
        if (!line.empty() && face.width(line + " " + word, size) > measure) {
            flush();
            at.y += leading;
        }
        line += (line.empty() ? "" : " ") + word;
    }
    flush();
    return at.y;
}

void draw_rays(Canvas& canvas) {
    constexpr int count = 56;
    for (int i = 0; i < count; ++i) {
        const double angle = 2 * pi * (i + 0.5) / count;
        const double half = i % 2 == 0 ? 0.0105 : 0.0055;
        const double from = i % 2 == 0 ? 236 : 262;
        const auto at = [&](double radius, double turn) {
            return Point{sun.x + radius * cosine(turn), sun.y + radius * sine(turn)};
        };
        canvas.fill_over(polygon({at(from, angle - half), at(900, angle - half * 1.7),
                                  at(900, angle + half * 1.7), at(from, angle + half)}),
                         green60, {green});
    }
}

void draw_sun(Canvas& canvas) {
    canvas.fill(circle(sun, sun_radius + 30), green);
    canvas.fill(ring(sun, sun_radius + 22, sun_radius + 20), orange60);
    canvas.fill(circle(sun, sun_radius), orange);
    canvas.fill_over(circle({sun.x - 22, sun.y - 20}, sun_radius * 0.80), orange60, {orange});
    canvas.fill_over(circle({sun.x - 14, sun.y - 12}, sun_radius * 0.80), orange, {orange60});
    canvas.fill(stroke(arc({sun.x - 6, sun.y - 4}, 126, 126, pi * 1.04, pi * 1.36), 6, 22),
                orange30);
    canvas.fill(circle({sun.x - 6 + 126 * cosine(pi * 1.46), sun.y - 4 + 126 * sine(pi * 1.46)}, 9),
                orange30);
    for (int i = 0; i < 4; ++i) {
        const double radius = 146 - 13.0 * i;
        const double reach = 0.16 - 0.035 * i;
        canvas.fill(stroke(arc(sun, radius, radius, pi * (0.25 - reach), pi * (0.25 + reach)), 2.2),
                    orange60);
    }
    // The dark star where the flower was.
    for (int i = 0; i < 6; ++i) {
        const double angle = 2 * pi * i / 6 + 0.3;
        canvas.fill(stroke({{sun.x + 40, sun.y + 34},
                            {sun.x + 40 + 18 * cosine(angle), sun.y + 34 + 18 * sine(angle)}},
                           7, 2),
                    green);
    }
}

void draw_leaf(Canvas& canvas, Point foot, double angle, double length, double half_width,
               std::uint8_t ink) {
    const auto at = [&](double along, double across) {
        return Point{foot.x + along * cosine(angle) - across * sine(angle),
                     foot.y + along * sine(angle) + across * cosine(angle)};
    };
    Line edge = quadratic(foot, at(length * 0.45, half_width * 2), at(length, 0));
    const Line back = quadratic(at(length, 0), at(length * 0.5, -half_width * 2), foot);
    edge.insert(edge.end(), back.begin(), back.end());
    canvas.fill(polygon(std::move(edge)), ink);
    canvas.fill(stroke({at(length * 0.08, 0), at(length * 0.86, 0)}, 2.4, 1.2),
                ink == green30 ? green : green30);
}

void draw_berry(Canvas& canvas, Point centre, double radius) {
    canvas.fill(circle(centre, radius + 2.5), green);
    canvas.fill(circle(centre, radius), orange);
    canvas.fill(
        ellipse({centre.x - radius * 0.28, centre.y - radius * 0.30}, radius * 0.42, radius * 0.36),
        orange60);
    canvas.fill(circle({centre.x - radius * 0.36, centre.y - radius * 0.38}, radius * 0.16), stock);
    canvas.fill(circle({centre.x + radius * 0.42, centre.y + radius * 0.46}, radius * 0.13), green);
}

// One half of the wreath; `side` is -1 on the left, 1 on the right.
void draw_spray(Canvas& canvas, double side) {
    const auto at = [&](double dx, double dy) { return Point{sun.x + side * dx, sun.y + dy}; };
    const std::array<Point, 6> spine{at(6, 262),  at(96, 244),  at(190, 176),
                                     at(242, 70), at(248, -52), at(206, -156)};
    const Line stem = through(spine);
    const auto direction = [&](std::size_t i) {
        const Point& a = stem[i - 1];
        const Point& b = stem[i];
        return angle_of(b.y - a.y, b.x - a.x);
    };
    canvas.fill(stroke(stem, 9, 3), orange60);
    for (std::size_t i = 4; i < stem.size(); i += 4) {
        const double length = 118 - 0.44 * static_cast<double>(i);
        const bool outward = i / 4 % 2 == 0;
        const double turn = (outward ? 0.74 : -0.62) * -side;
        const std::array<std::uint8_t, 4> inks{green30, stock, green60, green30};
        const double reach = outward ? length : length * 0.66;
        draw_leaf(canvas, stem[i], direction(i) + turn, reach, reach * 0.10, inks[i / 4 % 4]);
    }
    draw_leaf(canvas, stem.back(), direction(stem.size() - 1), 70, 8, stock);
    Random random(18);
    int index = 0;
    for (std::size_t i = 9; i + 4 < stem.size(); i += 5, ++index) {
        const double radius = 21 - 0.075 * static_cast<double>(i);
        const double lift = (index % 2 == 0 ? -side : side) * random.between(9, 17);
        const double angle = direction(i);
        draw_berry(canvas, {stem[i].x - lift * sine(angle), stem[i].y + lift * cosine(angle)},
                   radius);
    }
}

// Two dunes, the nearer one with contour lines, above the solid ground of the lettering.
void draw_dunes(Canvas& canvas) {
    const auto dune = [](std::array<Point, 5> crest) {
        Line line = through(crest);
        line.push_back({panel_right, height});
        line.push_back({panel_left, height});
        return polygon(std::move(line));
    };
    const auto lowered = [](double by) {
        return std::array<Point, 5>{{{panel_left, 640 + by},
                                     {560, 612 + 1.2 * by},
                                     {760, 640 + by},
                                     {930, 640 + 0.9 * by},
                                     {panel_right, 606 + by}}};
    };
    canvas.fill(dune(lowered(0)), green60);
    for (const double by : {14.0, 28.0, 42.0}) {
        canvas.fill_over(stroke(through(lowered(by)), 2), green30, {green60});
    }
    canvas.fill(dune({{{panel_left, 706}, {560, 690}, {750, 676}, {920, 700}, {panel_right, 668}}}),
                green);
}

// Interlaced waves in fine lines beside the panel.
void draw_braid(Canvas& canvas, double x) {
    canvas.fill(rectangle(x - 13, 0, x + 13, height), stock);
    for (int strand = 0; strand < 4; ++strand) {
        Line line;
        for (double y = -4; y <= height + 4; y += 3) {
            line.push_back({x + 8.5 * sine(2 * pi * (y / 64 + strand / 4.0)), y});
        }
        canvas.fill(stroke(line, 1.6), strand % 2 == 0 ? orange : green60);
    }
}

void draw_panel(Canvas& canvas, const Faces& faces) {
    canvas.fill(rectangle(panel_left, 0, panel_right, height), green);
    draw_rays(canvas);
    draw_dunes(canvas);
    draw_sun(canvas);
    draw_spray(canvas, -1);
    draw_spray(canvas, 1);
    canvas.fill(rectangle(panel_left, 0, panel_right, 106), green);
    canvas.fill(rectangle(panel_left, 106, panel_right, 108.5), orange60);
    canvas.fill(faces.medium.text("FENNIMOOR ORCHARD KITCHEN", {sun.x, 82}, 34, Align::centre, 170),
                orange30);

    const double left = panel_left + 42;
    const double measure = panel_right - panel_left - 84;
    const double size = faces.black.size_to_fill("BUCKTHORN", measure);
    const double base = 866;
    const double above = base - faces.black.cap_height(size) - 21;
    canvas.fill(faces.black.text("BUCKTHORN", {left, base}, size), stock);
    canvas.fill(faces.black.text("SEA", {left, above}, size * 0.66), orange);
    const double after = left + faces.black.width("SEA", size * 0.66) + 22;
    canvas.fill(faces.light.text("Cooked in copper,", {after, above - 29}, 25), orange30);
    canvas.fill(faces.light.text("filled the same evening", {after, above}, 25), orange30);
    const double fill = faces.italic.size_to_fill("marmalade with apple", measure);
    canvas.fill(faces.italic.text("marmalade with apple", {left, base + 64}, fill), orange30);
    draw_braid(canvas, panel_left - 13);
    draw_braid(canvas, panel_right + 13);
}

void draw_badge(Canvas& canvas, const Faces& faces, Point centre) {
    const double radius = 112;
    Outline scallops = circle(centre, radius);
    for (int i = 0; i < 40; ++i) {
        const double angle = 2 * pi * i / 40;
        scallops.add(
            circle({centre.x + radius * cosine(angle), centre.y + radius * sine(angle)}, 9));
    }
    canvas.fill(circle(centre, radius + 17), stock);
    canvas.fill(scallops, red);
    canvas.fill(ring(centre, radius - 5, radius - 7), stock);
    canvas.fill(ring(centre, radius - 39, radius - 40.5), stock);
    canvas.fill(faces.heading.around("STIRRED BY HAND", centre, radius - 30, -pi / 2, 25, 70),
                stock);
    canvas.fill(faces.heading.around("SMALL BATCH", centre, radius - 13, pi / 2, 25, 70, true),
                stock);
    for (const double side : {-1.0, 1.0}) {
        canvas.fill(circle({centre.x + side * (radius - 22), centre.y + 4}, 4), stock);
    }
    canvas.fill(faces.black.text("4", {centre.x + 22, centre.y + 34}, 96, Align::centre), stock);
    canvas.fill(faces.medium.text("No", {centre.x - 26, centre.y - 8}, 36, Align::centre), stock);
    canvas.fill(rectangle(centre.x - 43, centre.y + 2, centre.x - 9, centre.y + 5), stock);
}

void write_story(Canvas& canvas, const Faces& faces, double left, double measure) {
    canvas.fill(faces.heading.text("FROM THE DUNES", {left, 118}, 37, Align::left, 60), green);
    canvas.fill(rectangle(left, 136, left + 56, 141), orange);
    double y =
        paragraph(canvas, faces.regular,
                  "Sea buckthorn grows where the sand west of Fennimoor meets the wind, which "
                  "does most of the pruning. We pick it in September, in gloves, and cook it "
                  "the same evening.",
                  {left, 184}, 27, measure, 36);
    y = paragraph(canvas, faces.regular,
                  "The apples are windfalls. They bring the set, so that no pectin has to.",
                  {left, y + 54}, 27, measure, 36);
    canvas.fill(faces.emphasis.text("Good on toast,", {left, y + 76}, 33), orange);
    canvas.fill(faces.emphasis.text("better with cheese.", {left, y + 118}, 33), orange);

    const double right = left + measure;
    canvas.fill(rounded_rectangle(left, 770, right, 922, 14), orange30);
    const std::array<const char*, 3> fields{"Picked", "Cooked", "Jar"};
    for (std::size_t i = 0; i < fields.size(); ++i) {
        const double base = 814 + 42 * static_cast<double>(i);
        canvas.fill(faces.medium.text(fields[i], {left + 18, base}, 25), green);
        canvas.fill(rectangle(left + 100, base + 2, right - 18, base + 3.5), green60);
    }
}

void write_contents(Canvas& canvas, const Faces& faces, double left, double measure) {
    const double right = left + measure;
    canvas.fill(faces.heading.text("INGREDIENTS", {left, 118}, 37, Align::left, 60), green);
    canvas.fill(rectangle(left, 136, left + 56, 141), orange);
    const double y = paragraph(canvas, faces.regular,
                               "Sea buckthorn 48 %, apples, cane sugar, lemon juice, vanilla. Keep "
                               "cool once opened and eat within four weeks.",
                               {left, 184}, 27, measure, 36);
    const std::array<std::pair<const char*, const char*>, 5> rows{{{"100 g contain", ""},
                                                                   {"Energy", "812 kJ"},
                                                                   {"Fat", "1.9 g"},
                                                                   {"Carbohydrate", "43 g"},
                                                                   {"Salt", "0.02 g"}}};
    double base = y + 62;
    for (const auto& [name, amount] : rows) {
        const bool heading = base == y + 62;
        const Typeface& face = heading ? faces.medium : faces.light;
        canvas.fill(face.text(name, {left, base}, 26), green);
        if (!heading) canvas.fill(face.text(amount, {right, base}, 26, Align::right), green);
        canvas.fill(rectangle(left, base + 10, right, base + (heading ? 13 : 11.5)), green60);
        base += 39;
    }
    canvas.fill(faces.light.text("320 g", {right, 922}, 76, Align::right), green);
}

}  // namespace

void draw_label(const std::string& path) {
    const Ink paper{0xFC, 0xF6, 0xE8};
    const Ink leaf{0x10, 0x48, 0x38};
    const Ink fruit{0xF0, 0x7D, 0x1A};
    const Ink seal{0xAE, 0x23, 0x36};
    Canvas canvas(width, height, 6,
                  {paper, leaf, tint(leaf, paper, 60), tint(leaf, paper, 30), fruit,
                   tint(fruit, paper, 60), tint(fruit, paper, 30), seal},
                  stock);
    const Faces faces;
    draw_panel(canvas, faces);
    write_story(canvas, faces, 72, 290);
    write_contents(canvas, faces, 1138, 290);
    draw_badge(canvas, faces, {1160, 700});

    const Outline die = rounded_rectangle(12, 12, width - 12, height - 12, 64);
    const Outline frame = rounded_rectangle(32, 32, width - 32, height - 32, 46);
    const Outline inner = rounded_rectangle(35, 35, width - 35, height - 35, 43);
    canvas.fill_over(Outline(frame).add_reversed(inner), green60, {stock});
    canvas.fill_over(Outline(frame).add_reversed(inner), orange60, {green});
    canvas.keep_only(die);
    write_png(path, width, height, canvas.rgba(), true, 300);
}

}  // namespace tincture::samples
