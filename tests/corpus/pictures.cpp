#include "tests/corpus/pictures.h"

#include <array>

namespace tincture::corpus {
namespace {

// In the order of the report.
constexpr std::array kinds = {Kind::poster, Kind::placard, Kind::near,  Kind::small,
                              Kind::fine,   Kind::label,   Kind::lines, Kind::screen,
                              Kind::fade,   Kind::photo,   Kind::accent};
// In the order of Kind.
constexpr std::array names = {"poster", "near", "small", "fine",   "label",  "lines",
                              "screen", "fade", "photo", "accent", "placard"};

Sample draw(Kind kind, Random& random) {
    switch (kind) {
        case Kind::label:
            return draw_label(random);
        case Kind::lines:
            return draw_lines(random);
        case Kind::screen:
            return draw_screen(random);
        case Kind::fade:
            return draw_fade(random);
        case Kind::photo:
            return draw_photo(random, false);
        case Kind::accent:
            return draw_photo(random, true);
        case Kind::placard:
            return draw_placard(random);
        default:
            return draw_poster(random, kind);
    }
}

}  // namespace

std::span<const Kind> all_kinds() {
    return kinds;
}

std::string name_of(Kind kind) {
    return names[static_cast<std::size_t>(kind)];
}

Sample draw_sample(Kind kind, std::uint64_t seed) {
    // Seeds side by side give unrelated pictures, and so do two kinds of one seed.
    Random mixed(seed * 16 + static_cast<std::uint64_t>(kind));
    Random random(mixed.bits());
    Sample sample = draw(kind, random);
    sample.kind = kind;
    sample.seed = seed;
    return sample;
}

std::vector<double> shares_of(std::span<const std::uint8_t> truth, std::size_t n) {
    std::vector<double> shares(n, 0);
    for (const std::uint8_t ink : truth) shares[ink] += 1;
    for (double& share : shares) share /= static_cast<double>(truth.size());
    return shares;
}

Sample flat_sample(const Canvas& canvas, std::vector<Rgb8> inks) {
    Sample sample;
    sample.picture = render(canvas, inks);
    sample.truth = canvas.centre_inks();
    sample.shares = shares_of(sample.truth, inks.size());
    sample.strokes = canvas.centre_strokes();
    sample.inks = std::move(inks);
    return sample;
}

}  // namespace tincture::corpus
