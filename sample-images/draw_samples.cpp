// Draws the sample pictures anew: draw-samples FOLDER [PICTURE...]
#include <array>
#include <cstdio>
#include <exception>
#include <string>
#include <string_view>

#include "pictures.h"

namespace {

struct Sample {
    std::string_view file_name;
    void (*draw)(const std::string& path);
};

constexpr std::array<Sample, 4> samples{{
    {"lantern-regatta-poster.png", &tincture::samples::draw_poster},
    {"sea-buckthorn-label.png", &tincture::samples::draw_label},
    {"kitchen-table-photograph.jpg", &tincture::samples::draw_photograph},
    {"river-delta-scene.tif", &tincture::samples::draw_scene},
}};

bool wanted(std::string_view file_name, int count, char** names) {
    for (int i = 0; i < count; ++i) {
        if (file_name.find(names[i]) != std::string_view::npos) return true;
    }
    return count == 0;
}

}  // namespace

int main(int argc, char** argv) {
    if (argc < 2) {
        std::fputs("usage: draw-samples FOLDER [PART-OF-A-FILE-NAME...]\n", stderr);
        return 2;
    }
    try {
        for (const Sample& sample : samples) {
            if (!wanted(sample.file_name, argc - 2, argv + 2)) continue;
            sample.draw(std::string(argv[1]) + "/" + std::string(sample.file_name));
        }
    } catch (const std::exception& error) {
        std::fprintf(stderr, "draw-samples: %s\n", error.what());
        return 1;
    }
    return 0;
}
