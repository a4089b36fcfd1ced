#include <array>
#include <cmath>

#include "numbers.h"
#include "still_life.h"

namespace tincture::samples {
namespace {

Vec cube_corner(double half) {
    return {half, half, half};
}

double smooth_union(double a, double b, double reach) {
    const double h = std::max(reach - std::fabs(a - b), 0.0) / reach;
    return std::min(a, b) - h * h * reach / 4;
}

double to_segment(Vec p, Vec a, Vec b) {
    const Vec way = b - a;
    const double t = clamp01(dot(p - a, way) / dot(way, way));
    return length(p - a - way * t);
}

class Orange : public Body {
  public:
    Orange(Vec centre, double radius, std::uint64_t seed)
        : Body(centre - cube_corner(radius * 1.05), centre + cube_corner(radius * 1.05)),
          centre_(centre),
          radius_(radius),
          seed_(seed) {
        Random random(seed);
        const double x = random.between(-0.9, 0.9);
        const double z = random.between(-0.6, 0.9);
        stalk_ = normalised({x, 0.7, z});
    }

    [[nodiscard]] double distance(Vec p) const override {
        const Vec q = p - centre_;
        const double far = length(q) - radius_ * 1.04;
        if (far > 0.3) return far;
        const double lumps = 0.03 * noise(q.x * 0.4, q.y * 0.4, q.z * 0.4, seed_);
        // A shallow dimple round the stalk.
        const double near = dot(q, stalk_) / radius_;
        const double dimple = 0.09 * smooth_step(0.90, 1.0, near);
        return (length(q) - radius_ * (1 + lumps) + dimple) * 0.93;
    }

    [[nodiscard]] double relief(Vec p) const override {
        const Vec q = p - centre_;
        return -0.017 * pits(q) + 0.020 * noise(q.x * 1.8, q.y * 1.8, q.z * 1.8, seed_ + 2);
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const Vec q = p - centre_;
        const double blotch = fractal_noise(q.x * 0.35, q.y * 0.35, q.z * 0.35, 4, seed_ + 3);
        Vec colour = mixed({0.80, 0.245, 0.018}, {0.86, 0.36, 0.03}, 0.5 + 0.7 * blotch);
        colour *= 1 - 0.13 * pits(q);
        const double near = dot(normalised(q), stalk_);
        colour = mixed(colour, {0.50, 0.36, 0.05}, 0.5 * smooth_step(0.955, 1, near));
        if (near > 0.9952) colour = mixed({0.12, 0.13, 0.04}, {0.23, 0.17, 0.08}, 0.5 + blotch);
        return {colour, near > 0.9952 ? 0.02 : 0.045, 0.36, 0};
    }

  protected:
    // 1 in a pore of the skin. Two turned grids hide the grid of the noise.
    [[nodiscard]] double pits(Vec q) const {
        const Vec a = skewed(q) * 7.9;
        const Vec b = skewed(skewed(q)) * 6.3;
        const double sum = noise(a.x, a.y, a.z, seed_ + 1) + noise(b.x, b.y, b.z, seed_ + 4);
        return smooth_step(0.0, 1.0, sum);
    }

    Vec centre_;
    double radius_;
    std::uint64_t seed_;
    Vec stalk_;
};

class HalfOrange : public Orange {
  public:
    HalfOrange(Vec centre, double radius, Vec face) : Orange(centre, radius, 77), frame_(face) {}

    [[nodiscard]] double distance(Vec p) const override {
        const double cut = dot(p - centre_, frame_.up) - 0.02;
        const double sphere = Orange::distance(p);
        // A slightly rounded edge.
        const double a = std::max(cut + 0.08, 0.0);
        const double b = std::max(sphere + 0.08, 0.0);
        const double inside = std::min(std::max(cut, sphere) + 0.08, 0.0);
        return (inside + std::sqrt(a * a + b * b) - 0.08) * 0.97;
    }

    [[nodiscard]] double relief(Vec p) const override {
        const Cut cut = look(p);
        if (!cut.on_face) return Orange::relief(p);
        return cut.pulp * (0.05 * cut.juice - 0.02) + 0.02 * cut.vein;
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const Cut cut = look(p);
        if (!cut.on_face) return Orange::surface(p);
        const Vec pith{0.86, 0.72, 0.45};
        const Vec rind{0.84, 0.30, 0.02};
        Vec pulp = mixed({0.78, 0.20, 0.012}, {0.93, 0.45, 0.06}, 0.5 + 0.55 * cut.juice);
        pulp = mixed(pulp, {0.92, 0.62, 0.22}, 0.35 * smooth_step(0.45, 0.1, cut.out));
        Vec colour = mixed(pith, pulp, cut.pulp);
        colour = mixed(colour, rind, smooth_step(0.945, 0.965, cut.out));
        return {colour, 0.045, mix(0.5, 0.22, cut.pulp), 0};
    }

  private:
    struct Cut {
        bool on_face;
        double out;    // 0 in the middle, 1 at the rim
        double pulp;   // 1 within a segment, 0 on pith and skins
        double juice;  // the single sacs, -1 to 1
        double vein;
    };

    [[nodiscard]] Cut look(Vec p) const {
        const Vec q = frame_.to_local(p - centre_);
        Cut cut{q.y > -0.12, std::sqrt(q.x * q.x + q.z * q.z) / radius_, 0, 0, 0};
        constexpr int segments = 11;
        const double wobble = 0.05 * noise(q.x * 0.8, q.z * 0.8, 0, seed_ + 9);
        const double turn = angle_of(q.z, q.x) / (2 * pi) * segments + 40 + 2.2 * wobble;
        const double within = turn - std::floor(turn);
        // Distance from the skin between two segments, in centimetres.
        const double skin = std::min(within, 1 - within) * 2 * pi / segments * cut.out * radius_;
        const double core = 0.085 + 0.02 * noise(turn, 0, 0, seed_ + 8);
        const double rim = 0.875 + 0.012 * noise(turn * 1.7, 0, 0, seed_ + 7) -
                           0.05 * smooth_step(0.16, 0.0, std::min(within, 1 - within));
        cut.pulp = smooth_step(0.025, 0.075, skin) * smooth_step(core, core + 0.03, cut.out) *
                   smooth_step(rim, rim - 0.025, cut.out);
        // Sacs are long and point to the middle.
        const double across = turn * 3.1;
        cut.juice = 0.65 * noise(across, cut.out * 4.5, 1.5, seed_ + 5) +
                    0.45 * noise(across * 2.3, cut.out * 9, 4.5, seed_ + 6);
        cut.vein = noise(q.x * 5, q.z * 5, 2, seed_ + 4);
        return cut;
    }

    Frame frame_;
};

class Pear : public Body {
  public:
    Pear(Vec foot, double height, Vec lean, std::uint64_t seed)
        : Body(foot - cube_corner(height), foot + cube_corner(height * 1.35)),
          foot_(foot),
          scale_(height / 9),
          frame_(normalised(lean)),
          seed_(seed) {}

    [[nodiscard]] double distance(Vec p) const override {
        const Vec q = to_pear(p);
        const double far = length(q - Vec{0.3, 5.2, 0}) - 5.8;
        if (far > 0.3) return far * scale_;
        return std::min(flesh(q), stalk(q)) * scale_ * 0.92;
    }

    [[nodiscard]] double relief(Vec p) const override {
        const Vec q = to_pear(p);
        return 0.010 * fractal_noise(q.x * 2, q.y * 2, q.z * 2, 3, seed_ + 4);
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const Vec q = to_pear(p);
        if (stalk(q) < flesh(q)) return {{0.11, 0.065, 0.03}, 0.03, 0.6, 0};
        const double cloud = fractal_noise(q.x * 0.5, q.y * 0.5, q.z * 0.5, 4, seed_ + 1);
        Vec colour = mixed({0.43, 0.44, 0.055}, {0.66, 0.55, 0.11}, 0.55 + 0.6 * cloud);
        // The side that saw the sun is red, in streaks.
        const double side = normalised(q - Vec{0, q.y, 0} + Vec{0, 0.001, 0}).x;
        const double streak = noise(angle_of(q.z, q.x) * 9, q.y * 0.5, 0, seed_ + 2);
        const double blush = smooth_step(0.1, 1.25, side + 0.45 * cloud + 0.12 * streak);
        colour = mixed(colour, {0.52, 0.10, 0.035}, 0.78 * blush);
        const double dots = noise(q.x * 6, q.y * 6, q.z * 6, seed_ + 3);
        colour = mixed(colour, {0.36, 0.24, 0.10}, 0.55 * smooth_step(0.58, 0.74, dots));
        colour = mixed(colour, {0.26, 0.15, 0.06}, 0.7 * smooth_step(0.9, 0.2, q.y + 0.4 * cloud));
        return {colour, 0.042, 0.34, 0};
    }

  private:
    [[nodiscard]] Vec to_pear(Vec p) const { return frame_.to_local(p - foot_) / scale_; }
    [[nodiscard]] double flesh(Vec q) const {
        const double belly = length(q - Vec{0, 3.15, 0}) - 3.15;
        const double neck = length(q - Vec{0.25, 7.45, 0}) - 1.25;
        const double lumps = 0.10 * noise(q.x * 0.45, q.y * 0.45, q.z * 0.45, seed_);
        const double dip =
            0.25 * smooth_step(0.9, 0.1, length({q.x, 0, q.z})) * smooth_step(5, 9, q.y);
        return smooth_union(belly, neck, 3.1) + lumps + dip;
    }
    [[nodiscard]] double stalk(Vec q) const {
        const double lower = to_segment(q, {0.25, 8.2, 0}, {0.45, 9.4, 0.1});
        const double upper = to_segment(q, {0.45, 9.4, 0.1}, {0.95, 10.5, 0.2});
        return std::min(lower - 0.14, upper - 0.16);
    }

    Vec foot_;
    double scale_;
    Frame frame_;
    std::uint64_t seed_;
};

class Plum : public Body {
  public:
    Plum(Vec centre, double radius, Vec seam, std::uint64_t seed)
        : Body(centre - cube_corner(radius * 1.25), centre + cube_corner(radius * 1.25)),
          centre_(centre),
          radius_(radius),
          frame_(seam),
          seed_(seed) {}

    [[nodiscard]] double distance(Vec p) const override {
        const Vec q = frame_.to_local(p - centre_) / radius_;
        const Vec stretched{q.x, q.y * 0.87, q.z};
        const double angle = angle_of(q.z, q.x);
        const double groove = 0.06 * smooth_step(0.30, 0.0, std::fabs(angle)) *
                              smooth_step(0.1, 0.8, length({q.x, 0, q.z}));
        const double dimple =
            0.16 * smooth_step(0.4, 0.0, length({q.x, 0, q.z})) * smooth_step(0.5, 1.0, q.y);
        return (length(stretched) - 1 + groove + dimple) * radius_ * 0.85;
    }

    [[nodiscard]] Surface surface(Vec p) const override {
        const Vec q = p - centre_;
        const double cloud = fractal_noise(q.x * 0.7, q.y * 0.7, q.z * 0.7, 5, seed_);
        const double rubbed = fractal_noise(q.x * 1.3 + 9, q.y * 0.9, q.z * 1.3, 3, seed_ + 6);
        const Vec skin = mixed({0.055, 0.010, 0.028}, {0.15, 0.018, 0.035}, 0.5 + 0.8 * cloud);
        const double bloom = clamp01(0.42 + 0.55 * cloud) * smooth_step(0.45, -0.1, rubbed);
        return {mixed(skin, {0.20, 0.22, 0.34}, 0.62 * bloom), 0.04, mix(0.24, 0.55, bloom), 0};
    }

  private:
    Vec centre_;
    double radius_;
    Frame frame_;
    std::uint64_t seed_;
};

}  // namespace

std::unique_ptr<Body> orange(Vec centre, double radius, std::uint64_t seed) {
    return std::make_unique<Orange>(centre, radius, seed);
}

std::unique_ptr<Body> half_orange(Vec centre, double radius, Vec face) {
    return std::make_unique<HalfOrange>(centre, radius, face);
}

std::unique_ptr<Body> pear(Vec foot, double height, Vec lean, std::uint64_t seed) {
    return std::make_unique<Pear>(foot, height, lean, seed);
}

std::unique_ptr<Body> plum(Vec centre, double radius, Vec seam, std::uint64_t seed) {
    return std::make_unique<Plum>(centre, radius, seam, seed);
}

}  // namespace tincture::samples
