// Colour profiles made with LittleCMS, and its own plain way from device values to Lab.
#pragma once

#include <cstdint>
#include <memory>
#include <span>
#include <vector>

#include "colour/lab.h"
#include "picture/picture.h"

namespace tincture::test_support {

using Bytes = std::vector<std::uint8_t>;

[[nodiscard]] Bytes wide_gamut_profile();  // RGB, primaries far beyond sRGB's, gamma 1.8
[[nodiscard]] Bytes grey_profile();        // gamma 2.2
[[nodiscard]] Bytes cmyk_profile();        // a small table from CMYK to Lab, no way back
[[nodiscard]] Bytes rgb_table_profile();   // a small table from RGB to Lab, no way back
[[nodiscard]] Bytes lab_profile();         // describes no device: an abstract space
[[nodiscard]] Bytes link_profile();        // a device link from RGB to RGB

// LittleCMS in double precision: relative colorimetric, no black-point compensation.
class LcmsLab {
  public:
    LcmsLab();  // sRGB
    LcmsLab(std::span<const std::uint8_t> icc, ColourModel model);
    ~LcmsLab();
    LcmsLab(const LcmsLab&) = delete;
    LcmsLab& operator=(const LcmsLab&) = delete;

    // Device values in 0..1 (CMYK: 1 = full ink).
    [[nodiscard]] Lab operator()(const std::vector<double>& device) const;
    // Of a pixel of a picture.
    [[nodiscard]] Lab operator()(const Picture& picture, std::size_t pixel) const;

  private:
    void* transform_;
    double full_;  // what LittleCMS calls full ink or light
};

}  // namespace tincture::test_support
