// Lab of a picture's pixels where they stand, for what looks at neighbours.
#pragma once

#include <cstdint>
#include <optional>
#include <vector>

#include "colour/colour_space.h"
#include "histogram/colour_table.h"
#include "histogram/key_index.h"
#include "picture/picture.h"

namespace tincture {

// Steps of a Lab unit in a LabBand: whole numbers, so that sums over neighbours are the same on
// every machine.
inline constexpr int lab_band_steps = 64;

// No coordinate is larger than this many Lab units: squares of differences, times three, fit in 32
// bits.
inline constexpr int lab_band_most = 200;

// L of pixels that are not opaque: further from every colour than any two are from each other.
inline constexpr std::int16_t no_lab = -lab_band_most * lab_band_steps;

// A Lab coordinate in these steps, kept within lab_band_most.
[[nodiscard]] std::int16_t lab_step(float value);

// A colour in these steps.
struct LabSteps {
    std::int16_t L = 0, a = 0, b = 0;
};

// Some whole rows of a picture, planar: L[(y - first_row) * width + x], in steps of
// 1 / lab_band_steps.
struct LabBand {
    std::uint32_t width = 0;
    std::uint32_t first_row = 0;
    std::uint32_t rows = 0;
    std::vector<std::int16_t> L, a, b;
};

class PixelLab {
  public:
    // Of every `stride`-th pixel of every `stride`-th row. Picture and space must outlive this.
    PixelLab(const Picture& picture, const ColourTable& table, const ColourSpace& space,
             std::uint32_t stride = 1);

    [[nodiscard]] const Picture& picture() const { return picture_; }
    // Of what is looked at.
    [[nodiscard]] std::uint32_t width() const { return (picture_.width + stride_ - 1) / stride_; }
    [[nodiscard]] std::uint32_t height() const { return (picture_.height + stride_ - 1) / stride_; }

    // The rows [first, first + rows) of these. Safe from several threads at once.
    void read(std::uint32_t first, std::uint32_t rows, LabBand& band) const;

  private:
    [[nodiscard]] LabSteps lab_of(std::uint64_t key) const;
    void read_row(std::uint32_t y, std::size_t at, LabBand& band) const;

    const Picture& picture_;
    const ColourSpace& space_;
    std::uint32_t stride_;
    std::optional<KeyIndex> index_;  // unset where the table lists no keys
    std::vector<LabSteps> lab_;      // of each colour of the table
};

}  // namespace tincture
