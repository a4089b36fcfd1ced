#include "label/mixing.h"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstddef>

namespace tincture {
namespace {

// Newton's method: a C library's roots need not be the same everywhere.
double cube_root(double x) {
    double root = 1;
    for (int i = 0; i < 60 && x > 0; ++i) root = (2 * root + x / (root * root)) / 3;
    return x > 0 ? root : 0;
}

// sRGB's encoding of light up to the square of `reach`, by steps of its square root, which makes
// the curve nearly straight.
class Encoding {
  public:
    Encoding() {
        for (std::size_t i = 0; i < table_.size(); ++i) {
            const double s = static_cast<double>(i) / steps;
            const double light = s * s;
            // light^(5/12) = s^(5/6)
            const double code =
                light <= 0.0031308 ? 12.92 * light : 1.055 * std::sqrt(s) * cube_root(s) - 0.055;
            table_[i] = static_cast<float>(255 * code);
        }
    }
    [[nodiscard]] float operator()(float light) const {
        const float place = std::sqrt(std::clamp(light, 0.0F, reach * reach)) * steps;
        const auto i = std::min(static_cast<std::size_t>(place), table_.size() - 2);
        return table_[i] + (table_[i + 1] - table_[i]) * (place - static_cast<float>(i));
    }

  private:
    static constexpr float steps = 1024;
    static constexpr float reach = 1.125F;
    std::array<float, 1153> table_{};
};

// The inverse of the cube root of CIELAB with its straight foot.
float cubed(float f) {
    constexpr float foot = 6.0F / 29;
    return f > foot ? f * f * f : 3 * foot * foot * (f - 4.0F / 29);
}

}  // namespace

Mixed mixed_of(float L, float a, float b) {
    static const Encoding encoded;
    const float fy = (L + 16) / 116;
    const float x = 0.9642F * cubed(fy + a / 500);
    const float y = cubed(fy);
    const float z = 0.8249F * cubed(fy - b / 200);
    // XYZ under D50 to linear sRGB: the inverse of the matrix in the ICC's sRGB profile, from
    // memory.
    const float red = encoded(3.1338561F * x - 1.6168667F * y - 0.4906146F * z);
    const float green = encoded(-0.9787684F * x + 1.9161415F * y + 0.0334540F * z);
    const float blue = encoded(0.0719453F * x - 0.2289914F * y + 1.4052427F * z);
    const float luma = 0.299F * red + 0.587F * green + 0.114F * blue;
    return {luma, colour_weight * 0.564F * (blue - luma), colour_weight * 0.713F * (red - luma)};
}

std::vector<Mixed> mixed_of(const Palette& palette) {
    std::vector<Mixed> mixed;
    for (const Swatch& swatch : palette.swatches) {
        mixed.push_back(mixed_of(static_cast<float>(swatch.lab.L), static_cast<float>(swatch.lab.a),
                                 static_cast<float>(swatch.lab.b)));
    }
    return mixed;
}

}  // namespace tincture
