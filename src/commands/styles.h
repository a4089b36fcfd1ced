// How the parts of the summary look.
#pragma once

#include <cstddef>
#include <string>

#include "colour/rgb.h"
#include "commands/terminal.h"

namespace tincture {

inline constexpr std::size_t margin = 2;  // columns that all but headings leave free

[[nodiscard]] std::string bold(const std::string& text, const Terminal& terminal);
[[nodiscard]] std::string faint(const std::string& text, const Terminal& terminal);

[[nodiscard]] std::size_t width_of(const Terminal& terminal);
// Whether there is room for what is of second importance.
[[nodiscard]] bool is_roomy(const Terminal& terminal);

// Text within the margin, in as many lines as it takes, each with its line break.
[[nodiscard]] std::string paragraph(const std::string& text, const Terminal& terminal);
// A paragraph that steps back behind the figures.
[[nodiscard]] std::string remark(const std::string& text, const Terminal& terminal);

// A colour, with a space behind it; nothing where there are no colours.
[[nodiscard]] std::string chip(Rgb8 colour, const Terminal& terminal);
// Two colours side by side in its place.
[[nodiscard]] std::string chips(Rgb8 left, Rgb8 right, const Terminal& terminal);
// The columns that either takes.
[[nodiscard]] std::size_t chip_width(const Terminal& terminal);

}  // namespace tincture
