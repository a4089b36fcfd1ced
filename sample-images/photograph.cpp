// A still life that looks like a photograph: fruit, a jug and a cloth on a kitchen table in morning
// sun. Path traced, through a lens with a shallow field, onto a sensor with noise.
#include <cmath>
#include <cstdint>
#include <string>
#include <vector>

#include "files.h"
#include "numbers.h"
#include "pictures.h"
#include "render.h"
#include "still_life.h"

namespace tincture::samples {
namespace {

constexpr int width = 1800;
constexpr int height = 1200;
constexpr int samples = 40;  // a pixel; a few minutes on two processors

Room kitchen() {
    Room room{};
    room.low = {-105, -75, -52};
    room.high = {190, 175, 230};
    room.table_half_width = 96;
    room.table_back = -47;
    room.table_front = 62;
    room.window_low = 8;
    room.window_high = 128;
    room.window_back = -38;
    room.window_front = 94;
    room.panes_across = 2;
    room.panes_up = 3;
    room.bar = 4.5;
    return room;
}

// A branch from the mouth of the jug outwards.
Group branch(Vec mouth, double turn, double spread, double rise, Random& random) {
    Group group;
    const Vec out{cosine(turn), 0, sine(turn)};
    const Vec from = mouth + out * 2.2 - Vec{0, 8, 0};
    const Vec to = mouth + out * spread + Vec{0, rise, 0};
    const Vec bend = mouth + out * (spread * 0.30) + Vec{0, rise * 0.8, 0};
    group.add(twig(from, bend, to, 0.2));
    const Vec stem = normalised(to - bend);
    const Vec across = normalised(cross(stem, {0, 1, 0.2}));
    for (int k = 0; k < 9; ++k) {
        const double t = 0.42 + 0.072 * k;
        const Vec on = mixed(mixed(from, bend, t), mixed(bend, to, t), t);
        const double side = (k % 2 == 0 ? 1 : -1) * random.between(0.7, 1.3);
        const double droop = random.between(-0.35, 0.30);
        const double tilt = random.between(-0.6, 0.6);
        const double size = random.between(3.6, 5.4);
        const Vec along = normalised(stem * 0.75 + across * side + Vec{0, droop, 0});
        group.add(leaf(on, along, normalised(Vec{0.1 + tilt, 0.8, 0.65}), size, random.next()));
    }
    return group;
}

void place_jug(Stage& stage) {
    const Vec foot{-13.5, 0, -9};
    stage.groups.emplace_back().add(jug(foot));
    Random random(2024);
    constexpr int branches = 7;
    for (int i = 0; i < branches; ++i) {
        const double turn = 2 * pi * i / branches + random.between(-0.3, 0.3);
        const double spread = random.between(7, 13.5);
        const double rise = random.between(8, 15);
        stage.groups.push_back(branch(foot + Vec{0, 21, 0}, turn, spread, rise, random));
    }
}

Group bowl_of_oranges() {
    Group group;
    const Vec foot{11.5, 0.24, -3};
    group.add(cloth({10, 0, 0.5}, 0.30, 21, 14.5, 6.5));
    group.add(bowl(foot, 11, 6.4));
    group.add(orange(foot + Vec{-4.4, 5.0, 1.7}, 3.8, 11));
    group.add(orange(foot + Vec{3.9, 4.9, 1.9}, 3.65, 19));
    group.add(orange(foot + Vec{-0.3, 4.9, -4.4}, 3.75, 13));
    group.add(orange(foot + Vec{-0.1, 10.1, 0.3}, 3.55, 14));
    group.add(half_orange({0.5, 4.0, 14.2}, 3.75, normalised({0.06, 0.62, 0.80})));
    return group;
}

Group fruit_beside() {
    Group group;
    group.add(pear({-25.5, 0.0, 8.5}, 10.2, {-0.06, 1, 0.05}, 21));
    group.add(pear({-17.2, 2.9, 13.2}, 9.6, {0.93, 0.16, 0.33}, 22));
    group.add(plum({25.5, 2.45, 8.6}, 2.45, normalised({0.75, 0.35, 0.5}), 23));
    group.add(plum({29.6, 2.3, 4.2}, 2.35, normalised({-0.3, 0.9, 0.3}), 24));
    group.add(plum({20.6, 2.75, 12.8}, 2.3, normalised({0.2, 0.55, 0.8}), 25));
    return group;
}

// Scene light to what a camera stores: exposure, a shoulder for the lights, sRGB.
double developed(double light) {
    const double x = light * 1.12;
    const double shoulder = x * (1 + x / 16) / (1 + x * 0.62);
    const double encoded = srgb_from_linear(clamp01(shoulder));
    // A little more contrast round the middle.
    return clamp01(encoded + 0.10 * (encoded - 0.42) * encoded * (1 - encoded) * 4);
}

std::vector<std::uint8_t> expose(const std::vector<Vec>& light) {
    Random random(90210);
    std::vector<std::uint8_t> rgb;
    rgb.reserve(light.size() * 3);
    for (int y = 0; y < height; ++y) {
        for (int x = 0; x < width; ++x) {
            const double u = (x - width / 2.0) / (width / 2.0);
            const double v = (y - height / 2.0) / (width / 2.0);
            const double corner = 1 - 0.22 * (u * u + v * v);
            const Vec l = light[static_cast<std::size_t>(y) * width + x] * corner;
            for (const double channel : {l.x, l.y, l.z}) {
                // Photons arrive one by one, and reading them out adds its own noise.
                const double spread = std::sqrt(0.00040 * channel + 0.0000030);
                const double value = developed(std::max(0.0, channel + spread * random.normal()));
                rgb.push_back(static_cast<std::uint8_t>(std::floor(value * 255 + 0.5)));
            }
        }
    }
    return rgb;
}

}  // namespace

void draw_photograph(const std::string& path) {
    Stage stage;
    stage.room = kitchen();
    stage.lights.to_sun = normalised({-0.80, 0.50, 0.42});
    stage.lights.sun_spread = 0.012;
    stage.lights.sun = {7.6, 6.3, 4.5};
    stage.lights.sky = {1.55, 1.85, 2.3};
    place_jug(stage);
    stage.groups.push_back(bowl_of_oranges());
    stage.groups.push_back(fruit_beside());

    Camera camera{};
    camera.eye = {3, 34, 126};
    camera.target = {2, 14.5, 0};
    camera.half_height = 0.205;
    camera.focus = length(camera.eye - Vec{2, 6, 8});
    camera.lens_radius = 0.75;

    const auto light = render(stage, camera, width, height, samples);
    write_jpeg(path, width, height, expose(light), 90, 300);
}

}  // namespace tincture::samples
