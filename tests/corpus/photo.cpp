// Photograph-like pictures: light, haze, texture and grain, and no natural count of colours.
#include <array>
#include <stdexcept>

#include "tests/corpus/inks.h"
#include "tests/corpus/pictures.h"

namespace tincture::corpus {
namespace {

constexpr int edge = 480;
constexpr double accent_share = 0.003;
constexpr double accent_apart = 20;  // CIEDE2000 from (nearly) all other pixels

// Random values on a lattice, smooth between them, in octaves of half the size: 0..1.
class Texture {
  public:
    explicit Texture(std::uint64_t seed) : seed_(seed) {}

    [[nodiscard]] double at(double x, double y, int octaves) const {
        double sum = 0;
        double weight = 0.5;
        double total = 0;
        for (int i = 0; i < octaves; ++i) {
            sum += weight * smooth(x, y, i);
            total += weight;
            weight /= 2;
            x *= 2;
            y *= 2;
        }
        return sum / total;
    }

  private:
    [[nodiscard]] double corner(std::int64_t i, std::int64_t j, int octave) const {
        Random random(seed_ + static_cast<std::uint64_t>(octave) * 1'000'003 +
                      static_cast<std::uint64_t>(i) * 7919 +
                      static_cast<std::uint64_t>(j) * 104'729);
        return random.unit();
    }
    [[nodiscard]] double smooth(double x, double y, int octave) const {
        const double fx = std::floor(x);
        const double fy = std::floor(y);
        const auto i = static_cast<std::int64_t>(fx);
        const auto j = static_cast<std::int64_t>(fy);
        const auto ease = [](double t) { return t * t * (3 - 2 * t); };
        const double u = ease(x - fx);
        const double v = ease(y - fy);
        const double top = corner(i, j, octave) * (1 - u) + corner(i + 1, j, octave) * u;
        const double low = corner(i, j + 1, octave) * (1 - u) + corner(i + 1, j + 1, octave) * u;
        return top * (1 - v) + low * v;
    }
    std::uint64_t seed_;
};

using Lights = std::vector<Light>;

Light scaled(Light light, double by) {
    return {light.r * by, light.g * by, light.b * by};
}

Light any_light(Random& random, double low, double high) {
    return {random.between(low, high), random.between(low, high), random.between(low, high)};
}

// A country under a sky: ridges one behind the other, paler with the distance.
Lights landscape(Random& random) {
    const Texture clouds(random.bits());
    const Texture ground(random.bits());
    const bool dusk = random.below(3) == 0;
    const Light zenith =
        dusk ? any_light(random, 40, 110)
             : Light{random.between(60, 120), random.between(120, 170), random.between(190, 235)};
    const Light horizon =
        dusk ? Light{random.between(210, 250), random.between(130, 180), random.between(90, 140)}
             : Light{random.between(190, 225), random.between(205, 230), random.between(220, 240)};
    const Light near{random.between(40, 120), random.between(70, 120), random.between(20, 60)};
    const int ridges = 3 + static_cast<int>(random.below(3));
    const double first = random.between(170, 260);
    Lights lights;
    for (int y = 0; y < edge; ++y) {
        for (int x = 0; x < edge; ++x) {
            const double cloud = clouds.at(x / 160.0, y / 60.0, 5);
            Light light = mix(zenith, horizon, std::min(1.0, y / first));
            light = mix(light, {248, 246, 242}, std::clamp((cloud - 0.5) * 3, 0.0, 0.9));
            for (int k = 0; k < ridges; ++k) {
                const double depth = (k + 1.0) / ridges;
                const double crest = first + (edge - first) * 0.8 * k / ridges;
                const double line = crest - 70 * (ground.at(x / 130.0 + 9 * k, 3.5 * k, 5) - 0.3);
                if (y < line) continue;
                const double grain = ground.at(x / (30 * depth), y / (12 * depth) + 50 * k, 5);
                const double slope = ground.at(x / 60.0 + 5, y / 60.0 + 20 * k, 3);
                light = scaled(near, 0.45 + 0.8 * grain + 0.5 * (slope - 0.5));
                light = mix(horizon, light, 0.25 + 0.75 * depth * depth);
            }
            lights.push_back(light);
        }
    }
    return lights;
}

struct Ball {
    Point centre;
    double radius;
    Light colour;
    double gloss;
};

// The light of a ball at (u, v), both within the unit disk; lit from the upper left.
Light ball_light(const Ball& ball, double u, double v, double grain) {
    const double w = std::sqrt(std::max(0.0, 1 - u * u - v * v));
    const double lit = std::max(0.0, -0.45 * u - 0.6 * v + 0.66 * w);
    const double shine = std::max(0.0, -0.26 * u - 0.35 * v + 0.9 * w);
    double spot = shine * shine;
    spot *= spot;
    spot *= spot;
    spot *= spot * spot;
    const double floor_light = 0.12 * std::max(0.0, v);
    const Light light = scaled(ball.colour, 0.18 + 0.85 * lit + floor_light + 0.12 * (grain - 0.5));
    return mix(light, {255, 250, 240}, std::min(0.9, ball.gloss * spot));
}

// Round things on a table in front of a wall.
Lights still_life(Random& random) {
    const Texture grain(random.bits());
    const Light wall = any_light(random, 70, 200);
    const Light table{random.between(110, 190), random.between(80, 140), random.between(50, 100)};
    const double rim = random.between(190, 280);
    std::vector<Ball> balls;
    const int n = 3 + static_cast<int>(random.below(5));
    for (int i = 0; i < n; ++i) {
        const double radius = random.between(35, 85);
        balls.push_back({{random.between(60, 420), rim + 20 + 25 * i - radius * 0.4},
                         radius,
                         any_light(random, 30, 250),
                         random.between(0.1, 0.9)});
    }
    Lights lights;
    for (int y = 0; y < edge; ++y) {
        for (int x = 0; x < edge; ++x) {
            const double away = ((x - 150.0) * (x - 150) + (y - 60.0) * (y - 60)) / 300'000;
            Light light =
                scaled(wall, 1.15 / (1 + away) + 0.08 * (grain.at(x / 90.0, y / 90.0, 5) - 0.5));
            if (y > rim) {
                const double wood = grain.at(x / 220.0 + 7, y / 9.0, 5);
                light = scaled(table, (0.65 + 0.55 * wood) * (1.1 / (1 + away / 2)));
                for (const Ball& ball : balls) {
                    const double u = (x - ball.centre.x - ball.radius * 0.5) / (ball.radius * 1.4);
                    const double v = (y - ball.centre.y - ball.radius * 0.9) / (ball.radius * 0.45);
                    light = scaled(light, 1 - 0.6 * std::max(0.0, 1 - u * u - v * v));
                }
            }
            for (const Ball& ball : balls) {
                const double u = (x - ball.centre.x) / ball.radius;
                const double v = (y - ball.centre.y) / ball.radius;
                if (u * u + v * v > 1) continue;
                light = ball_light(ball, u, v, grain.at(x / 14.0, y / 14.0, 3));
            }
            lights.push_back(light);
        }
    }
    return lights;
}

// A close view: leaves and petals in focus before a blurred garden.
Lights garden(Random& random) {
    const Texture soft(random.bits());
    const Texture sharp(random.bits());
    const std::array<Light, 3> far = {any_light(random, 20, 120), any_light(random, 60, 200),
                                      any_light(random, 20, 160)};
    std::vector<Ball> spots;
    for (int i = 0; i < 30; ++i) {
        spots.push_back({{random.between(0, edge), random.between(0, edge)},
                         random.between(14, 46),
                         any_light(random, 90, 255),
                         random.between(0.1, 0.5)});
    }
    const Light petal = any_light(random, 60, 255);
    const Point heart{random.between(160, 320), random.between(180, 320)};
    const int petals = 5 + static_cast<int>(random.below(6));
    const double size = random.between(110, 170);
    Lights lights;
    for (int y = 0; y < edge; ++y) {
        for (int x = 0; x < edge; ++x) {
            const double t = soft.at(x / 190.0, y / 190.0, 2);
            Light light = t < 0.5 ? mix(far[0], far[1], t * 2) : mix(far[1], far[2], t * 2 - 1);
            for (const Ball& spot : spots) {
                const double u = (x - spot.centre.x) / spot.radius;
                const double v = (y - spot.centre.y) / spot.radius;
                const double edge_of_spot = std::clamp((1 - u * u - v * v) * 4, 0.0, 1.0);
                light = mix(light, spot.colour, spot.gloss * edge_of_spot);
            }
            for (int k = 0; k < petals; ++k) {
                const Point tip = around({0, 0}, 1, (k + 0.3) / petals);
                const double along = (x - heart.x) * tip.x + (y - heart.y) * tip.y;
                const double across = (y - heart.y) * tip.x - (x - heart.x) * tip.y;
                const double p = along / size;
                const double q = across / (size * 0.28);
                const double body = p * (1 - p) * 4 - q * q;
                if (p < 0 || body <= 0) continue;
                const double vein = sharp.at(p * 3 + k, q * 9, 4);
                light = scaled(petal, 0.4 + 0.5 * p + 0.25 * (q + 1) * 0.5 + 0.3 * (vein - 0.5));
            }
            const double middle =
                ((x - heart.x) * (x - heart.x) + (y - heart.y) * (y - heart.y)) / 900;
            if (middle < 1) {
                light = mix({190, 150, 40}, {90, 60, 20}, sharp.at(x / 3.0, y / 3.0, 2));
            }
            lights.push_back(light);
        }
    }
    return lights;
}

// Lens and sensor: darker corners, a small blur between neighbours, grain.
Picture exposed(Random& random, const Lights& lights) {
    Picture picture;
    picture.width = edge;
    picture.height = edge;
    picture.samples8 = Samples<std::uint8_t>(picture.pixel_count() * 3);
    const double grain = 255 * random.between(0.003, 0.012);
    for (int y = 0; y < edge; ++y) {
        for (int x = 0; x < edge; ++x) {
            Light sum{0, 0, 0};
            for (int j = -1; j <= 1; ++j) {
                for (int i = -1; i <= 1; ++i) {
                    const int u = std::clamp(x + i, 0, edge - 1);
                    const int v = std::clamp(y + j, 0, edge - 1);
                    const double weight = (2 - std::abs(i)) * (2 - std::abs(j)) / 16.0;
                    sum = mix(sum,
                              {sum.r + lights[static_cast<std::size_t>(v * edge + u)].r,
                               sum.g + lights[static_cast<std::size_t>(v * edge + u)].g,
                               sum.b + lights[static_cast<std::size_t>(v * edge + u)].b},
                              weight);
                }
            }
            const double corner = ((x - 240.0) * (x - 240) + (y - 240.0) * (y - 240)) / 400'000;
            sum = scaled(sum, 1 - corner);
            const std::size_t at = 3 * static_cast<std::size_t>(y * edge + x);
            picture.samples8[at] = to_byte(sum.r + grain * random.bell());
            picture.samples8[at + 1] = to_byte(sum.g + grain * random.bell());
            picture.samples8[at + 2] = to_byte(sum.b + grain * random.bell());
        }
    }
    return picture;
}

// The colour, of some vivid ones, that lies farthest from all that is in the picture.
std::optional<Rgb8> accent_for(Random& random, const Picture& picture) {
    std::vector<Rgb8> there;
    for (std::size_t i = 0; i < picture.pixel_count(); i += 61) {
        const std::uint8_t* c = picture.samples8.data() + 3 * i;
        there.push_back({c[0], c[1], c[2]});
    }
    Rgb8 best;
    double farthest = 0;
    for (int i = 0; i < 24; ++i) {
        const Rgb8 candidate = any_ink(random);
        double nearest = 1000;
        for (const Rgb8 colour : there) nearest = std::min(nearest, difference(candidate, colour));
        if (nearest > farthest) {
            farthest = nearest;
            best = candidate;
        }
    }
    return farthest >= accent_apart ? std::optional(best) : std::nullopt;
}

// A small round thing of that colour, a little lighter at the top.
void plant(Random& random, Picture& picture, Rgb8 accent) {
    const double area = accent_share * edge * edge;
    const double radius = std::sqrt(area / 3.14159265);
    const Point c{random.between(0.1, 0.9) * edge, random.between(0.1, 0.9) * edge};
    for (int y = 0; y < edge; ++y) {
        for (int x = 0; x < edge; ++x) {
            const double u = (x + 0.5 - c.x) / radius;
            const double v = (y + 0.5 - c.y) / radius;
            const double cover =
                std::clamp((1 - std::sqrt(u * u + v * v)) * radius + 0.5, 0.0, 1.0);
            if (cover == 0) continue;
            const std::size_t at = 3 * static_cast<std::size_t>(y * edge + x);
            const Light under{static_cast<double>(picture.samples8[at]),
                              static_cast<double>(picture.samples8[at + 1]),
                              static_cast<double>(picture.samples8[at + 2])};
            const Light light = mix(under, scaled(light_of(accent), 1 - 0.05 * v), cover);
            picture.samples8[at] = to_byte(light.r + random.bell());
            picture.samples8[at + 1] = to_byte(light.g + random.bell());
            picture.samples8[at + 2] = to_byte(light.b + random.bell());
        }
    }
}

}  // namespace

Sample draw_photo(Random& random, bool planted_accent) {
    constexpr std::array views = {landscape, still_life, garden};
    for (int tries = 0; tries < 50; ++tries) {
        Sample sample;
        sample.picture = exposed(random, views[random.below(views.size())](random));
        if (planted_accent) {
            sample.accent = accent_for(random, sample.picture);
            if (!sample.accent) continue;
            plant(random, sample.picture, *sample.accent);
        }
        return sample;
    }
    throw std::logic_error("no photograph left room for an accent");
}

}  // namespace tincture::corpus
