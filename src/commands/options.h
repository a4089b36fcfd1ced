// What the person asked for, checked as far as that is possible without opening a file.
#pragma once

#include <cstdint>
#include <filesystem>
#include <optional>
#include <string>
#include <vector>

#include "colour/notation.h"
#include "evidence/accents.h"

namespace tincture {

// Options that every command has.
struct CommonOptions {
    std::optional<std::filesystem::path> out;
    bool force = false;
    bool json = false;
    bool quiet = false;
    int threads = 0;  // 0: one a processor
};

// Options of the commands that choose a count.
struct ChoosingOptions {
    std::optional<int> count;
    int at_least = 2;
    int at_most = 24;
    double tolerance = 3;
    bool every_pixel_alike = false;  // not only flat areas are evidence
    Emphasis emphasis = Emphasis::automatic;
    std::vector<ColourText> keep;
};

struct ReduceOptions {
    CommonOptions common;
    ChoosingOptions choosing;
    std::filesystem::path picture;
    std::optional<std::filesystem::path> profile;
    std::optional<std::uint32_t> speck;  // pixels; unset: as the picture's kind asks for
    std::uint64_t max_pixels = 500'000'000;
};

}  // namespace tincture
