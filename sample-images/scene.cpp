// A scene as a satellite might deliver it: the delta of an invented river in four bands. The ground
// is drawn finer than the pixels, so that pixels on a border are mixtures.
#include <array>
#include <cmath>
#include <string>
#include <vector>

#include "canvas.h"
#include "files.h"
#include "numbers.h"
#include "pictures.h"

namespace tincture::samples {
namespace {

constexpr int size = 400;  // pixels of 10 m
constexpr int fineness = 5;
constexpr std::size_t bands = 4;
using Spectrum = std::array<double, bands>;  // reflectance: blue, green, red, near infrared

enum Cover : std::uint8_t {
    sea,
    river,
    pond,
    mud,
    wet_sand,
    sand,
    reed,
    meadow,
    grain,
    beet,
    maize,
    bare,
    fallow,
    broadleaf,
    pine,
    roof_tile,
    roof_grey,
    asphalt,
    garden,
    cover_count
};

// Plausible summer values, made up for this picture.
constexpr std::array<Spectrum, cover_count> spectra{{
    {0.030, 0.026, 0.012, 0.006},  // sea
    {0.062, 0.078, 0.060, 0.024},  // river
    {0.034, 0.050, 0.030, 0.030},  // pond
    {0.074, 0.094, 0.104, 0.100},  // mud
    {0.115, 0.145, 0.170, 0.185},  // wet sand
    {0.190, 0.248, 0.300, 0.375},  // sand
    {0.036, 0.060, 0.054, 0.235},  // reed
    {0.038, 0.076, 0.052, 0.365},  // meadow
    {0.076, 0.116, 0.157, 0.295},  // grain
    {0.028, 0.062, 0.032, 0.480},  // beet
    {0.033, 0.060, 0.044, 0.405},  // maize
    {0.086, 0.110, 0.138, 0.205},  // bare
    {0.052, 0.086, 0.086, 0.300},  // fallow
    {0.018, 0.038, 0.022, 0.285},  // broadleaf
    {0.016, 0.028, 0.019, 0.185},  // pine
    {0.072, 0.092, 0.160, 0.215},  // roof tile
    {0.150, 0.160, 0.168, 0.188},  // roof grey
    {0.084, 0.090, 0.096, 0.115},  // asphalt
    {0.042, 0.078, 0.060, 0.310},  // garden
}};

struct Channel {
    std::vector<Point> points;
    double width_from;
    double width_to;
};

const std::vector<Channel>& channels() {
    static const std::vector<Channel> all{
        {{{118, -12}, {128, 22}, {158, 44}, {150, 78}, {172, 108}, {190, 140}}, 9.5, 10},
        {{{190, 140}, {176, 176}, {140, 200}, {128, 236}, {104, 268}, {92, 330}}, 6, 7.5},
        {{{190, 140}, {206, 182}, {196, 226}, {214, 266}, {208, 312}, {216, 372}}, 7, 8.5},
        {{{190, 140}, {226, 168}, {262, 186}, {284, 226}, {322, 252}, {352, 318}}, 5.5, 7},
        {{{284, 226}, {282, 262}, {296, 290}, {290, 342}}, 3, 4.2},
        {{{196, 226}, {176, 256}, {166, 292}, {154, 352}}, 2.6, 4},
        {{{128, 236}, {96, 238}, {66, 262}, {44, 300}}, 2.2, 3.4},
        {{{330, -8}, {318, 40}, {296, 74}, {290, 118}, {262, 150}, {240, 174}}, 1.6, 2.6},
    };
    return all;
}

// Signed: positive on land, in pixels from the shore, along the y axis.
double inland(Point p) {
    const double lobe = (p.x - 208) / 100;
    const double shore = 288 + 56 * exponential(-lobe * lobe) - 0.05 * (p.x - 200);
    return shore - p.y + 15 * fractal_noise(p.x / 34, p.y / 34, 0, 5, 101) +
           2.5 * noise(p.x / 4, p.y / 4, 0, 102);
}

struct Parcel {
    std::int64_t row;
    std::int64_t number;
    double edge;  // distance to the nearest border, pixels
};

// Strips of uneven lengths in a turned grid; west and east of the river were parcelled out apart.
Parcel parcel_at(Point p) {
    const bool west = p.x < 195;
    const double turn = west ? 0.33 : -0.21;
    const double u =
        p.x * cosine(turn) + p.y * sine(turn) + 2.0 * noise(p.x / 40, p.y / 40, 0, 103);
    const double v = -p.x * sine(turn) + p.y * cosine(turn) + 600;
    const double depth = west ? 17 : 23;
    const auto row = static_cast<std::int64_t>(v / depth);
    const double within = v - static_cast<double>(row) * depth;
    const double wide = 9 + 10 * cell_value(row, west, 0, 104);
    const double at = (u + 700) / wide + cell_value(row, west, 1, 104);
    const auto number = static_cast<std::int64_t>(at);
    const double along = (at - static_cast<double>(number)) * wide;
    const double edge = std::min(std::min(within, depth - within), std::min(along, wide - along));
    return {row + (west ? 1000 : 0), number, edge};
}

Cover crop_of(const Parcel& parcel) {
    static constexpr std::array<Cover, 10> rotation{grain, grain, grain, beet,   beet,
                                                    maize, bare,  bare,  fallow, meadow};
    const double draw = cell_value(parcel.row, parcel.number, 0, 105);
    return rotation[static_cast<std::size_t>(draw * rotation.size())];
}

Cover land_cover(Point p) {
    const double depth = inland(p);
    const double patch = fractal_noise(p.x / 26, p.y / 26, 0, 4, 106);
    const double fine = fractal_noise(p.x / 7, p.y / 7, 0, 3, 107);
    if (depth < 0) {
        // Bars off the mouths.
        const double bar = fractal_noise(p.x / 20 + 5, p.y / 9, 0, 4, 108);
        if (depth > -26 && bar > 0.52) return bar > 0.60 ? sand : wet_sand;
        return depth > -3 && fine > 0 ? mud : sea;
    }
    if (depth < 2.0 + 2 * fine) return wet_sand;
    if (depth < 7 + 9 * patch + 2 * fine) return sand;
    if (depth < 62 + 26 * patch) {
        if (fine + 0.5 * patch > 0.34) return meadow;
        if (fine - 0.5 * patch > 0.62) return mud;
        if (fine - 0.8 * patch > 0.78) return pond;
        return reed;
    }
    if (patch + 0.25 * fine > 0.44) return p.x > 250 ? pine : broadleaf;
    const bool fields = fractal_noise(p.x / 60 + 3, p.y / 60, 0, 3, 109) > -0.30;
    if (!fields) return meadow;
    const Parcel parcel = parcel_at(p);
    return parcel.edge < 0.5 ? meadow : crop_of(parcel);
}

Cover built(Point p, Cover below, Point centre, double radius, double turn) {
    const double x = p.x - centre.x;
    const double y = p.y - centre.y;
    const double out = std::sqrt(x * x + y * y) / radius;
    if (out + 0.35 * fractal_noise(p.x / 9, p.y / 9, 0, 3, 110) > 1) return below;
    const double u = x * cosine(turn) + y * sine(turn) + 300;
    const double v = -x * sine(turn) + y * cosine(turn) + 300;
    const double street_u = u - 5.4 * std::floor(u / 5.4);
    const double street_v = v - 3.8 * std::floor(v / 3.8);
    if (street_u < 0.8 || street_v < 0.7) return asphalt;
    const auto house = [&](double side) {
        return cell_value(static_cast<std::int64_t>(u / side), static_cast<std::int64_t>(v / side),
                          0, 111);
    };
    if (house(1.3) < 0.62 - 0.35 * out) return house(2.6) < 0.68 ? roof_tile : roof_grey;
    return garden;
}

void draw_water(Canvas& ground) {
    for (const Channel& c : channels()) {
        const Line line = through(c.points);
        ground.fill_over(stroke(line, c.width_from + 2.5, c.width_to + 9), reed,
                         {meadow, grain, beet, maize, bare, fallow, mud});
    }
    // An oxbow that the river has left, with clumps of trees along it.
    const std::vector<Point> left_behind{{134, 66}, {117, 63},  {99, 71},   {90, 86},
                                         {95, 104}, {110, 110}, {122, 102}, {131, 104}};
    const Line oxbow = through(left_behind);
    ground.fill(stroke(oxbow, 8, 6), reed);
    Random random(119);
    for (std::size_t i = 0; i < oxbow.size(); i += 3) {
        const double x = oxbow[i].x + random.between(-4, 4);
        const double y = oxbow[i].y + random.between(-4, 4);
        ground.fill(circle({x, y}, random.between(1.0, 4.5)), broadleaf);
    }
    ground.fill(stroke(oxbow, 4.8, 2.2), pond);
    for (const Channel& c : channels()) {
        const Line line = through(c.points);
        ground.fill_over(stroke(line, c.width_from, c.width_to), river,
                         {mud, wet_sand, sand, reed, meadow, grain, beet, maize, bare, fallow,
                          broadleaf, pine, pond, roof_tile, roof_grey, asphalt, garden});
    }
}

void draw_roads(Canvas& ground) {
    const std::array<std::vector<Point>, 3> roads{{
        {{-5, 122}, {60, 118}, {120, 128}, {176, 122}, {232, 120}, {300, 98}, {405, 84}},
        {{214, 120}, {236, 70}, {226, 30}, {240, -5}},
        {{232, 120}, {262, 158}, {330, 196}, {372, 236}},
    }};
    for (const auto& road : roads) ground.fill(stroke(through(road), 0.9), asphalt);
}

Canvas draw_ground() {
    Canvas ground(size, size, fineness, {}, sea);
    ground.repaint([](Point p, std::uint8_t) -> std::uint8_t { return land_cover(p); });
    ground.repaint([](Point p, std::uint8_t below) -> std::uint8_t {
        const Cover first = built(p, static_cast<Cover>(below), {212, 112}, 25, 0.2);
        return built(p, built(p, first, {70, 122}, 10, -0.3), {352, 216}, 9, 0.6);
    });
    draw_water(ground);
    draw_roads(ground);
    return ground;
}

// Silt that the mouths carry out: 1 in the river, fading over the sea.
double silt(Point p) {
    double most = 0;
    for (const Channel& c : channels()) {
        const Point mouth = c.points.back();
        if (mouth.y < 280) continue;
        const double dx = p.x - mouth.x - 0.35 * std::max(0.0, p.y - mouth.y);
        const double dy = (p.y - mouth.y) * (p.y > mouth.y ? 0.55 : 1.0);
        const double reach = 9 + 4.5 * c.width_to;
        most = std::max(most, exponential(-std::sqrt(dx * dx + dy * dy) / reach));
    }
    const double swirl = 0.35 * fractal_noise(p.x / 22, p.y / 22, 0, 4, 112);
    return clamp01(most * (1 + swirl) * 1.25);
}

// The spectrum of one spot: that of its cover, varied in the way of the cover.
Spectrum spot(Point p, Cover cover) {
    Spectrum s = spectra[cover];
    const double broad = fractal_noise(p.x / 18, p.y / 18, 0, 4, 113);
    const double fine = fractal_noise(p.x / 2.2, p.y / 2.2, 0, 2, 114);
    const auto scale = [&](double visible, double infrared) {
        for (std::size_t b = 0; b < 3; ++b) s[b] *= visible;
        s[3] *= infrared;
    };
    if (cover == sea) {
        const double t = silt(p);
        const Spectrum load{0.040, 0.062, 0.056, 0.022};
        for (std::size_t b = 0; b < bands; ++b) s[b] += load[b] * t;
        scale(1 + 0.05 * broad, 1 + 0.10 * broad);
    } else if (cover == river || cover == pond) {
        scale(1 + 0.07 * broad, 1 + 0.15 * broad);
    } else if (cover >= grain && cover <= fallow) {
        // Each parcel has its own sowing date and soil.
        const Parcel parcel = parcel_at(p);
        const double vigour = cell_value(parcel.row, parcel.number, 1, 105) - 0.5;
        const double change = 0.55 * vigour + 0.12 * broad + 0.08 * fine;
        cover == bare ? scale(1 + 0.6 * change, 1 + 0.6 * change)
                      : scale(1 - 0.45 * change, 1 + 0.40 * change);
    } else if (cover == broadleaf || cover == pine) {
        const double crown = 0.20 * fine + 0.12 * broad;  // light and shadow of the crowns
        scale(1 + crown, 1 + crown);
    } else if (cover == reed || cover == meadow || cover == garden) {
        const double dry = clamp01(0.25 + 0.55 * broad + 0.15 * fine);
        scale(1 + 0.55 * dry, 1 - 0.20 * dry + 0.10 * fine);
        s[2] *= 1 + 0.25 * dry;
    } else {
        scale(1 + 0.10 * broad + 0.14 * fine, 1 + 0.10 * broad + 0.14 * fine);
    }
    return s;
}

// The optics spread light into neighbouring pixels: 1 4 1 along each axis.
std::vector<Spectrum> blurred(std::vector<Spectrum> pixels) {
    for (const int step : {1, size}) {
        const std::vector<Spectrum> before = pixels;
        for (int i = 0; i < size * size; ++i) {
            const int along = step == 1 ? i % size : i / size;
            const auto& here = before[static_cast<std::size_t>(i)];
            const auto& a = along == 0 ? here : before[static_cast<std::size_t>(i - step)];
            const auto& b = along == size - 1 ? here : before[static_cast<std::size_t>(i + step)];
            for (std::size_t k = 0; k < bands; ++k) {
                pixels[static_cast<std::size_t>(i)][k] = (a[k] + 4 * here[k] + b[k]) / 6;
            }
        }
    }
    return pixels;
}

}  // namespace

void draw_scene(const std::string& path) {
    Canvas ground = draw_ground();
    std::vector<Spectrum> pixels(std::size_t{size} * size);
    ground.repaint([&](Point p, std::uint8_t cover) {
        const Spectrum s = spot(p, static_cast<Cover>(cover));
        auto& pixel = pixels[static_cast<std::size_t>(p.y) * size + static_cast<std::size_t>(p.x)];
        for (std::size_t b = 0; b < bands; ++b) pixel[b] += s[b] / (fineness * fineness);
        return cover;
    });
    Scene scene{size, size, {"blue", "green", "red", "near infrared"}, {}, 500000, 5200000,
                10,   32633};
    Random random(8080);
    for (const Spectrum& pixel : blurred(std::move(pixels))) {
        for (const double reflectance : pixel) {
            const double noisy = reflectance + (0.0009 + 0.006 * reflectance) * random.normal();
            const double stored = std::floor(std::max(1.0, noisy * 10000) + 0.5);
            scene.samples.push_back(static_cast<std::uint16_t>(stored));
        }
    }
    write_geotiff(path, scene);
}

}  // namespace tincture::samples
