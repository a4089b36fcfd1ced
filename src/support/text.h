// Outside text, such as the name of a file, made fit to be shown and to be written.
#pragma once

#include <string>
#include <string_view>

namespace tincture {

// `raw` as one line that is safe on a terminal: printable UTF-8 stays as it is, everything else is
// escaped. \n, \r and \t as such; other ASCII controls, and each byte that is not UTF-8, as \x1b;
// what is invisible (C1 controls, direction marks, zero-width and other default-ignorable
// characters of Unicode 14, line separators, non-characters) as \u202e or \U000e0001; a backslash
// doubled. Quotes stand round it only if it is empty or holds a space of any kind, a quote or an
// escape: double quotes if it holds a single quote and no double one, else single quotes, with each
// single quote inside as \'.
[[nodiscard]] std::string shown(std::string_view raw);

// `raw` with each maximal subpart of an ill-formed sequence replaced by one U+FFFD (The Unicode
// Standard, chapter 3.9, "U+FFFD Substitution of Maximal Subparts"). Valid text stays as it is.
[[nodiscard]] std::string valid_utf8(std::string_view raw);

}  // namespace tincture
