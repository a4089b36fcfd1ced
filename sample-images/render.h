// A small path tracer for one kind of picture: things on a table in a room with a window and the
// sun. Lengths are centimetres; y points up, the table top is y = 0.
#pragma once

#include <memory>
#include <vector>

#include "vector.h"

namespace tincture::samples {

struct Surface {
    Vec colour;               // diffuse reflectance, linear
    double shine = 0.04;      // reflectance of the coat at normal incidence; 0: none
    double roughness = 0.5;   // of the coat, 0.1 to 1
    double translucency = 0;  // share of the diffuse light that passes (leaves)
};

// A solid given by its distance function: positive outside, never larger than the way to the
// surface.
class Body {
  public:
    Body(Vec low_corner, Vec high_corner) : low(low_corner), high(high_corner) {}
    virtual ~Body() = default;

    [[nodiscard]] virtual double distance(Vec p) const = 0;
    [[nodiscard]] virtual Surface surface(Vec p) const = 0;
    // Height of a fine texture that tilts the normal but not the outline.
    [[nodiscard]] virtual double relief(Vec) const { return 0; }

    Vec low;  // corners of a box around it
    Vec high;
};

// Bodies that are near each other; its box is tested before theirs.
struct Group {
    Vec low{1e9, 1e9, 1e9};
    Vec high{-1e9, -1e9, -1e9};
    std::vector<std::unique_ptr<Body>> bodies;

    void add(std::unique_ptr<Body> body);
};

// The box of the room; the window is in the wall on the left (x = low.x).
struct Room {
    Vec low;
    Vec high;
    double table_half_width;
    double table_back;
    double table_front;
    double window_low, window_high;    // y
    double window_back, window_front;  // z
    int panes_across, panes_up;
    double bar;  // width of the bars between the panes

    [[nodiscard]] bool through_pane(double y, double z) const;
    [[nodiscard]] Surface surface(Vec p, Vec normal) const;
    [[nodiscard]] double relief(Vec p, Vec normal) const;
};

struct Lights {
    Vec to_sun;         // length 1
    double sun_spread;  // sine of the half angle of its disc
    Vec sun;            // irradiance on a surface that faces it
    Vec sky;            // radiance of the window
};

struct Stage {
    Room room;
    Lights lights;
    std::vector<Group> groups;
};

struct Camera {
    Vec eye;
    Vec target;
    double half_height;  // tangent of half the vertical field of view
    double focus;        // distance of the sharp plane
    double lens_radius;
};

// Radiance of each pixel, rows from the top. The same for any number of threads.
[[nodiscard]] std::vector<Vec> render(const Stage& stage, const Camera& camera, int width,
                                      int height, int samples);

}  // namespace tincture::samples
