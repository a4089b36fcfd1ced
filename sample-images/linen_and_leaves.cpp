#include <array>
#include <cmath>

#include "numbers.h"
#include "still_life.h"

namespace tincture::samples {
namespace {

class Leaf : public Body {
  public:
    Leaf(Vec foot, Vec along, Vec face, double size, std::uint64_t seed)
        : Body(foot - Vec{size, size, size} * 1.1, foot + Vec{size, size, size} * 1.1),
          foot_(foot),
          along_(normalised(along)),
          across_(normalised(cross(face, along_))),
          face_(cross(along_, across_)),
          size_(size),
          seed_(seed) {
        const Vec tip = foot + along_ * size;
        const Vec room{0.36 * size, 0.36 * size, 0.36 * size};
        low = Vec{std::min(foot.x, tip.x), std::min(foot.y, tip.y), std::min(foot.z, tip.z)} - room;
        high =
            Vec{std::max(foot.x, tip.x), std::max(foot.y, tip.y), std::max(foot.z, tip.z)} + room;
    }

    [[nodiscard]] double distance(Vec p) const override {
        const Local q = to_leaf(p);
        const double half = size_ * 0.21;
        // Two circles that meet at foot and tip bound the leaf.
        const double big = (size_ * size_ / 4 + half * half) / (2 * half);
        const double rim =
            std::sqrt((q.a - size_ / 2) * (q.a - size_ / 2) +
                      (std::fabs(q.b) + big - half) * (std::fabs(q.b) + big - half)) -
            big;
        return std::max(rim, std::fabs(q.c) - 0.03) * 0.72;
    }

    [[nodiscard]] double relief(Vec p) const override {
        const Local q = to_leaf(p);
        return -0.02 * smooth_step(0.09, 0.0, std::fabs(q.b)) +
               0.006 * noise(p.x * 3, p.y * 3, p.z * 3, seed_);
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const Local q = to_leaf(p);
        const double cloud = fractal_noise(p.x * 0.5, p.y * 0.5, p.z * 0.5, 3, seed_);
        const double age = cell_value(1, 2, 3, seed_);
        Vec colour = mixed({0.085, 0.16, 0.075}, {0.20, 0.27, 0.13}, 0.45 + 0.5 * cloud);
        colour = mixed(colour, {0.33, 0.27, 0.09}, 0.45 * age * age);
        colour = mixed(colour, {0.34, 0.36, 0.20}, 0.7 * smooth_step(0.055, 0.02, std::fabs(q.b)));
        return {colour, 0.04, 0.42, 0.32};
    }

  private:
    struct Local {
        double a, b, c;
    };
    [[nodiscard]] Local to_leaf(Vec p) const {
        const Vec q = p - foot_;
        Local local{dot(q, along_), dot(q, across_), dot(q, face_)};
        // Tips hang and the halves fold up along the rib.
        local.c += 0.30 * local.a * local.a / size_ - 0.30 * std::fabs(local.b);
        return local;
    }

    Vec foot_;
    Vec along_;
    Vec across_;
    Vec face_;
    double size_;
    std::uint64_t seed_;
};

class Twig : public Body {
  public:
    Twig(Vec from, Vec bend, Vec to, double radius) : Body(from, to), radius_(radius) {
        for (std::size_t i = 0; i < points_.size(); ++i) {
            const double t = static_cast<double>(i) / (knots - 1);
            points_[i] = mixed(mixed(from, bend, t), mixed(bend, to, t), t);
            const Vec room{radius * 1.5, radius * 1.5, radius * 1.5};
            const Vec a = points_[i] - room;
            const Vec b = points_[i] + room;
            low =
                i == 0 ? a : Vec{std::min(low.x, a.x), std::min(low.y, a.y), std::min(low.z, a.z)};
            high = i == 0
                       ? b
                       : Vec{std::max(high.x, b.x), std::max(high.y, b.y), std::max(high.z, b.z)};
        }
    }

    [[nodiscard]] double distance(Vec p) const override {
        double nearest = 1e9;
        for (std::size_t i = 0; i + 1 < points_.size(); ++i) {
            const Vec way = points_[i + 1] - points_[i];
            const double t = clamp01(dot(p - points_[i], way) / dot(way, way));
            const double thin = 1 - 0.5 * (static_cast<double>(i) + t) / knots;
            nearest = std::min(nearest, length(p - points_[i] - way * t) - radius_ * thin);
        }
        return nearest * 0.95;
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const double bark = fractal_noise(p.x * 2, p.y * 2, p.z * 2, 3, 52);
        return {mixed({0.13, 0.085, 0.05}, {0.25, 0.18, 0.11}, 0.5 + bark), 0.02, 0.7, 0};
    }

  private:
    static constexpr int knots = 10;
    std::array<Vec, knots> points_{};
    double radius_;
};

class Cloth : public Body {
  public:
    Cloth(Vec middle, double turn, double half_length, double half_width, double flat_radius)
        : Body(middle, middle),
          middle_(middle),
          cos_(cosine(turn)),
          sin_(sine(turn)),
          half_length_(half_length),
          half_width_(half_width),
          flat_radius_(flat_radius) {
        const double reach = std::sqrt(half_length * half_length + half_width * half_width);
        low = middle + Vec{-reach, -0.1, -reach};
        high = middle + Vec{reach, 2.6, reach};
    }

    [[nodiscard]] double distance(Vec p) const override {
        const double above = p.y - middle_.y - highest_crease;
        if (above > 0.3) return above;
        const Spot q = to_cloth(p);
        const double side = std::max(std::fabs(q.u) - half_length_ - edge_wave(q.v),
                                     std::fabs(q.v) - half_width_ - edge_wave(q.u + 50));
        const double sheet = std::fabs(p.y - middle_.y - rise(q) - 0.14) - 0.11;
        return (std::max(side, sheet) - 0.02) * 0.55;
    }

    [[nodiscard]] double relief(Vec p) const override {
        const Spot q = to_cloth(p);
        const double drift = 0.05 * noise(q.u * 0.7, q.v * 0.7, 0, 61);
        const double warp = sine(2 * pi * (q.u + drift) / 0.17);
        const double weft = sine(2 * pi * (q.v + drift) / 0.17);
        return 0.013 * warp * weft + 0.010 * fractal_noise(q.u * 2.5, q.v * 2.5, 0, 3, 62);
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const Spot q = to_cloth(p);
        const double thread = noise(q.u * 7, q.v * 0.8, 0, 63) + noise(q.u * 0.8, q.v * 7, 0, 64);
        Vec colour = Vec{0.66, 0.61, 0.52} * (1 + 0.07 * thread);
        // Stripes woven along two of the edges.
        const double edge = half_width_ - std::fabs(q.v);
        const bool stripe =
            (edge > 2.2 && edge < 3.6) || (edge > 4.1 && edge < 4.5) || (edge > 1.3 && edge < 1.7);
        if (stripe) colour = Vec{0.11, 0.20, 0.30} * (1 + 0.20 * thread);
        const double hem = std::min(edge, half_length_ - std::fabs(q.u));
        if (hem > 0.62 && hem < 0.70) colour *= 0.72;
        return {colour, 0, 1, 0};
    }

  private:
    struct Spot {
        double u, v;
    };
    static constexpr double highest_crease = 2.0;

    [[nodiscard]] Spot to_cloth(Vec p) const {
        const double x = p.x - middle_.x;
        const double z = p.z - middle_.z;
        return {x * cos_ + z * sin_, -x * sin_ + z * cos_};
    }
    [[nodiscard]] static double edge_wave(double t) { return 0.25 * noise(t * 0.16, 3, 0, 65); }
    // Creases: soft ridges along bent lines, none under what stands on the cloth.
    [[nodiscard]] double rise(Spot q) const {
        const double out = std::sqrt(q.u * q.u + q.v * q.v);
        const double loose = smooth_step(flat_radius_, flat_radius_ + 7, out);
        const double bend = 2.2 * noise(q.u * 0.09, q.v * 0.09, 0, 66);
        const auto ridge = [&](double across, double width) {
            const double t = across / width;
            return 1 / (1 + t * t * t * t);
        };
        const double first = 1.25 * ridge(q.v - 0.55 * q.u + 4.5 + bend, 1.15);
        const double second = 0.95 * ridge(q.v + 0.34 * q.u - 7.5 + bend, 1.0);
        const double third = 0.75 * ridge(q.u + 0.25 * q.v - 14.5 + bend, 1.3);
        const double fourth = 0.8 * ridge(q.u - 0.4 * q.v + 15.0 - bend, 1.2);
        const double soft = 0.22 * (1 + noise(q.u * 0.22, q.v * 0.22, 0, 67));
        return loose * (std::max({first, second, third, fourth}) + soft);
    }

    Vec middle_;
    double cos_;
    double sin_;
    double half_length_;
    double half_width_;
    double flat_radius_;
};

}  // namespace

std::unique_ptr<Body> leaf(Vec foot, Vec along, Vec face, double length, std::uint64_t seed) {
    return std::make_unique<Leaf>(foot, along, face, length, seed);
}

std::unique_ptr<Body> twig(Vec from, Vec bend, Vec to, double radius) {
    return std::make_unique<Twig>(from, bend, to, radius);
}

std::unique_ptr<Body> cloth(Vec middle, double turn, double half_length, double half_width,
                            double flat_radius) {
    return std::make_unique<Cloth>(middle, turn, half_length, half_width, flat_radius);
}

}  // namespace tincture::samples
