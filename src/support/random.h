// Random numbers that are the same everywhere: the distributions of the standard library differ
// between libraries.
#pragma once

#include <cstdint>

namespace tincture {

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

  private:
    std::uint64_t state_;
};

}  // namespace tincture
