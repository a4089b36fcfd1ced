// Writes every file of every invented study into a folder, to look at and to validate.
// Usage: draw_fixtures FOLDER
#include <filesystem>
#include <fstream>
#include <iostream>
#include <iterator>

#include "output/curve_csv.h"
#include "output/curve_svg.h"
#include "output/study_json.h"
#include "output/swatch_csv.h"
#include "output/swatch_sheet.h"
#include "output/swatch_tokens.h"
#include "study_fixtures.h"

namespace {

template <typename Bytes>
void save(const std::filesystem::path& path, const Bytes& bytes) {
    std::ofstream file(path, std::ios::binary);
    std::copy(bytes.begin(), bytes.end(), std::ostreambuf_iterator<char>(file));
}

}  // namespace

int main(int argc, char** argv) {
    if (argc != 2) {
        std::cerr << "usage: draw_fixtures FOLDER\n";
        return 2;
    }
    using namespace tincture;
    for (const auto& [name, study] : fixtures::all()) {
        const std::filesystem::path folder = std::filesystem::path(argv[1]) / name;
        std::filesystem::create_directories(folder);
        save(folder / "curve.csv", curve_csv(study));
        save(folder / "curve.svg", curve_svg(study));
        save(folder / "study.json", study_json(study, "0.0.0"));
        save(folder / "swatches.csv", swatch_csv(study));
        save(folder / "swatches.svg", swatches_svg(study));
        save(folder / "swatches.png", swatches_png(study));
        save(folder / "swatches.tokens.json", swatch_tokens(study));
    }
}
