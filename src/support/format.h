// Numbers and fields as text, the same in every locale.
#pragma once

#include <string>
#include <string_view>

namespace tincture {

// `value` with exactly `decimals` decimals (0 to 12) after a point, correctly rounded, never a
// negative zero; empty where it is not finite.
[[nodiscard]] std::string fixed(double value, int decimals);

// The number that fixed() shows: nearest to `value` of all with so many decimals.
[[nodiscard]] double rounded(double value, int decimals);

// fixed() with a true minus sign (U+2212), for text that people read.
[[nodiscard]] std::string readable(double value, int decimals);

// "1 colour", "7 colours".
[[nodiscard]] std::string colours(int count);

// A CSV field (RFC 4180): in quotes only where it must be.
[[nodiscard]] std::string csv_field(std::string_view text);

}  // namespace tincture
