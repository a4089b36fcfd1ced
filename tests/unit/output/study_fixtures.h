// Invented studies, from plain to extreme, for the tests of everything that is written from one.
#pragma once

#include <string>
#include <vector>

#include "choose/study.h"

namespace tincture::fixtures {

[[nodiscard]] Study poster();         // 12 distinct colours: the error ends at 0; 7 proposed
[[nodiscard]] Study photograph();     // 1 to 25, tolerance out of reach, 9 proposed
[[nodiscard]] Study given();          // a label, 5 given where 8 are proposed, one swatch kept
[[nodiscard]] Study single_colour();  // a curve of one point, no error at all
[[nodiscard]] Study two_colours();    // a curve of two points
[[nodiscard]] Study many();           // 1 to 257, 64 proposed
[[nodiscard]] Study far_count();      // 1 to 25, then 200, which was given
[[nodiscard]] Study hostile();        // names that try to break out of every format
[[nodiscard]] Study nearly_exact();   // errors far below what the axes show
[[nodiscard]] Study wide_gamut();     // colours that sRGB cannot hold

struct Named {
    std::string name;
    Study study;
};

[[nodiscard]] std::vector<Named> all();

// Pseudo-random studies: curves of any length and steepness, votes anywhere.
[[nodiscard]] Study random_study(unsigned seed);

}  // namespace tincture::fixtures
