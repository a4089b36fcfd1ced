// Text for the columns of a terminal.
#pragma once

#include <cstddef>
#include <cstdint>
#include <string>
#include <string_view>

namespace tincture {

// Columns that `text`, valid UTF-8 without escape sequences, takes: two for East Asian wide
// characters, none for combining marks.
[[nodiscard]] std::size_t columns_of(std::string_view text);

// `text` with spaces in front, or behind, up to `width` columns.
[[nodiscard]] std::string flush_right(const std::string& text, std::size_t width);
[[nodiscard]] std::string flush_left(const std::string& text, std::size_t width);

// `first` and `text`, broken at spaces into lines of at most `width` columns; all lines but the
// first are indented by `indent`. A longer word stays whole. Ends with a line break.
[[nodiscard]] std::string wrapped(const std::string& first, std::string_view text,
                                  std::size_t width, std::size_t indent);

// 1234567 as 1,234,567.
[[nodiscard]] std::string grouped(std::uint64_t number);

}  // namespace tincture
