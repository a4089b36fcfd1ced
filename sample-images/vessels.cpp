#include <array>
#include <cmath>
#include <span>

#include "numbers.h"
#include "still_life.h"

namespace tincture::samples {
namespace {

struct Knot {
    double height;
    double radius;
};

// Radius over height through given points, smooth, as a table.
class Profile {
  public:
    explicit Profile(std::span<const Knot> knots)
        : low_(knots.front().height), high_(knots.back().height) {
        const auto slope = [&](std::size_t i) {
            const std::size_t a = i == 0 ? 0 : i - 1;
            const std::size_t b = std::min(i + 1, knots.size() - 1);
            return (knots[b].radius - knots[a].radius) / (knots[b].height - knots[a].height);
        };
        std::size_t k = 0;
        for (std::size_t i = 0; i < table_.size(); ++i) {
            const double y = mix(low_, high_, static_cast<double>(i) / (entries - 1));
            while (k + 2 < knots.size() && y > knots[k + 1].height) ++k;
            const double step = knots[k + 1].height - knots[k].height;
            const double t = (y - knots[k].height) / step;
            const double t2 = t * t;
            const double t3 = t2 * t;
            table_[i] = (2 * t3 - 3 * t2 + 1) * knots[k].radius +
                        (t3 - 2 * t2 + t) * step * slope(k) +
                        (3 * t2 - 2 * t3) * knots[k + 1].radius + (t3 - t2) * step * slope(k + 1);
        }
    }
    [[nodiscard]] double radius(double y) const {
        const double at = clamp01((y - low_) / (high_ - low_)) * (entries - 1);
        const auto i = std::min(static_cast<std::size_t>(at), table_.size() - 2);
        return mix(table_[i], table_[i + 1], at - static_cast<double>(i));
    }

  private:
    double low_;
    double high_;
    static constexpr int entries = 256;
    std::array<double, entries> table_{};
};

constexpr std::array<Knot, 9> jug_knots{{{0, 5.6},
                                         {0.8, 5.9},
                                         {4, 7.6},
                                         {8, 8.5},
                                         {12, 7.7},
                                         {16, 5.6},
                                         {19.5, 4.5},
                                         {23, 4.8},
                                         {25, 5.7}}};
constexpr double jug_height = 25;

class Jug : public Body {
  public:
    explicit Jug(Vec foot)
        : Body(foot + Vec{-13, 0, -10}, foot + Vec{15.5, jug_height + 0.6, 10}),
          foot_(foot),
          profile_(jug_knots) {}

    [[nodiscard]] double distance(Vec p) const override {
        const Vec q = p - foot_;
        // The spout draws the lip out to the left.
        const double upper = smooth_step(19, jug_height, q.y);
        const double around = length({q.x, 0, q.z}) + 1e-9;
        const double left = std::max(0.0, -q.x / around);
        const double spout = 1.5 * upper * upper * left * left * left * left;
        const double radius = profile_.radius(q.y) + spout;
        const double wall = std::fabs(around - radius + 0.25) - 0.25;
        const double lip_drop = 0.5 * spout;
        double body = std::max({wall * 0.75, q.y - jug_height - lip_drop, -q.y});
        body = std::min(body, std::max({around - radius, q.y - 1.0, -q.y}) * 0.75);
        body -= 0.05;
        // Far from the handle's ball the handle does not count.
        if (length(q - Vec{9, 16.3, 0}) - 7.2 > body + 1.1) return body * 0.9;
        return blend(body, handle(q)) * 0.9;
    }

    [[nodiscard]] double relief(Vec p) const override {
        const Vec q = p - foot_;
        // Rings left by the hands, and a grain in the bare clay.
        const double rings = 0.018 * noise(0, q.y * 1.6, 0, 31) + 0.010 * noise(0, q.y * 5, 0, 32);
        const Vec fine = skewed(q) * 9;
        const double grain = glazed(q) < 0.5 ? 0.012 * noise(fine.x, fine.y, fine.z, 33) : 0;
        return rings + grain + 0.006 * fractal_noise(q.x, q.y, q.z, 3, 34);
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const Vec q = p - foot_;
        const double cloud = fractal_noise(q.x * 0.30, q.y * 0.30, q.z * 0.30, 5, 35);
        const Vec spot = skewed(q) * 4.5;
        const double speck = noise(spot.x, spot.y, spot.z, 36);
        const double cover = glazed(q);
        const Vec clay = mixed({0.30, 0.15, 0.085}, {0.40, 0.22, 0.13}, 0.5 + cloud);
        // Thin glaze breaks brown at the lip and along the lower edge.
        Vec glaze = mixed({0.085, 0.185, 0.215}, {0.17, 0.30, 0.31}, 0.5 + 0.8 * cloud);
        const double thin = smooth_step(jug_height - 1.0, jug_height + 0.1, q.y + 0.3 * cloud);
        glaze = mixed(glaze, {0.28, 0.19, 0.10}, 0.85 * thin);
        glaze = mixed(glaze, {0.05, 0.06, 0.06}, 0.7 * smooth_step(0.66, 0.8, speck));
        const double shine = mix(0.02, 0.055, cover);
        return {mixed(clay, glaze, cover), shine, mix(0.75, 0.17 + 0.05 * cloud, cover), 0};
    }

  private:
    // 1 where the glaze is, 0 on the bare foot.
    [[nodiscard]] static double glazed(Vec q) {
        const double turn = angle_of(q.z, q.x);
        const double line = 3.6 + 0.45 * noise(turn * 1.6, 0, 0, 37) + 0.16 * sine(3 * turn + 1);
        return smooth_step(line - 0.06, line + 0.06, q.y);
    }
    [[nodiscard]] static double blend(double a, double b) {
        const double h = std::max(1.1 - std::fabs(a - b), 0.0) / 1.1;
        return std::min(a, b) - h * h * 1.1 / 4;
    }
    // A strap bent like an ear, to the right.
    [[nodiscard]] static double handle(Vec q) {
        double nearest = 1e9;
        Vec last{4.7, 21.5, 0};
        for (int i = 1; i <= 12; ++i) {
            const double t = i / 12.0;
            const double s = 1 - t;
            const Vec next{
                s * s * s * 4.7 + 3 * s * s * t * 12.2 + 3 * s * t * t * 14.6 + t * t * t * 7.7,
                s * s * s * 21.5 + 3 * s * s * t * 24.2 + 3 * s * t * t * 13.0 + t * t * t * 9.8,
                0};
            const Vec way = next - last;
            const double along = clamp01(dot(q - last, way) / dot(way, way));
            const Vec off = q - last - way * along;
            const double flat = std::max(std::fabs(off.z) - 0.75, 0.0);
            const double d = std::sqrt(off.x * off.x + off.y * off.y + flat * flat) - 0.48;
            nearest = std::min(nearest, d);
            last = next;
        }
        return nearest;
    }

    Vec foot_;
    Profile profile_;
};

class Bowl : public Body {
  public:
    Bowl(Vec foot, double radius, double height)
        : Body(foot + Vec{-radius - 0.5, 0, -radius - 0.5},
               foot + Vec{radius + 0.5, height + 0.5, radius + 0.5}),
          foot_(foot),
          height_(height),
          // The sphere through the rim and the bottom of the wall.
          sphere_((radius * radius + height * height) / (2 * height)) {}

    [[nodiscard]] double distance(Vec p) const override {
        const Vec q = p - foot_;
        const Vec middle{0, sphere_ + 0.55, 0};
        const double wall = std::fabs(length(q - middle) - sphere_) - 0.27;
        const double cut = std::max(wall, q.y - height_);
        const double around = length({q.x, 0, q.z});
        const double ring = std::max(std::fabs(around - 4.3) - 0.4, std::fabs(q.y - 0.5) - 0.5);
        return (std::min(cut, ring) - 0.05) * 0.95;
    }

    [[nodiscard]] double relief(Vec p) const override {
        const Vec q = p - foot_;
        return 0.012 * noise(0, q.y * 2.2, 0, 41) + 0.008 * fractal_noise(q.x, q.y, q.z, 3, 42);
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const Vec q = p - foot_;
        const double cloud = fractal_noise(q.x * 0.4, q.y * 0.4, q.z * 0.4, 4, 43);
        const Vec spot = skewed(q) * 5;
        const double speck = noise(spot.x, spot.y, spot.z, 44);
        Vec colour = mixed({0.63, 0.57, 0.46}, {0.74, 0.69, 0.58}, 0.5 + cloud);
        colour = mixed(colour, {0.22, 0.13, 0.07}, 0.75 * smooth_step(0.62, 0.74, speck));
        const double rim = smooth_step(height_ - 0.42, height_ - 0.1, q.y + 0.10 * cloud);
        colour = mixed(colour, {0.20, 0.11, 0.055}, 0.9 * rim);
        if (q.y < 0.9) colour = {0.36, 0.23, 0.14};
        return {colour, 0.05, 0.24, 0};
    }

  private:
    Vec foot_;
    double height_;
    double sphere_;
};

}  // namespace

std::unique_ptr<Body> jug(Vec foot) {
    return std::make_unique<Jug>(foot);
}

std::unique_ptr<Body> bowl(Vec foot, double radius, double height) {
    return std::make_unique<Bowl>(foot, radius, height);
}

}  // namespace tincture::samples
