// Inks as print shops get them: papers, blacks, greys, pale and strong colours.
#pragma once

#include <vector>

#include "colour/lab.h"
#include "colour/rgb.h"
#include "tests/corpus/geometry.h"

namespace tincture::corpus {

[[nodiscard]] Lab lab_of(Rgb8 colour);                // sRGB
[[nodiscard]] double difference(Rgb8 one, Rgb8 two);  // CIEDE2000

[[nodiscard]] Rgb8 any_ink(Random& random);
[[nodiscard]] Rgb8 any_paper(Random& random);  // white, cream, pale or, now and then, strong

// The first is a paper; each two of the `n` at least `apart` CIEDE2000 from each other.
[[nodiscard]] std::vector<Rgb8> choose_inks(Random& random, int n, double apart);

// Moves `moved` to between `nearest` and `farthest` CIEDE2000 from ink `from`, still at least
// `farthest` from all others. False where no such colour was found.
[[nodiscard]] bool bring_near(Random& random, std::vector<Rgb8>& inks, std::size_t moved,
                              std::size_t from, double nearest, double farthest);

// Adds to the inks one that is at least `apart` from each of them; false where there is none.
[[nodiscard]] bool add_if_apart(std::vector<Rgb8>& inks, Rgb8 ink, double apart);

}  // namespace tincture::corpus
