// Regions of a label map: runs of one label that hang together.
#pragma once

#include <cstdint>
#include <vector>

#include "regions/runs.h"

namespace tincture {

// Whether pixels that touch at a corner alone hang together.
enum class Connectivity { sides, sides_and_corners };

// For each run the first run of its component: a number that names the component. Union-find over
// runs (Rosenfeld and Pfaltz, "Sequential operations in digital picture processing", J. ACM 13
// (1966) 471-494), in blocks of rows that are then joined: linear in runs, the same for any number
// of threads.
[[nodiscard]] std::vector<std::uint32_t> find_components(const Runs& runs,
                                                         Connectivity connectivity);

// Pixels of each component, at the place of its first run; 0 at all others.
[[nodiscard]] std::vector<std::uint64_t> component_areas(
    const Runs& runs, const std::vector<std::uint32_t>& component);

}  // namespace tincture
