// Characters of UTF-8 text.
#pragma once

#include <string>
#include <string_view>

namespace tincture {

// The characters of `raw`; what is ill-formed becomes U+FFFD, as in valid_utf8().
[[nodiscard]] std::u32string code_points(std::string_view raw);

// `codes`, which code_points() made, as UTF-8.
[[nodiscard]] std::string to_utf8(std::u32string_view codes);

// `raw` as valid text of XML 1.0 in which everything can be seen: what is ill-formed, a control, an
// invisible mark or turns the direction of text becomes U+FFFD.
[[nodiscard]] std::string legible(std::string_view raw);

}  // namespace tincture
