// Flat art with fades and soft shadows: what is flat is counted, what fades is not.
#include <array>
#include <stdexcept>

#include "tests/corpus/inks.h"
#include "tests/corpus/lettering.h"
#include "tests/corpus/motifs.h"
#include "tests/corpus/pictures.h"

namespace tincture::corpus {
namespace {

constexpr int edge = 480;
constexpr double apart = 14;
constexpr double least_share = 0.002;
constexpr double least_ground = 0.05;  // of the fading ink: its flat part

// The ground leaves its colour from one height to another.
struct Fade {
    std::uint8_t ink;
    double from;
    double to;
    Light towards;

    [[nodiscard]] double part(double y) const {
        const double t = std::clamp((y - from) / (to - from), 0.0, 1.0);
        return t * t * (3 - 2 * t);
    }
};

// Dark around a panel, weaker with the distance.
struct Shadow {
    Box box;
    double reach;
    double depth;  // 0..1

    [[nodiscard]] double part(double x, double y) const {
        const double dx = std::max({box.left - x, x - box.right, 0.0});
        const double dy = std::max({box.top - y, y - box.bottom, 0.0});
        const double t = std::clamp(1 - std::sqrt(dx * dx + dy * dy) / reach, 0.0, 1.0);
        return depth * t * t;
    }
};

struct Scene {
    std::vector<Fade> fades;
    std::vector<Shadow> shadows;
    std::vector<std::uint8_t> in_front;  // inks that no shadow falls on
};

Light shade(const Scene& scene, Light light, double x, double y, std::uint8_t ink) {
    for (const Fade& fade : scene.fades) {
        if (fade.ink == ink) light = mix(light, fade.towards, fade.part(y));
    }
    if (std::find(scene.in_front.begin(), scene.in_front.end(), ink) != scene.in_front.end()) {
        return light;
    }
    for (const Shadow& shadow : scene.shadows) {
        light = mix(light, {0, 0, 0}, shadow.part(x, y));
    }
    return light;
}

void draw_panel(Canvas& canvas, Random& random, Scene& scene, std::uint8_t ink,
                std::uint8_t lettering) {
    const double left = random.between(40, 160);
    const double top = random.between(60, 180);
    const Box box{left, top, left + random.between(180, 270), top + random.between(115, 180)};
    canvas.rounded_rectangle(box, random.between(0, 16), Pen{ink});
    Lettering title;
    title.height = random.between(26, 40);
    title.thickness = title.height * 0.15;
    draw_words(canvas, random, {box.left + 18, box.top + 20}, box.width() - 36, title,
               Pen{lettering});
    Lettering text;
    text.height = 13;
    text.thickness = 2.4;
    draw_words(canvas, random, {box.left + 18, box.bottom - 30}, box.width() - 36, text,
               Pen{lettering});
    scene.shadows.push_back({{box.left + 5, box.top + 8, box.right + 5, box.bottom + 8},
                             random.between(12, 30),
                             random.between(0.25, 0.5)});
    scene.in_front = {ink, lettering};
}

}  // namespace

Sample draw_fade(Random& random) {
    for (int tries = 0; tries < 200; ++tries) {
        std::vector<Rgb8> inks = choose_inks(random, 4 + static_cast<int>(random.below(5)), apart);
        const std::size_t n = inks.size();
        Canvas canvas(edge, edge, 3, 0);
        Scene scene;
        const Wave land{random.between(300, 380), random.between(4, 20), random.between(200, 500),
                        random.unit()};
        if (random.below(4) != 0) {
            // Down to the land: where it ended sooner there would be one more flat colour.
            const double from = random.between(40, 220);
            const Light other = light_of(inks[1 + random.below(n - 1)]);
            const Light towards = mix(light_of(inks[0]), other, random.between(0.4, 0.9));
            scene.fades.push_back({0, from, land.middle + land.height, towards});
        }
        // Two inks are for the panel and its lettering alone.
        std::uint8_t turn = 0;
        const auto next = [&] {
            turn = static_cast<std::uint8_t>(turn % (n - 3) + 1);
            return Pen{turn};
        };
        canvas.below(land, edge, next());
        for (int i = 0; i < 6; ++i) {
            const Point place{random.between(40, 440), random.between(60, 440)};
            draw_motif(canvas, random, place, random.between(50, 140), next);
        }
        draw_panel(canvas, random, scene, static_cast<std::uint8_t>(n - 2),
                   static_cast<std::uint8_t>(n - 1));
        Sample sample = flat_sample(canvas, inks);
        const std::vector<Rgb8>& colours = sample.inks;
        sample.picture = render(canvas, [&](double x, double y, std::uint8_t ink) {
            return shade(scene, light_of(colours[ink]), x, y, ink);
        });
        // What is left of each ink in its own colour.
        std::vector<double> flat(n, 0);
        for (std::size_t i = 0; i < sample.truth.size(); ++i) {
            const Rgb8 ink = colours[sample.truth[i]];
            const std::uint8_t* got = sample.picture.samples8.data() + 3 * i;
            if (got[0] == ink.r && got[1] == ink.g && got[2] == ink.b) flat[sample.truth[i]] += 1;
        }
        const double all = static_cast<double>(sample.truth.size());
        bool complete = flat[0] >= least_ground * all;
        for (const double pixels : flat) complete = complete && pixels >= least_share * all;
        if (complete) return sample;
    }
    throw std::logic_error("no faded picture came out complete");
}

}  // namespace tincture::corpus
