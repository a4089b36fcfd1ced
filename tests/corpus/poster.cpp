// Posters of flat inks, and three strata of them that are harder.
#include <array>
#include <stdexcept>

#include "tests/corpus/inks.h"
#include "tests/corpus/lettering.h"
#include "tests/corpus/motifs.h"
#include "tests/corpus/pictures.h"

namespace tincture::corpus {
namespace {

constexpr int edge = 480;
constexpr double apart = 14;            // CIEDE2000 between inks that are not near
constexpr double nearest_pair = 5;      // of the stratum of near inks
constexpr double least_share = 0.002;   // an ink counts from here
constexpr double least_solid = 0.0008;  // of an ink that is not in fine lettering alone
constexpr double thin_contrast = 25;    // in lightness, of thin strokes, where the inks allow it
constexpr double small_low = 0.0002;    // of the stratum of small inks
constexpr double small_high = 0.002;

struct Poster {
    Random& random;
    Kind kind;
    std::vector<Rgb8> inks;
    Canvas canvas;
    std::vector<std::uint8_t> turns;  // inks in the order they come next
    std::size_t turn = 0;
    bool last_is_special = false;  // the last ink is for the small motif or the fine lettering

    Pen next() {
        const Pen pen{turns[turn % turns.size()]};
        ++turn;
        return pen;
    }
    // An ink other than that, or than the one that lies there now.
    Pen next_on_ink(std::uint8_t ink) {
        const Pen pen = next();
        return pen.ink == ink ? next() : pen;
    }
    Pen next_on(Point place) { return next_on_ink(ink_at(place)); }
    [[nodiscard]] std::uint8_t ink_at(Point p) const {
        const int x = std::clamp(static_cast<int>(p.x), 0, edge - 1);
        const int y = std::clamp(static_cast<int>(p.y), 0, edge - 1);
        const std::size_t row = static_cast<std::size_t>(y * canvas.fine()) * edge * canvas.fine();
        return canvas.inks()[row + static_cast<std::size_t>(x * canvas.fine())];
    }
};

// A motif somewhere, of the next inks.
void add_motif(Poster& poster, double size) {
    Random& random = poster.random;
    const Point place{random.between(0.08, 0.92) * edge, random.between(0.1, 0.9) * edge};
    draw_motif(poster.canvas, random, place, size, [&] { return poster.next_on(place); });
}

void add_title(Poster& poster) {
    Random& random = poster.random;
    const double height = random.between(30, 58);
    const double width = random.between(0.5, 0.9) * edge;
    const Point corner{(edge - width) / 2,
                       random.below(2) == 0 ? random.between(24, 50) : random.between(340, 400)};
    if (random.below(3) == 0) {
        poster.canvas.rounded_rectangle(
            {corner.x - 16, corner.y - 14, corner.x + width + 16, corner.y + height + 14},
            random.between(0, 12), poster.next_on(corner));
    }
    Lettering style;
    style.height = height;
    style.thickness = height * random.between(0.12, 0.2);
    style.slant = random.below(3) == 0 ? 0.2 : 0;
    draw_words(poster.canvas, random, corner, width, style, poster.next_on(corner));
    Lettering line;
    line.height = random.between(14, 22);
    line.thickness = std::max(3.0, line.height * 0.17);
    const Point below{corner.x, corner.y + height + 22};
    draw_words(poster.canvas, random, below, width, line, poster.next_on(below));
}

// A place for a box of that size where as few inks as possible lie.
Point plain_place(Poster& poster, double width, double height) {
    Random& random = poster.random;
    Point best;
    std::size_t fewest = poster.inks.size() + 1;
    for (int tries = 0; tries < 30 && fewest > 1; ++tries) {
        const Point place{random.between(0.04, 0.96 - width / edge) * edge,
                          random.between(0.04, 0.96 - height / edge) * edge};
        std::vector<bool> found(poster.inks.size());
        for (int j = 0; j <= 8; ++j) {
            for (int i = 0; i <= 8; ++i) {
                found[poster.ink_at({place.x + width * i / 8, place.y + height * j / 8})] = true;
            }
        }
        const auto n = static_cast<std::size_t>(std::count(found.begin(), found.end(), true));
        if (n >= fewest) continue;
        fewest = n;
        best = place;
    }
    return best;
}

// An ink that is well seen on another: the next that is much lighter or darker, or the one that is
// most so. Thin strokes are printed that way.
Pen seen_on(Poster& poster, std::uint8_t ground) {
    const double level = lab_of(poster.inks[ground]).L;
    Pen best = poster.next_on_ink(ground);
    const auto contrast = [&](Pen pen) { return std::abs(lab_of(poster.inks[pen.ink]).L - level); };
    for (std::size_t i = 0; i < poster.turns.size() && contrast(best) < thin_contrast; ++i) {
        const Pen other = poster.next();
        if (contrast(other) > contrast(best)) best = other;
    }
    return best;
}

// Strokes of two pixels whose survival is measured: a rule, an arc, some large thin glyphs.
void add_thin_strokes(Poster& poster) {
    Random& random = poster.random;
    Canvas& canvas = poster.canvas;
    const double length = random.between(60, 140);
    const double rise = random.between(0, 40);
    const Point left = plain_place(poster, length, rise);
    const std::array<Point, 2> rule = {{left, {left.x + length, left.y + rise}}};
    Pen pen = seen_on(poster, poster.ink_at(left));
    pen.stroke = canvas.new_stroke();
    canvas.line(rule, 2, pen);

    const double radius = random.between(16, 50);
    Point place = plain_place(poster, 2 * radius, 2 * radius);
    const Point centre{place.x + radius, place.y + radius};
    pen = seen_on(poster, poster.ink_at(centre));
    pen.stroke = canvas.new_stroke();
    const double from = random.unit();
    canvas.line(arc(centre, radius, from, from + random.between(0.3, 0.8), 40), 2, pen);

    Lettering thin;
    thin.height = random.between(22, 34);
    thin.thickness = 2;
    thin.measured = true;
    place = plain_place(poster, 110, thin.height);
    draw_words(canvas, random, place, 110, thin, seen_on(poster, poster.ink_at(place)));
}

void add_fine_lettering(Poster& poster) {
    Random& random = poster.random;
    const double width = random.between(150, 300);
    const double height = random.between(60, 110);
    const Point corner = plain_place(poster, width, height);
    const Box text{corner.x, corner.y, corner.x + width, corner.y + height};
    Lettering style;
    style.height = random.between(7, 15);
    style.thickness = random.between(1, std::min(2.0, style.height * 0.15 + 0.1));
    style.spacing = 0.35;
    // The lettering may have an ink of its own, and a ground that it is seen on.
    Pen pen{static_cast<std::uint8_t>(poster.inks.size() - 1)};
    if (!poster.last_is_special) pen = poster.next();
    poster.canvas.rectangle(text.inset(-12), seen_on(poster, pen.ink));
    draw_paragraph(poster.canvas, random, text, style.height * 1.7, style, pen);
}

void add_small_motif(Poster& poster) {
    Random& random = poster.random;
    const Point place{random.between(0.1, 0.9) * edge, random.between(0.1, 0.9) * edge};
    const Pen pen{static_cast<std::uint8_t>(poster.inks.size() - 1)};
    const double radius = random.between(4.5, 11);
    if (random.below(2) == 0)
        poster.canvas.disk(place, radius, pen);
    else
        poster.canvas.polygon(star(place, radius * 1.3, radius * 0.6, 10, random.unit()), pen);
}

std::vector<Rgb8> inks_for(Random& random, Kind kind) {
    const bool needs_two_more = kind != Kind::poster;
    const int n = needs_two_more ? 3 + static_cast<int>(random.below(10))
                                 : 2 + static_cast<int>(random.below(11));
    std::vector<Rgb8> inks = choose_inks(random, n, apart);
    if (kind == Kind::near) {
        const std::size_t pairs = n >= 5 ? 1 + random.below(2) : 1;
        for (std::size_t i = 0; i < pairs; ++i) {
            if (!bring_near(random, inks, inks.size() - 1 - i, i, nearest_pair, apart)) return {};
        }
    }
    return inks;
}

// Whether every ink is there as its kind asks for; those that are not get one more motif.
bool complete(Poster& poster) {
    const std::size_t n = poster.inks.size();
    const std::vector<std::uint8_t> truth = poster.canvas.centre_inks();
    const std::vector<double> shares = shares_of(truth, n);
    const std::vector<bool> solid = poster.canvas.solid();
    std::vector<double> core(n, 0);
    for (std::size_t i = 0; i < truth.size(); ++i) core[truth[i]] += solid[i] ? 1 : 0;
    bool all = true;
    for (std::size_t k = 0; k < n; ++k) {
        const bool special = poster.last_is_special && k + 1 == n;
        if (special && poster.kind == Kind::small) {
            all = all && shares[k] >= small_low && shares[k] < small_high;
        } else if (special) {
            all = all && shares[k] >= least_share;
        } else if (shares[k] < least_share ||
                   core[k] < least_solid * static_cast<double>(truth.size())) {
            all = false;
            Random& random = poster.random;
            const Point place{random.between(0.05, 0.95) * edge, random.between(0.05, 0.95) * edge};
            draw_motif(poster.canvas, random, place, random.between(30, 60),
                       [&] { return Pen{static_cast<std::uint8_t>(k)}; });
        }
    }
    return all;
}

bool compose(Poster& poster) {
    Random& random = poster.random;
    const std::size_t shared = poster.inks.size() - (poster.last_is_special ? 1 : 0);
    for (std::size_t k = 1; k < shared; ++k) poster.turns.push_back(static_cast<std::uint8_t>(k));
    for (std::size_t k = poster.turns.size(); k > 1; --k) {
        std::swap(poster.turns[k - 1], poster.turns[random.below(k)]);
    }
    poster.turns.push_back(0);
    draw_ground(poster.canvas, random, [&] { return poster.next(); });
    const int motifs = 3 + static_cast<int>(random.below(6));
    for (int i = 0; i < motifs; ++i) add_motif(poster, random.between(60, 190));
    add_title(poster);
    if (random.below(3) == 0) {
        const Box box = poster.canvas.whole().inset(random.between(0, 14));
        poster.canvas.frame(box, random.between(5, 12), poster.next());
    }
    add_thin_strokes(poster);
    if (poster.kind == Kind::fine) add_fine_lettering(poster);
    if (poster.kind == Kind::small) add_small_motif(poster);
    for (int tries = 0; tries < 6; ++tries) {
        if (complete(poster)) return true;
    }
    return false;
}

}  // namespace

Sample draw_poster(Random& random, Kind kind) {
    for (int tries = 0; tries < 500; ++tries) {
        std::vector<Rgb8> inks = inks_for(random, kind);
        if (inks.empty()) continue;
        const bool own_fine = kind == Kind::fine && random.below(2) == 0;
        Poster poster{random,
                      kind,
                      std::move(inks),
                      Canvas(edge, edge, kind == Kind::fine ? 5 : 3, 0),
                      {},
                      0,
                      kind == Kind::small || own_fine};
        if (compose(poster)) return flat_sample(poster.canvas, std::move(poster.inks));
    }
    throw std::logic_error("no poster came out complete");
}

}  // namespace tincture::corpus
