// The few colours that were chosen.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "colour/lab.h"
#include "colour/rgb.h"

namespace tincture {

// One colour of a palette, as it is written.
struct Swatch {
    Rgb8 written;                    // in the RGB space of the reduced picture
    Rgb8 srgb;                       // the same in sRGB
    std::optional<double> hex_de00;  // how far `srgb` is off, where sRGB cannot hold the colour
    Lab lab;                         // of `written`
    std::uint64_t pixels = 0;        // opaque pixels of the original that are nearest to it
    double share = 0;                // pixels / opaque pixels
    bool kept = false;               // asked for with --keep
    std::string name;                // plain words, unique within its palette
};

// The palette of one count, largest share first.
struct Palette {
    int count = 0;
    std::vector<Swatch> swatches;
};

}  // namespace tincture
