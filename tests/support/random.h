// Random numbers for tests. Own ones: the distributions of the standard library give other numbers
// with another library.
#pragma once

#include <cstddef>
#include <cstdint>

namespace tincture::test_support {

// SplitMix64 (Steele, Lea, Flood, "Fast splittable pseudorandom number generators", OOPSLA 2014).
class Random {
  public:
    explicit Random(std::uint64_t seed) : state_(seed) {}

    std::uint64_t bits() {
        state_ += 0x9E3779B97F4A7C15U;
        std::uint64_t z = state_;
        z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9U;
        z = (z ^ (z >> 27)) * 0x94D049BB133111EBU;
        return z ^ (z >> 31);
    }
    // 0 <= result < 1.
    double unit() { return static_cast<double>(bits() >> 11) * 0x1p-53; }
    double between(double low, double high) { return low + (high - low) * unit(); }
    // 0 <= result < n.
    std::size_t below(std::size_t n) { return static_cast<std::size_t>(bits() % n); }
    // About normal, mean 0, variance 1: a sum of twelve.
    double bell() {
        double sum = -6;
        for (int i = 0; i < 12; ++i) sum += unit();
        return sum;
    }

  private:
    std::uint64_t state_;
};

}  // namespace tincture::test_support
