// Which colour space a picture's samples are in.
#pragma once

#include <filesystem>
#include <optional>
#include <string>

#include "colour/colour_space.h"
#include "picture/picture.h"

namespace tincture {

// The embedded profile's space; where there is none, or it cannot be used, that of the profile file
// `named`, if given; else sRGB for RGB and its neutrals for grey. Throws Error(input) with
// `subject` (the picture) or the profile file for CMYK without a profile and for profiles that
// cannot be used.
[[nodiscard]] ColourSpace picture_space(const Picture& picture, const std::string& subject,
                                        const std::optional<std::filesystem::path>& named);

// The space that colours of such pictures are written in: the same, or sRGB where that holds no RGB
// or has no way back from Lab.
[[nodiscard]] ColourSpace written_space(const Picture& picture, const std::string& subject,
                                        const std::optional<std::filesystem::path>& named);

}  // namespace tincture
