// A poster in seven flat inks for an invented event in an invented harbour town. The moon is a
// paper lantern, and the lantern hangs from the T of its own name.
#include <array>
#include <cmath>
#include <span>
#include <string>
#include <vector>

#include "canvas.h"
#include "files.h"
#include "lettering.h"
#include "numbers.h"
#include "pictures.h"

namespace tincture::samples {
namespace {

constexpr int width = 1600;
constexpr int height = 2260;
constexpr double margin = 104;
constexpr double horizon = 1426;

enum Colour : std::uint8_t { navy, plum, vermilion, amber, cream, teal, aqua };

// A sail is lit by the sky, but dark before the lantern, whose ribs show through.
constexpr std::array<std::uint8_t, 7> under_sail{aqua,      aqua, plum, vermilion,
                                                 vermilion, aqua, aqua};
constexpr std::array<std::uint8_t, 7> far_sail{aqua, aqua, aqua, aqua, aqua, aqua, aqua};
constexpr std::array<std::uint8_t, 7> pennant{vermilion, vermilion, navy, navy, navy, navy, navy};
constexpr std::array<std::uint8_t, 7> under_seam{navy, navy, plum, vermilion, amber, teal, teal};
// What lies under a rib of the lantern.
constexpr std::array<std::uint8_t, 7> under_rib{navy, plum, plum, vermilion, amber, teal, aqua};
// The far town is dark before the glow and a glow before the dark.
constexpr std::array<std::uint8_t, 7> far_town{plum, navy, vermilion, amber, cream, teal, aqua};

struct Faces {
    Typeface heading{"RobotoCondensed-Bold"};
    Typeface medium{"RobotoCondensed-Medium"};
    Typeface light{"RobotoCondensed-Light"};
};

// Crests of a swell, pointed above and round below (a trochoid), closed at the foot of the sheet.
Outline swell(double crest, double amplitude, double length, double phase) {
    Line line;
    for (double t = -2 * pi; t <= 2 * pi * (width / length + 2); t += 0.04) {
        line.push_back({(t - 0.72 * sine(t) + phase) * length / (2 * pi),
                        crest + amplitude * (1 - cosine(t + 0.0)) / 2});
    }
    line.push_back({width + 2 * length, height + 10.0});
    line.push_back({-2 * length, height + 10.0});
    return polygon(std::move(line));
}

void draw_stars(Canvas& canvas) {
    Random random(77);
    constexpr int across = 9;
    constexpr int down = 6;
    for (int i = 0; i < across * down; ++i) {
        // One to a cell, so that they scatter without clumps.
        const double x = (i % across + random.between(0.15, 0.85)) * width / across;
        const double y = 500 + (i / across + random.between(0.15, 0.85)) * 780 / down;
        const double size = random.between(2.2, 4.8);
        canvas.fill_over(circle({x, y}, size), i % 4 == 0 ? aqua : cream, {navy});
    }
}

void draw_lantern(Canvas& canvas, Point centre, double radius, double cord_top) {
    canvas.fill(circle(centre, radius * 1.60), plum);
    draw_stars(canvas);
    const double tall = radius * 0.94;
    canvas.fill(stroke({{centre.x, cord_top}, {centre.x, centre.y - tall}}, 9), cream);

    canvas.fill(ellipse(centre, radius, tall), vermilion);
    canvas.fill_over(
        ellipse({centre.x - radius * 0.09, centre.y + radius * 0.02}, radius * 0.87, tall * 0.90),
        amber, {vermilion});
    canvas.fill_over(
        ellipse({centre.x - radius * 0.15, centre.y + radius * 0.10}, radius * 0.55, tall * 0.60),
        cream, {amber});
    for (int i = -6; i <= 6; ++i) {
        const double latitude = i * pi / 15.5;
        const double half = radius * cosine(latitude);
        const Point middle{centre.x, centre.y + tall * sine(latitude)};
        const Line front = arc(middle, half, half * 0.13, pi, 2 * pi);
        canvas.exchange(stroke(front, 5), under_rib);
    }
    const double top = centre.y - tall + 6;
    const double half = radius * 0.27;
    canvas.fill(rounded_rectangle(centre.x - half, top - 25, centre.x + half, top + 25, 10), navy);
    canvas.fill(rectangle(centre.x - half + 16, top - 4, centre.x + half - 16, top + 4), amber);
}

void draw_town(Canvas& canvas) {
    Random random(1918);
    std::vector<Point> windows;
    Outline roofs;
    const auto row_of_houses = [&](double from, double to) {
        for (double x = from; x < to;) {
            const double wide = std::floor(random.between(44, 92));
            const double wall = std::floor(random.between(44, 118));
            const double gable = std::floor(random.between(24, 62));
            roofs.add(polygon({{x, horizon},
                               {x, horizon - wall},
                               {x + wide / 2, horizon - wall - gable},
                               {x + wide, horizon - wall},
                               {x + wide, horizon}}));
            const int storeys = static_cast<int>(wall / 36);
            for (int k = 0; k < storeys; ++k) {
                for (double w = x + 14; w < x + wide - 18; w += 20) {
                    if (random.unit() < 0.42)
                        windows.push_back({w, horizon - wall + 12 + 34.0 * k});
                }
            }
            x += wide - 1;
        }
    };
    row_of_houses(-20, 330);
    row_of_houses(1336, 1640);
    // The light at the end of the mole.
    constexpr double x = 1248;
    constexpr double y = horizon;
    roofs.add(polygon({{x - 30, y}, {x - 18, y - 170}, {x + 18, y - 170}, {x + 30, y}}));
    roofs.add(rectangle(x - 26, y - 178, x + 26, y - 168));
    roofs.add(polygon({{x - 20, y - 212}, {x, y - 238}, {x + 20, y - 212}}));
    roofs.add(rectangle(x - 96, y - 16, x + 100, y + 2));
    canvas.exchange(roofs, far_town);
    canvas.fill(rectangle(x - 15, y - 212, x + 15, y - 178), amber);
    for (const Point& w : windows) canvas.fill(rectangle(w.x, w.y, w.x + 9, w.y + 14), amber);
}

// Broken light on the water below a lamp: lenses that narrow and part towards the viewer.
void draw_reflection(Canvas& canvas, double x, double top, double bottom, double wide) {
    Random random(static_cast<std::uint64_t>(x) * 31 + 5);
    int index = 0;
    for (double y = top; y < bottom; y += 19, ++index) {
        const double half = wide * (1 - 0.4 * (y - top) / (bottom - top));
        const std::uint8_t ink = index % 3 == 1 ? vermilion : amber;
        // One broad lens in the middle, a splinter to each side.
        const double core = half * random.between(0.5, 0.75);
        const double shift = random.between(-0.12, 0.12) * half;
        canvas.fill_over(ellipse({x + shift, y}, core, 6.5), ink, {teal});
        if (wide < 100) continue;
        canvas.fill_over(ellipse({x + shift * 1.5, y}, core * 0.5, 3), cream, {amber});
        for (const double side : {-1.0, 1.0}) {
            const double splinter = half * random.between(0.08, 0.2);
            const double away = core + splinter + half * random.between(0.05, 0.2);
            canvas.fill_over(ellipse({x + shift + side * away, y}, splinter, 5), ink, {teal});
        }
    }
}

void hang_lights(Canvas& canvas, const Line& line, int count, double size) {
    canvas.fill(stroke(line, 2.6), cream);
    for (int i = 1; i <= count; ++i) {
        const auto at =
            line.size() * static_cast<std::size_t>(i) / static_cast<std::size_t>(count + 1);
        const Point p{line[at].x, line[at].y + size};
        canvas.fill(ellipse(p, size, size * 1.15), i % 2 == 0 ? amber : vermilion);
        canvas.fill(ellipse(p, size * 0.45, size * 0.62), cream);
    }
}

Line join(Line a, const Line& b) {
    a.insert(a.end(), b.begin(), b.end());
    return a;
}

// A place on a boat: its mast foot stands at (x, y), bow to the left unless mirrored; scale 1 is
// the boat in front.
struct Berth {
    double x;
    double y;
    double scale;
    bool mirrored;

    [[nodiscard]] Point at(double dx, double dy) const {
        return {x + (mirrored ? -dx : dx) * scale, y + dy * scale};
    }
};

void draw_sails(Canvas& canvas, const Berth& b, std::span<const std::uint8_t> shine) {
    const Line leech = quadratic(b.at(9, -832), b.at(318, -480), b.at(420, -92));
    const Line foot = quadratic(b.at(420, -92), b.at(220, -56), b.at(9, -84));
    canvas.exchange(polygon(join(leech, foot)), shine);
    const Line luff = quadratic(b.at(-26, -790), b.at(-205, -420), b.at(-356, -84));
    const Line jib_foot = quadratic(b.at(-356, -84), b.at(-190, -30), b.at(-14, -92));
    const Line jib_leech = quadratic(b.at(-14, -92), b.at(-6, -400), b.at(-26, -790));
    canvas.exchange(polygon(join(join(luff, jib_foot), jib_leech)), shine);
    for (const double t : {0.27, 0.46}) {
        const Point to = leech[static_cast<std::size_t>(t * 48)];
        const Point from{b.at(9, 0).x, to.y - 56 * b.scale};
        const Point bend{(from.x + to.x) / 2, (from.y + to.y) / 2 + 14 * b.scale};
        canvas.exchange(stroke(quadratic(from, bend, to), 3), under_seam);
    }
}

void draw_hull(Canvas& canvas, const Berth& b) {
    canvas.fill(stroke({b.at(0, -880), b.at(0, 10)}, 8 * b.scale, 15 * b.scale), cream);
    canvas.fill(stroke({b.at(0, -66), b.at(436, -76)}, 10 * b.scale), cream);
    const Line deck = quadratic(b.at(-372, -52), b.at(-20, 22), b.at(400, -34));
    const Line keel = quadratic(b.at(352, 84), b.at(30, 112), b.at(-235, 84));
    const Outline side = polygon(join(deck, keel));
    canvas.fill(side, cream);
    const Line stripe_top = quadratic(b.at(-350, -28), b.at(-10, 44), b.at(392, -12));
    const Line stripe_foot = quadratic(b.at(386, 8), b.at(0, 64), b.at(-332, -8));
    canvas.fill(polygon(join(stripe_top, stripe_foot)), vermilion);
    canvas.exchange(polygon({b.at(0, -884), b.at(0, -838), b.at(-104, -856)}), pennant);
}

// Somebody at the helm, who holds a light on a rod over the stern.
void draw_helm(Canvas& canvas, const Berth& b) {
    const double s = b.scale;
    const Line back = quadratic(b.at(232, 10), b.at(228, -74), b.at(262, -78));
    const Line front = quadratic(b.at(268, -78), b.at(300, -70), b.at(298, 10));
    canvas.fill(polygon(join(back, front)), plum);
    canvas.fill(circle(b.at(264, -96), 19 * s), amber);
    canvas.fill(polygon(join(arc(b.at(264, -100), 21 * s, 20 * s, pi, 2 * pi), {})), navy);
    canvas.fill(stroke({b.at(236, -99), b.at(288, -99)}, 5 * s), navy);
    canvas.fill(stroke(quadratic(b.at(304, -50), b.at(410, -106), b.at(470, -204)), 5 * s), cream);
    canvas.fill(stroke({b.at(270, -56), b.at(306, -50)}, 15 * s), plum);
    canvas.fill(stroke({b.at(470, -204), b.at(470, -170)}, 2.5), cream);
    canvas.fill(ellipse(b.at(470, -138), 30 * s, 34 * s), vermilion);
    canvas.fill(ellipse(b.at(467, -136), 22 * s, 27 * s), amber);
    canvas.fill(ellipse(b.at(465, -133), 11 * s, 16 * s), cream);
}

void draw_far_boat(Canvas& canvas, const Berth& b) {
    draw_sails(canvas, b, far_sail);
    draw_hull(canvas, b);
    canvas.fill(stroke({b.at(396, -40), b.at(470, -150), b.at(470, -118)}, 2.5), cream);
    canvas.fill(circle(b.at(470, -96), 11), amber);
    canvas.fill(circle(b.at(470, -96), 5), cream);
}

void draw_floating_light(Canvas& canvas, Point p, double s) {
    const auto at = [&](double dx, double dy) { return Point{p.x + dx * s, p.y + dy * s}; };
    for (int i = 0; i < 3; ++i) {
        canvas.fill_over(ellipse(at(i % 2 * 6 - 3, 18 + 13.0 * i), (34 - 8 * i) * s, 4.5 * s),
                         amber, {teal, plum, navy});
    }
    canvas.fill(polygon({at(-30, -58), at(30, -58), at(24, 2), at(-24, 2)}), vermilion);
    canvas.fill(polygon({at(-30, -58), at(12, -58), at(9, 2), at(-24, 2)}), amber);
    canvas.fill(ellipse(at(-8, -22), 9 * s, 17 * s), cream);
    canvas.fill(polygon({at(-42, 0), at(42, 0), at(30, 13), at(-30, 13)}), navy);
}

void draw_water(Canvas& canvas, double lamp_x) {
    canvas.fill(rectangle(0, horizon, width, height), teal);
    draw_reflection(canvas, lamp_x, horizon + 16, 1620, 360);
    for (const double x : {60.0, 1556.0}) {
        draw_reflection(canvas, x, horizon + 14, horizon + 90, 20);
    }
    draw_reflection(canvas, 1248, horizon + 14, horizon + 130, 40);
    Random random(404);
    for (int i = 0; i < 34; ++i) {
        const double x = random.between(-40, width);
        const double y = random.between(horizon + 12, 1580);
        const double half_width = random.between(24, 80);
        const double half_height = random.between(2.2, 4.0);
        canvas.fill_over(ellipse({x, y}, half_width, half_height), aqua, {teal});
    }
}

void draw_front_waves(Canvas& canvas) {
    canvas.fill(swell(1562, 40, 266, 0.6), aqua);
    canvas.fill(swell(1574, 40, 266, 0.6), teal);
    draw_floating_light(canvas, {236, 1612}, 1.0);
    draw_floating_light(canvas, {1330, 1606}, 1.1);
    canvas.fill(swell(1622, 46, 320, 2.6), aqua);
    canvas.fill(swell(1636, 46, 320, 2.6), plum);
    draw_floating_light(canvas, {1082, 1672}, 1.3);
    canvas.fill(swell(1688, 50, 400, 4.6), aqua);
    canvas.fill(swell(1704, 50, 400, 4.6), navy);
}

void write_small_print(Canvas& canvas, const Faces& faces) {
    const auto put = [&](const Typeface& face, const char* text, double x, double y, double size,
                         Align align, std::uint8_t ink, double tracking) {
        canvas.fill(face.text(text, {x, y}, size, align, tracking), ink);
    };
    const double right = width - margin;
    const double middle = width / 2.0;
    put(faces.medium, "SKELLOMERE HARBOUR", margin, 140, 40, Align::left, amber, 130);
    put(faces.medium, "SATURDAY 14 SEPTEMBER", right, 140, 40, Align::right, amber, 130);

    canvas.fill(rectangle(margin, 2072, right, 2075), vermilion);
    const std::array<std::array<const char*, 2>, 3> lines{{
        {"Start at nightfall, North Mole", "Brass band from seven"},
        {"Forty boats, six hundred lights", "Three slow laps, no engines"},
        {"Free for all who bring a lantern", "Last ferry home at one"},
    }};
    const std::array<double, 3> x{margin, middle, right};
    const std::array<Align, 3> align{Align::left, Align::centre, Align::right};
    for (std::size_t i = 0; i < 3; ++i) {
        put(faces.medium, lines[i][0], x[i], 2122, 33, align[i], cream, 10);
        put(faces.light, lines[i][1], x[i], 2163, 33, align[i], aqua, 10);
    }
}

}  // namespace

void draw_poster(const std::string& path) {
    Canvas canvas(width, height, 5,
                  {{0x12, 0x21, 0x3F},
                   {0x5E, 0x2A, 0x55},
                   {0xE3, 0x4F, 0x2D},
                   {0xF8, 0xB0, 0x35},
                   {0xFB, 0xF1, 0xD8},
                   {0x15, 0x6F, 0x7C},
                   {0x86, 0xC8, 0xBC}},
                  navy);
    const Faces faces;
    const double measure = width - 2 * margin;
    const double above = faces.heading.size_to_fill("LANTERN", measure);
    const double base = 186 + faces.heading.cap_height(above);
    // The lantern hangs from the stem of the T.
    const double stem =
        margin + faces.heading.width("LANT", above) - faces.heading.width("T", above) / 2;
    draw_lantern(canvas, {stem, 992}, 398, base - 8);
    draw_town(canvas);
    draw_water(canvas, stem);
    draw_far_boat(canvas, {232, 1488, 0.30, true});
    draw_far_boat(canvas, {1408, 1504, 0.34, false});
    const Berth front{stem - 96, 1548, 1.0, false};
    draw_sails(canvas, front, under_sail);
    hang_lights(canvas, quadratic(front.at(0, -880), front.at(-240, -420), front.at(-372, -50)), 9,
                12);
    draw_helm(canvas, front);
    draw_hull(canvas, front);
    draw_front_waves(canvas);

    canvas.fill(faces.heading.text("LANTERN", {margin, base}, above), cream);
    const double below = faces.heading.size_to_fill("REGATTA", measure);
    canvas.fill(faces.heading.text("REGATTA", {margin, 2038}, below), cream);
    write_small_print(canvas, faces);
    write_png(path, width, height, canvas.rgba(), false, 200);
}

}  // namespace tincture::samples
