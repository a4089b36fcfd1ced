// Some rows of a label map with what surrounds them, as the passes over edges take them.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "histogram/pixel_lab.h"
#include "label/mixing.h"

namespace tincture {

// Some rows of a label map, padded by `margin` pixels on every side, where the picture goes on or
// its border is repeated. Meant to be used for one band after the other: memory is kept.
struct EdgeBand {
    static constexpr int margin = 16;

    int width = 0;                    // padded
    int height = 0;                   // padded
    int transparent = 0;              // a label; 256 with a palette that leaves none
    std::vector<std::uint8_t> label;  // may be changed
    std::vector<std::uint8_t> core;   // 1: all of 3 x 3 had one label, and it fits
    std::vector<std::size_t> edges;   // opaque pixels that are not core, up to half the margin away
    std::vector<std::uint8_t> zone;   // 1: near an edge, its colour is known; see load_colours()
    std::vector<float> y, u, v;       // Mixed of the edges and of the pixels in the zone

    // The place in `edges` of an edge, no_edge for other pixels.
    static constexpr std::uint32_t no_edge = 0xFFFF'FFFF;
    [[nodiscard]] std::uint32_t edge_at(std::size_t i) const {
        const std::uint32_t e = place[i];
        return e < edges.size() && edges[e] == i ? e : no_edge;
    }
    [[nodiscard]] std::size_t at(int x, int row) const {
        return static_cast<std::size_t>(row) * static_cast<std::size_t>(width) +
               static_cast<std::size_t>(x);
    }
    [[nodiscard]] Mixed colour(std::size_t i) const { return {y[i], u[i], v[i]}; }

    std::vector<std::uint32_t> place;  // right for edges, anything for others
    LabBand lab;                       // as read last
};

struct LabelRows {
    const std::uint8_t* labels;  // of the whole map
    std::uint32_t width;
    std::uint32_t height;
    std::uint32_t first;
    std::uint32_t rows;
};

// Labels, core and edges of a band. Nothing else is filled.
void load_labels(const LabelRows& from, int transparent, EdgeBand& band);

// Reads the Lab of a band's rows; load_labels() comes first.
void read_lab(const LabelRows& from, const PixelLab& pixels, EdgeBand& band);

// Makes edges of all pixels that are further than `limit_de` (dE76) from the colour of their label:
// blur can make a stroke so faint that all of it gets the label of its ground.
void add_faint_edges(const LabelRows& from, const Palette& palette, double limit_de,
                     EdgeBand& band);

// Colours of the edges and of all pixels up to `radius` (0 to 8) columns and rows from one: the
// zone, which stays as it was for a radius of 0. read_lab() comes first.
void load_colours(const LabelRows& from, int radius, EdgeBand& band);

}  // namespace tincture
