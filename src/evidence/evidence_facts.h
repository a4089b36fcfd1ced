#pragma once

#include <optional>
#include <string>

namespace tincture {

// What is known of what the count is judged on. Unset: not measured.
struct EvidenceFacts {
    std::optional<std::string> kind;   // "flat art" or "continuous tone"
    std::optional<double> flat_share;  // part of the opaque pixels that lie flat in an ink
    std::optional<double> noise;       // dE76, root mean square
    std::optional<int> inks;           // colours that stand out in flat areas
    int perhaps_more_inks = 0;         // that stand out as well, but were taken for blends
};

}  // namespace tincture
