// How light gets from the window and the sun to the lens: one path a sample.
#pragma once

#include <array>
#include <cstdint>

#include "numbers.h"
#include "render.h"

namespace tincture::samples {

struct Ray {
    Vec origin;
    Vec direction;
    Vec inverse;

    Ray(Vec o, Vec d) : origin(o), direction(d), inverse{1 / d.x, 1 / d.y, 1 / d.z} {}
    [[nodiscard]] Vec at(double t) const { return origin + direction * t; }
};

// The first numbers of each sample come from evenly spread sequences (multiples of square roots of
// primes, shifted for each pixel), the later ones are random.
class Sampler {
  public:
    Sampler(std::uint64_t pixel, int index) : random_(pixel * 0x10001 + 7), index_(index) {
        for (double& shift : shifts_) shift = random_.unit();
        random_ = Random(random_.next() + static_cast<std::uint64_t>(index) * 0xD1342543DE82EF95U);
    }
    [[nodiscard]] double next() {
        static constexpr std::array<double, 12> primes{2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37};
        if (used_ == primes.size()) return random_.unit();
        const double x = shifts_[used_] + index_ * std::sqrt(primes[used_]);
        ++used_;
        return x - std::floor(x);
    }

  private:
    Random random_;
    int index_;
    std::size_t used_ = 0;
    std::array<double, 12> shifts_{};
};

// What one sample sees. The light that reaches a matt surface by detours varies slowly over it, so
// it is kept apart from the surface's colour and can be smoothed.
struct Seen {
    Vec light;   // direct light and reflections in the coat
    Vec detour;  // to be multiplied with `colour`
    Vec colour;
    Vec normal;
    Vec point;

    Seen& operator+=(const Seen& b) {
        light += b.light;
        detour += b.detour;
        colour += b.colour;
        normal += b.normal;
        point += b.point;
        return *this;
    }
};

[[nodiscard]] Seen look(const Stage& stage, Ray ray, Sampler& sampler);

}  // namespace tincture::samples
