// The bridge between device colours and CIELAB, by ICC profile through LittleCMS: relative
// colorimetric, black-point compensation off, D50.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <optional>
#include <span>
#include <string>
#include <utility>
#include <vector>

#include "colour/colour_model.h"
#include "colour/lab.h"
#include "colour/rgb.h"

namespace tincture {

// Lab values of pictures are held in steps of 2^-14: fine enough to be invisible (6e-5), exact in a
// float, an integer when multiplied out, so that sums of them are exact and the last bit of a C
// library's pow() cannot reach a result.
inline constexpr double lab_steps_per_unit = 16384.0;

// Planar Lab of n colours; each array holds n values.
struct LabPlanes {
    float* L;
    float* a;
    float* b;
};

// A value: copies share what was built, which nothing changes afterwards.
class ColourSpace {
  public:
    // sRGB; for grey, the neutrals of sRGB. CMYK has no default: throws std::invalid_argument.
    static ColourSpace standard(ColourModel model);

    // From an ICC profile. A grey picture may carry an RGB profile: its grey is then r = g = b
    // there. Throws Error(input) with `subject` for a profile that is damaged or meant for other
    // channels.
    static ColourSpace from_icc(std::span<const std::uint8_t> icc, ColourModel model,
                                const std::string& subject);

    [[nodiscard]] ColourModel model() const noexcept;
    [[nodiscard]] bool is_standard() const noexcept;  // made by standard()
    [[nodiscard]] const std::string& description() const noexcept;
    [[nodiscard]] std::span<const std::uint8_t> icc() const noexcept;  // empty for standard()

    // Device values in 0..1 (CMYK: 1 = full ink), interleaved, n * channel_count(model()) of them.
    // Writes n Lab colours in steps of 1 / lab_steps_per_unit. Safe from several threads at once.
    void to_lab(const float* device, std::size_t n, LabPlanes out) const;

    // Whether colours can be written in this space: RGB, with a way back from Lab.
    [[nodiscard]] bool is_writable() const noexcept;

    // The 8-bit colour nearest in device values, clipped to the space. Only if is_writable().
    [[nodiscard]] Rgb8 to_rgb8(const Lab& lab) const;

    // Lab of one 8-bit RGB colour, as to_lab() gives it. Only for RGB.
    [[nodiscard]] Lab lab_of(Rgb8 rgb) const;

  private:
    struct Impl;
    static std::shared_ptr<const Impl> standard_impl(ColourModel model);
    explicit ColourSpace(std::shared_ptr<const Impl> impl) : impl_(std::move(impl)) {}
    std::shared_ptr<const Impl> impl_;
};

}  // namespace tincture
