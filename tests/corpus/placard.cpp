// Posters by another hand: other shapes, sizes and layouts, exact areas and edges mixed as light.
#include <array>
#include <stdexcept>

#include "tests/corpus/inks.h"
#include "tests/corpus/outlines.h"
#include "tests/corpus/pictures.h"

namespace tincture::corpus {
namespace {

constexpr double apart = 14;            // CIEDE2000 between two inks
constexpr double least_share = 0.002;   // an ink counts from here
constexpr double least_solid = 0.0008;  // of an ink, more than a stroke wide

struct Placard {
    Random& random;
    std::vector<Rgb8> inks;
    std::vector<std::uint8_t> turns;  // inks in the order they come next
    Sheet sheet;
    double w, h;
    std::size_t turn = 1;  // the first is the ground
    std::uint16_t last_stroke = 0;

    std::uint8_t next() { return turns[turn++ % turns.size()]; }
    std::uint8_t next_other_than(std::uint8_t ink) {
        const std::uint8_t found = next();
        return found == ink ? next() : found;
    }
    [[nodiscard]] double least() const { return std::min(w, h); }
    Point anywhere() { return {w * random.between(0.06, 0.94), h * random.between(0.06, 0.94)}; }
    bool one_in(std::size_t n) { return random.below(n) == 0; }
    int some(int low, int high) {
        return low + static_cast<int>(random.below(static_cast<std::size_t>(high - low + 1)));
    }
};

// Grounds: each fills the sheet to its borders.

void ground_hills(Placard& p) {
    if (p.one_in(2)) {
        const Point sun{p.w * p.random.between(0.15, 0.85), p.h * p.random.between(0.15, 0.4)};
        const double radius = p.least() * p.random.between(0.08, 0.16);
        if (p.one_in(2)) {
            const int rays = p.some(9, 20);
            p.sheet.paint(rays_shape(sun, 2 * (p.w + p.h), rays, p.random.unit()), p.next());
        }
        p.sheet.paint(disc_shape(sun, radius), p.next());
    }
    const int hills = p.some(2, 6);
    for (int i = 0; i < hills; ++i) {
        const double foot = p.h * (0.38 + 0.55 * i / hills);
        const double high = p.random.between(0.02, 0.08) * p.h;
        const Wave one{foot, high, p.w * p.random.between(0.5, 1.6), p.random.unit()};
        const Wave two{0, high * 0.35, p.w * p.random.between(0.12, 0.4), p.random.unit()};
        p.sheet.paint(hill_shape(one, two, p.w, p.h), p.next());
    }
}

void ground_rings(Placard& p) {
    const Point centre = p.anywhere();
    const double step = p.least() * p.random.between(0.045, 0.12);
    const std::array<std::uint8_t, 3> inks = {p.next(), p.next(), p.next()};
    const std::size_t used = 2 + p.random.below(2);
    for (int i = static_cast<int>((p.w + p.h) / step); i > 0; --i) {
        p.sheet.paint(disc_shape(centre, step * i, 180), inks[static_cast<std::size_t>(i) % used]);
    }
}

void ground_board(Placard& p) {
    const double size = p.least() * p.random.between(0.07, 0.2);
    const double turns = p.one_in(2) ? 0 : p.random.between(0.02, 0.23);
    const double c = cosine_of_turn(turns) * size;
    const double s = sine_of_turn(turns) * size;
    const int reach = static_cast<int>((p.w + p.h) / size) + 1;
    Shape one;
    Shape two;
    const bool third = p.one_in(2);
    for (int j = -reach; j < reach; ++j) {
        for (int i = -reach; i < reach; ++i) {
            if ((i + j) % 2 != 0) continue;
            const Point at{p.w / 2 + c * i - s * j, p.h / 2 + s * i + c * j};
            Shape& shape = third && j % 2 == 0 ? two : one;
            shape.push_back(
                {at, {at.x + c, at.y + s}, {at.x + c - s, at.y + s + c}, {at.x - s, at.y + c}});
        }
    }
    p.sheet.paint(one, p.next());
    if (third) p.sheet.paint(two, p.next());
}

void ground_bricks(Placard& p) {
    const double high = p.h / p.some(7, 16);
    const double wide = high * p.random.between(1.6, 2.8);
    const double gap = p.random.between(3, 9);
    std::vector<std::uint8_t> inks = {p.next(), p.next()};
    if (p.one_in(2)) inks.push_back(p.next());
    int row = 0;
    for (double y = 0; y < p.h; y += high, ++row) {
        for (double x = row % 2 == 0 ? 0 : -wide / 2; x < p.w; x += wide) {
            const Box brick{x, y, x + wide - gap, y + high - gap};
            p.sheet.paint(box_shape(brick), inks[p.random.below(inks.size())]);
        }
    }
}

void ground_rays(Placard& p) {
    const Point centre = p.anywhere();
    const double start = p.random.unit();
    const int rays = p.some(6, 18);
    p.sheet.paint(rays_shape(centre, 2 * (p.w + p.h), rays, start), p.next());
    if (p.one_in(2)) p.sheet.paint(disc_shape(centre, p.least() * 0.2), p.next());
}

void ground_scales(Placard& p) {
    const double radius = p.least() * p.random.between(0.06, 0.13);
    const std::array<std::uint8_t, 3> inks = {p.next(), p.next(), p.next()};
    const bool hollow = p.one_in(2);
    int row = 0;
    for (double y = 0; y < p.h + radius; y += radius / 2, ++row) {
        for (double x = row % 2 == 0 ? 0 : radius; x < p.w + radius; x += 2 * radius) {
            const Point centre{x, p.h - y};
            p.sheet.paint(disc_shape(centre, radius), inks[static_cast<std::size_t>(row % 2)]);
            if (hollow) p.sheet.paint(disc_shape(centre, radius * 0.5), inks[2]);
        }
    }
}

void ground_slabs(Placard& p) {
    const int slabs = p.some(1, 4);
    for (int i = 0; i < slabs; ++i) {
        // Over all that lies to the right of a slanting edge, one after the other.
        const double at = p.w * (0.2 + 0.7 * i / slabs + p.random.between(0, 0.1));
        const double lean = p.w * p.random.between(-0.25, 0.25);
        const double far = 2 * p.w;
        p.sheet.paint({{{at - lean, 0}, {far, 0}, {far, p.h}, {at + lean, p.h}}}, p.next());
    }
}

// Motifs: each is about `size` large around a place, in an ink that differs from what lies there.

void motif_sprig(Placard& p, Point at, double size, std::uint8_t ink) {
    const double turns = p.random.unit();
    const int pairs = p.some(2, 5);
    Shape leaves;
    for (int i = 0; i < pairs; ++i) {
        const Point stem = around(at, size * i / pairs, turns);
        const double length = size * (0.55 - 0.06 * i);
        add_to(leaves, leaf_shape(stem, length, length * 0.4, turns + 0.12));
        add_to(leaves, leaf_shape(stem, length, length * 0.4, turns - 0.12));
    }
    add_to(leaves, leaf_shape(around(at, size * 0.9, turns), size * 0.4, size * 0.18, turns));
    p.sheet.paint(leaves, ink);
    const std::array<Point, 2> stalk = {around(at, -size * 0.5, turns), around(at, size, turns)};
    const std::array<double, 2> widths = {size * 0.08 + 2, 2.5};
    p.sheet.paint(brush_shape(stalk, widths), p.one_in(2) ? ink : p.next());
}

void motif_flower(Placard& p, Point at, double size, std::uint8_t ink) {
    const int petals = p.some(5, 9);
    const double turns = p.random.unit();
    for (int i = 0; i < petals; ++i) {
        const double to = turns + static_cast<double>(i) / petals;
        p.sheet.paint(leaf_shape(at, size * 0.75, size * 1.9 / petals, to), ink);
    }
    p.sheet.paint(disc_shape(at, size * 0.2), p.next_other_than(ink));
}

void motif_script(Placard& p, Point at, double size, std::uint8_t ink) {
    const double radius = size * p.random.between(0.2, 0.32);
    const double advance = radius * p.random.between(2.2, 3.2);  // a loop
    const int steps = 40 * p.some(2, 4);
    const double full = std::max(5.0, radius * p.random.between(0.25, 0.45));
    const double phase = p.random.unit();
    std::vector<Point> points;
    std::vector<double> widths;
    for (int i = 0; i <= steps; ++i) {
        const double loop = i / 40.0;
        const Point centre{at.x - size + advance * loop, at.y};
        points.push_back({centre.x + radius * cosine_of_turn(loop + phase),
                          centre.y + 1.4 * radius * sine_of_turn(loop + phase)});
        widths.push_back(full * (0.65 + 0.35 * sine_of_turn(2 * loop)));
    }
    p.sheet.paint(brush_shape(points, widths), ink);
}

void motif_bunting(Placard& p, Point at, double size, std::uint8_t ink) {
    const double step = std::max(24.0, size * 0.3);
    const std::uint8_t other = p.next_other_than(ink);
    int i = 0;
    for (double x = 0; x < p.w; x += step, ++i) {
        const double y = at.y + size * 0.2 * sine_of_turn(x / p.w / 2);
        p.sheet.paint({{{x + 2, y}, {x + step - 2, y}, {x + step / 2, y + step}}},
                      i % 2 == 0 ? ink : other);
    }
}

void motif_comb(Placard& p, Point at, double size, std::uint8_t ink) {
    const double cell = size * 0.26;
    const std::uint8_t other = p.next_other_than(ink);
    for (int i = 0; i < 6; ++i) {
        p.sheet.paint(disc_shape(around(at, cell * 1.85, i / 6.0), cell, 6, 1.0 / 12),
                      i % 3 == 0 ? other : ink);
    }
    p.sheet.paint(disc_shape(at, cell, 6, 1.0 / 12), ink);
}

void motif_round(Placard& p, Point at, double size, std::uint8_t ink) {
    const double turns = p.random.unit();
    switch (p.random.below(4)) {
        case 0:
            p.sheet.paint(crescent_shape(at, size * 0.5, turns), ink);
            break;
        case 1:
            p.sheet.paint(cog_shape(at, size * 0.5, p.some(7, 14), turns), ink);
            break;
        case 2:
            p.sheet.paint(ring_shape(at, size * 0.5, size * 0.33), ink);
            p.sheet.paint(disc_shape(at, size * 0.2), p.next());
            break;
        default:
            p.sheet.paint(disc_shape(at, size * 0.5, p.some(3, 8), turns), ink);
    }
}

using Ground = void (*)(Placard&);
constexpr std::array<Ground, 7> grounds = {ground_hills, ground_rings,  ground_board, ground_bricks,
                                           ground_rays,  ground_scales, ground_slabs};
using Motif = void (*)(Placard&, Point, double, std::uint8_t);
constexpr std::array<Motif, 6> motifs = {motif_sprig,   motif_flower, motif_script,
                                         motif_bunting, motif_comb,   motif_round};

// A line of words in solid letters, now and then with a shadow.
void add_words(Placard& p, Point corner, double height, double width) {
    Shape words;
    double x = 0;
    while (x < width) {
        const auto letter = static_cast<int>(p.random.below(10));
        x += add_letter(words, letter, {corner.x + x, corner.y}, height);
        x += height * (p.one_in(5) ? 0.6 : 0.14);
    }
    const std::uint8_t ink = p.next_other_than(p.sheet.ink_at(corner));
    if (height > 30 && p.one_in(3)) {
        Shape shadow = words;
        for (Outline& outline : shadow) {
            for (Point& point : outline) point = {point.x + height * 0.09, point.y + height * 0.09};
        }
        p.sheet.paint(shadow, p.next_other_than(ink));
    }
    p.sheet.paint(words, ink);
}

void add_lettering(Placard& p) {
    const Point corner{p.w * p.random.between(0.05, 0.2), p.h * p.random.between(0.06, 0.75)};
    const double height = p.random.between(28, 84);
    const double width = (p.w - corner.x) * p.random.between(0.5, 0.8);
    if (p.one_in(2)) {
        const Box plate{corner.x - 14, corner.y - 12, corner.x + width + height,
                        corner.y + height * 1.6 + 40};
        p.sheet.paint(box_shape(plate), p.next_other_than(p.sheet.ink_at(corner)));
    }
    add_words(p, corner, height, width);
    add_words(p, {corner.x, corner.y + height + 14}, p.random.between(13, 26), width);
}

void add_border(Placard& p) {
    const double thickness = p.random.between(6, 22);
    const double inset = p.one_in(2) ? 0 : p.random.between(6, 18);
    const Box all = Box{0, 0, p.w, p.h}.inset(inset);
    p.sheet.paint(frame_shape(all, thickness), p.next());
    if (!p.one_in(2)) return;
    const std::uint8_t ink = p.next();
    const Box middle = all.inset(thickness / 2);
    for (const Point corner :
         {Point{middle.left, middle.top}, Point{middle.right, middle.top},
          Point{middle.right, middle.bottom}, Point{middle.left, middle.bottom}}) {
        p.sheet.paint(disc_shape(corner, thickness, 4, 0.125), ink);
    }
}

// A wavy line of two pixels whose survival is measured, where as few inks as possible lie, in the
// lightest or the darkest ink: whichever is seen better there.
void add_stroke(Placard& p) {
    const double length = p.random.between(70, 170);
    const double swing = p.random.between(0, 16);
    Point best;
    std::size_t fewest = p.inks.size() + 1;
    for (int tries = 0; tries < 20; ++tries) {
        const Point at{p.random.between(8, p.w - length - 8), p.random.between(24, p.h - 24)};
        std::vector<bool> found(p.inks.size(), false);
        for (int i = 0; i < 45; ++i) {
            const int row = i % 3 - 1;
            found[p.sheet.ink_at({at.x + length * i / 44, at.y + swing * row})] = true;
        }
        const auto n = static_cast<std::size_t>(std::count(found.begin(), found.end(), true));
        if (n >= fewest) continue;
        fewest = n;
        best = at;
    }
    const double level = lab_of(p.inks[p.sheet.ink_at(best)]).L;
    const auto contrast = [&](Rgb8 ink) { return std::abs(lab_of(ink).L - level); };
    std::uint8_t ink = 0;
    for (std::uint8_t k = 1; k < p.inks.size(); ++k) {
        if (contrast(p.inks[k]) > contrast(p.inks[ink])) ink = k;
    }
    const Wave wave{best.y, swing, length * p.random.between(0.4, 0.9), p.random.unit()};
    std::vector<Point> points;
    for (double x = 0; x <= length; x += 2) points.push_back({best.x + x, wave.at(x)});
    p.sheet.paint(brush_shape(points, std::vector<double>(points.size(), 2)), ink, ++p.last_stroke);
}

// Whether every ink is there; those that are not get one more motif.
bool complete(Placard& p) {
    const std::vector<std::uint8_t> truth = p.sheet.largest_inks();
    const std::vector<double> shares = shares_of(truth, p.inks.size());
    const std::vector<bool> solid = p.sheet.solid();
    std::vector<double> core(p.inks.size(), 0);
    for (std::size_t i = 0; i < truth.size(); ++i) core[truth[i]] += solid[i] ? 1 : 0;
    bool all = true;
    for (std::size_t k = 0; k < p.inks.size(); ++k) {
        const double needed = least_solid * static_cast<double>(truth.size());
        if (shares[k] >= least_share && core[k] >= needed) continue;
        all = false;
        const Point at = p.anywhere();
        motif_round(p, at, p.least() * p.random.between(0.1, 0.25), static_cast<std::uint8_t>(k));
    }
    return all;
}

bool compose(Placard& p) {
    grounds[p.random.below(grounds.size())](p);
    const int n = p.some(1, 7);
    for (int i = 0; i < n; ++i) {
        const Point at = p.anywhere();
        const double size = p.least() * p.random.between(0.12, 0.45);
        const std::uint8_t ink = p.next_other_than(p.sheet.ink_at(at));
        motifs[p.random.below(motifs.size())](p, at, size, ink);
    }
    if (!p.one_in(4)) add_lettering(p);
    if (p.one_in(3)) add_border(p);
    const int strokes = p.some(1, 3);
    for (int i = 0; i < strokes; ++i) add_stroke(p);
    for (int tries = 0; tries < 8; ++tries) {
        if (complete(p)) return true;
    }
    return false;
}

// The inks in an order of their own: the ground is any of them, one time in three the darkest.
std::vector<std::uint8_t> ordered(Random& random, std::span<const Rgb8> inks) {
    std::vector<std::uint8_t> turns(inks.size());
    for (std::size_t k = 0; k < turns.size(); ++k) turns[k] = static_cast<std::uint8_t>(k);
    for (std::size_t k = turns.size(); k > 1; --k) std::swap(turns[k - 1], turns[random.below(k)]);
    if (random.below(3) == 0) {
        std::iter_swap(turns.begin(),
                       std::min_element(turns.begin(), turns.end(), [&](auto one, auto two) {
                           return lab_of(inks[one]).L < lab_of(inks[two]).L;
                       }));
    }
    return turns;
}

Sample sample_of(Placard& p) {
    Sample sample;
    sample.picture = p.sheet.render(p.inks);
    sample.truth = p.sheet.largest_inks();
    sample.shares = shares_of(sample.truth, p.inks.size());
    sample.strokes = p.sheet.strokes();
    sample.inks = std::move(p.inks);
    return sample;
}

}  // namespace

Sample draw_placard(Random& random) {
    for (int tries = 0; tries < 500; ++tries) {
        const int n = 2 + static_cast<int>(random.below(11));
        std::vector<Rgb8> inks = choose_inks(random, n, apart);
        std::vector<std::uint8_t> turns = ordered(random, inks);
        // Even, so that half of it twice is its size.
        const int w = 400 + 2 * static_cast<int>(random.below(201));
        const int h = 400 + 2 * static_cast<int>(random.below(201));
        Sheet sheet(w, h, inks.size(), turns.front());
        Placard placard{random,           std::move(inks),        std::move(turns),
                        std::move(sheet), static_cast<double>(w), static_cast<double>(h)};
        if (compose(placard)) return sample_of(placard);
    }
    throw std::logic_error("no placard came out complete");
}

}  // namespace tincture::corpus
