// Outlines of what placards show. Points in pixels, angles in turns; every outline that is no hole
// runs in one direction.
#pragma once

#include <span>

#include "tests/corpus/sheet.h"

namespace tincture::corpus {

[[nodiscard]] Shape box_shape(const Box& box);
[[nodiscard]] Shape frame_shape(const Box& box, double thickness);  // inside the box
// A disc, or with few corners a polygon of equal sides.
[[nodiscard]] Shape disc_shape(Point centre, double radius, int corners = 96, double turns = 0);
[[nodiscard]] Shape ring_shape(Point centre, double outer, double inner);
// Wedges of half the circle around `centre`, as far as `reach`.
[[nodiscard]] Shape rays_shape(Point centre, double reach, int rays, double turns);
[[nodiscard]] Shape cog_shape(Point centre, double radius, int teeth, double turns);
[[nodiscard]] Shape crescent_shape(Point centre, double radius, double turns);
// From its stem; widest in the middle, where it is `width`.
[[nodiscard]] Shape leaf_shape(Point stem, double length, double width, double turns);
// All between the sum of two waves and `bottom`, from 0 to `width`.
[[nodiscard]] Shape hill_shape(const Wave& one, const Wave& two, double width, double bottom);

// A brush's line along points, as wide as `widths` says at each, ends round. No turn in it is
// sharper than its width.
[[nodiscard]] Shape brush_shape(std::span<const Point> points, std::span<const double> widths);

[[nodiscard]] int letter_count();
// A letter of an invented alphabet of solid forms with its top left corner there; adds it to
// `shape` and returns its width.
double add_letter(Shape& shape, int letter, Point corner, double height);

void add_to(Shape& shape, Shape&& more);

}  // namespace tincture::corpus
