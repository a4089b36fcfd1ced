#include "study_fixtures.h"

#include <algorithm>
#include <cmath>
#include <functional>
#include <random>

#include "palette/names.h"

namespace tincture::fixtures {
namespace {

// A portable draw from 0 to 1: the library's distributions differ between compilers.
double draw(std::mt19937& random) {
    return static_cast<double>(random()) / 4294967296.0;
}

// CIELAB D50 to sRGB, Bradford-adapted matrix of CSS Color 4 (from memory); clipped.
Rgb8 to_srgb(const Lab& lab) {
    const auto inverse = [](double t) {
        return t > 6.0 / 29 ? t * t * t : 3 * 36.0 / 841 * (t - 4.0 / 29);
    };
    const double fy = (lab.L + 16) / 116;
    const double x = 0.9642 * inverse(fy + lab.a / 500);
    const double y = inverse(fy);
    const double z = 0.8249 * inverse(fy - lab.b / 200);
    const auto code = [](double linear) {
        linear = std::clamp(linear, 0.0, 1.0);
        const double value =
            linear <= 0.0031308 ? 12.92 * linear : 1.055 * std::pow(linear, 1 / 2.4) - 0.055;
        return static_cast<std::uint8_t>(std::lround(255 * value));
    };
    return {code(3.1341 * x - 1.6173 * y - 0.4906 * z), code(-0.9788 * x + 1.9161 * y + 0.0335 * z),
            code(0.0719 * x - 0.2290 * y + 1.4052 * z)};
}

Palette palette_of(int count, std::uint64_t pixels, std::mt19937& random) {
    Palette palette{count, {}};
    std::vector<Lab> labs = {{97.2, -0.4, 2.1}, {9.1, 0.4, -1.2}};
    while (static_cast<int>(labs.size()) < count) {
        const double angle = 6.2831853 * draw(random);
        const double chroma = 4 + 62 * draw(random);
        labs.push_back(
            {18 + 74 * draw(random), chroma * std::cos(angle), chroma * std::sin(angle)});
    }
    labs.resize(static_cast<std::size_t>(count));
    const auto names = name_colours(labs);
    double whole = 0;
    std::vector<double> parts;
    for (int i = 0; i < count; ++i) {
        parts.push_back(1.0 / (1 + 0.7 * i) * (0.6 + 0.4 * draw(random)));
        whole += parts.back();
    }
    std::sort(parts.rbegin(), parts.rend());
    for (std::size_t i = 0; i < labs.size(); ++i) {
        Swatch swatch;
        swatch.lab = labs[i];
        swatch.srgb = swatch.written = to_srgb(labs[i]);
        swatch.share = parts[i] / whole;
        swatch.pixels = static_cast<std::uint64_t>(swatch.share * static_cast<double>(pixels));
        swatch.name = names[i];
        palette.swatches.push_back(swatch);
    }
    return palette;
}

// mse and evidence_mse as functions of the count; CIEDE2000 follows from the root of mse.
Study study_of(const std::string& file, const std::vector<int>& counts,
               const std::function<double(int)>& mse, const std::function<double(int)>& evidence) {
    Study study;
    study.picture = {file, 1200, 900, 3, 8, "sRGB", Resolution{300, 300}, 1'080'000, 214'311, {}};
    study.evidence = {"flat art", 0.71, 0.4, std::nullopt};
    std::mt19937 random(7);
    for (const int count : counts) {
        const double root = std::sqrt(mse(count));
        CurvePoint point{count,       evidence(count), mse(count), 0.42 * root,
                         1.25 * root, 2.2 * root,      {}};
        if (count > 1) point.closest_pair_de00 = 60.0 / count;
        point.label_bits = 0.8 * std::log2(count);
        if (count <= 25) point.prediction_strength = count > 1 ? 1.4 / count : 1;
        const bool next = std::find(counts.begin(), counts.end(), count + 1) != counts.end();
        if (next) {
            const auto last = static_cast<std::size_t>(count);
            point.loss = {last, last / 2, 12'345, 0.011431, 0.75, 9.5 + root, 21 + root, 1.5, 4.25};
        }
        study.curve.push_back(point);
        study.palettes.push_back(palette_of(count, study.picture.opaque_pixels, random));
    }
    return study;
}

std::vector<int> up_to(int last) {
    std::vector<int> counts;
    for (int count = 1; count <= last; ++count) counts.push_back(count);
    return counts;
}

void propose(Study& study, int count, int low, int high, std::optional<int> knee,
             std::optional<int> tolerance) {
    study.count = count;
    study.proposal = {count,
                      low,
                      high,
                      0.74,
                      "Seven colours: the knee and the palette agree.",
                      {{"knee", knee, "the error falls 4.1 times as fast before as after"},
                       {"tolerance", tolerance, "95 % of the pixels are within 3 CIEDE2000"},
                       {"look-alikes", std::nullopt, "no two colours are close"}}};
    for (const Swatch& swatch : palette_at(study, count).swatches) {
        study.labels.shares.push_back(swatch.share);
    }
    study.labels.tidied_share = 0.0123456;
}

}  // namespace

Study poster() {
    Study study = study_of(
        "harbour-festival.png", up_to(12),
        [](int k) { return k == 12 ? 0.0
                           : k < 8 ? 1900.0 * std::exp(-0.93 * k)
                                   : 2.4 / (k - 5); },
        [](int k) { return k > 7 ? 0.0 : 2100.0 * std::exp(-0.95 * k) - (k == 7 ? 2.2 : 0); });
    study.picture.distinct_colours = 12;
    propose(study, 7, 6, 8, 7, 6);
    return study;
}

Study photograph() {
    const auto mse = [](int k) { return 1400.0 / std::pow(k, 1.12); };
    Study study = study_of("dunes at low tide.jpg", up_to(25), mse,
                           [&](int k) { return mse(k) * (1 - 0.004 * (k % 3)); });
    study.evidence = {"continuous tone", 0.08, 1.7, std::nullopt};
    propose(study, 9, 7, 12, 8, std::nullopt);
    return study;
}

Study given() {
    Study study = study_of(
        "lemonade label v3.tif", up_to(25), [](int k) { return 700.0 * std::exp(-0.45 * k) + 0.9; },
        [](int k) { return 640.0 * std::exp(-0.62 * k) + 0.06; });
    propose(study, 8, 7, 9, 9, 11);
    study.count = 5;
    study.count_was_given = true;
    study.palettes[4].swatches[2].kept = true;
    return study;
}

Study single_colour() {
    Study study = study_of(
        "plain.png", up_to(1), [](int) { return 0.0; }, [](int) { return 0.0; });
    study.picture.profile.reset();
    study.picture.resolution.reset();
    study.evidence = {};
    propose(study, 1, 1, 1, std::nullopt, 1);
    return study;
}

Study two_colours() {
    const auto mse = [](int k) { return k == 1 ? 812.0 : 0.0; };
    Study study = study_of("two.png", up_to(2), mse, mse);
    propose(study, 2, 2, 2, 2, 2);
    return study;
}

Study many() {
    const auto mse = [](int k) { return 2600.0 / std::pow(k, 1.4); };
    Study study = study_of("market-square.webp", up_to(257), mse, mse);
    study.at_most = 256;
    propose(study, 64, 40, 90, 38, 71);
    return study;
}

Study far_count() {
    std::vector<int> counts = up_to(25);
    counts.push_back(200);
    const auto mse = [](int k) { return 1800.0 / std::pow(k, 1.3); };
    Study study = study_of("stalls.avif", counts, mse, [&](int k) { return 0.6 * mse(k); });
    propose(study, 11, 8, 14, 10, std::nullopt);
    study.count = 200;
    study.count_was_given = true;
    return study;
}

Study hostile() {
    Study study = poster();
    study.picture.file = "<img src=x onerror=alert(1)>\"'&]]>\n\x1b[31m\u202egnp\xff\xfe, {$a.b} " +
                         std::string(300, 'w') + ".png";
    study.picture.profile = "p\x80\"<";
    for (Palette& palette : study.palettes) {
        palette.swatches[0].name = "$a{b}.c,\"d\"\n</text><script>alert(1)</script>\xc3";
    }
    study.proposal.sentence = "<b>\xff</b>";
    return study;
}

Study nearly_exact() {
    const auto mse = [](int k) { return 2e-4 / k; };
    Study study = study_of("haze.png", up_to(6), mse, mse);
    propose(study, 1, 1, 2, std::nullopt, 1);
    return study;
}

Study wide_gamut() {
    Study study = photograph();
    study.picture.file = "parrot feathers, P3.png";
    for (std::size_t i = 0; i < study.palettes[8].swatches.size(); i += 4) {
        study.palettes[8].swatches[i].hex_de00 = 4.25 + static_cast<double>(i);
    }
    study.picture.colour_cell_de = 0.25;
    return study;
}

std::vector<Named> all() {
    return {{"poster", poster()},
            {"photograph", photograph()},
            {"given", given()},
            {"single-colour", single_colour()},
            {"two-colours", two_colours()},
            {"many", many()},
            {"far-count", far_count()},
            {"hostile", hostile()},
            {"nearly-exact", nearly_exact()},
            {"wide-gamut", wide_gamut()}};
}

Study random_study(unsigned seed) {
    std::mt19937 random(seed);
    const int last = 1 + static_cast<int>(draw(random) * (seed % 7 == 0 ? 200 : 40));
    std::vector<int> counts = up_to(last);
    if (seed % 5 == 0) counts.push_back(last + 2 + static_cast<int>(200 * draw(random)));
    const double start = std::pow(10, -1 + 4.5 * draw(random));
    const double power = 0.3 + 2.5 * draw(random);
    const double ratio = 0.2 + draw(random);
    const int end = draw(random) < 0.4 ? 1 + static_cast<int>(last * draw(random)) : 1000;
    const auto mse = [&](int k) { return k >= end ? 0.0 : start / std::pow(k, power); };
    Study study = study_of("random.png", counts, mse, [&](int k) { return ratio * mse(k); });
    const auto count = [&] { return 1 + static_cast<int>(last * draw(random) * 0.999); };
    const int proposed = count();
    propose(study, proposed, std::max(1, proposed - count() / 3), std::min(last, proposed + 2),
            draw(random) < 0.8 ? std::optional(count()) : std::nullopt,
            draw(random) < 0.8 ? std::optional(count()) : std::nullopt);
    study.tolerance = 0.5 + 6 * draw(random);
    study.count_was_given = draw(random) < 0.4;
    if (study.count_was_given) study.count = draw(random) < 0.5 ? counts.back() : count();
    return study;
}

}  // namespace tincture::fixtures
