// The things on the table. Every place is where the thing touches the table, in centimetres.
#pragma once

#include <memory>

#include "render.h"

namespace tincture::samples {

[[nodiscard]] std::unique_ptr<Body> orange(Vec centre, double radius, std::uint64_t seed);
// Half an orange whose cut face looks along `face` (length 1).
[[nodiscard]] std::unique_ptr<Body> half_orange(Vec centre, double radius, Vec face);
[[nodiscard]] std::unique_ptr<Body> pear(Vec foot, double height, Vec lean, std::uint64_t seed);
[[nodiscard]] std::unique_ptr<Body> plum(Vec centre, double radius, Vec seam, std::uint64_t seed);
[[nodiscard]] std::unique_ptr<Body> leaf(Vec foot, Vec along, Vec face, double length,
                                         std::uint64_t seed);
[[nodiscard]] std::unique_ptr<Body> twig(Vec from, Vec bend, Vec to, double radius);

[[nodiscard]] std::unique_ptr<Body> jug(Vec foot);
[[nodiscard]] std::unique_ptr<Body> bowl(Vec foot, double radius, double height);
// A creased cloth; it lies flat within `flat_radius` of its middle, where something stands on it.
[[nodiscard]] std::unique_ptr<Body> cloth(Vec middle, double turn, double half_length,
                                          double half_width, double flat_radius);

}  // namespace tincture::samples
