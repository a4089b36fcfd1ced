#include "tests/unit/label/drawn_scene.h"

#include <algorithm>
#include <cmath>

#include "colour/colour_space.h"
#include "tests/support/random.h"

namespace tincture::test_support {
namespace {

double distance_to(double x, double y, std::pair<double, double> a, std::pair<double, double> b) {
    const double dx = b.first - a.first;
    const double dy = b.second - a.second;
    const double squared = dx * dx + dy * dy;
    double t = squared > 0 ? ((x - a.first) * dx + (y - a.second) * dy) / squared : 0;
    t = std::clamp(t, 0.0, 1.0);
    return std::hypot(x - a.first - t * dx, y - a.second - t * dy);
}

// One channel, blurred along rows and then columns.
void blur_channel(std::vector<double>& values, int side, double deviation) {
    const int reach = static_cast<int>(std::ceil(4 * deviation));
    std::vector<double> kernel;
    double sum = 0;
    for (int i = -reach; i <= reach; ++i) {
        kernel.push_back(std::exp(-i * i / (2 * deviation * deviation)));
        sum += kernel.back();
    }
    for (const int along : {1, side}) {
        std::vector<double> out(values.size(), 0.0);
        for (int i = 0; i < side * side; ++i) {
            const int place = along == 1 ? i % side : i / side;
            for (int k = -reach; k <= reach; ++k) {
                const int other = std::clamp(place + k, 0, side - 1);
                out[static_cast<std::size_t>(i)] +=
                    kernel[static_cast<std::size_t>(k + reach)] / sum *
                    values[static_cast<std::size_t>(i + (other - place) * along)];
            }
        }
        values = out;
    }
}

}  // namespace

DrawnScene::DrawnScene(int side, std::vector<Rgb8> inks)
    : side_(side),
      inks_(std::move(inks)),
      sub_(static_cast<std::size_t>(9 * side * side), 0),
      stroke_(static_cast<std::size_t>(side * side), 0) {}

void DrawnScene::fill(std::uint8_t ink, const std::function<bool(double, double)>& inside) {
    for (int j = 0; j < 3 * side_; ++j) {
        for (int i = 0; i < 3 * side_; ++i) {
            if (!inside((i + 0.5) / 3, (j + 0.5) / 3)) continue;
            sub_[static_cast<std::size_t>(j * 3 * side_ + i)] = ink;
            if (i % 3 == 1 && j % 3 == 1) {
                stroke_[static_cast<std::size_t>(j / 3 * side_ + i / 3)] = 0;
            }
        }
    }
}

void DrawnScene::disc(std::uint8_t ink, double x, double y, double radius) {
    fill(ink, [&](double px, double py) { return std::hypot(px - x, py - y) < radius; });
}

void DrawnScene::box(std::uint8_t ink, double left, double top, double right, double bottom) {
    fill(ink, [&](double x, double y) { return x > left && x < right && y > top && y < bottom; });
}

void DrawnScene::line(std::uint8_t ink, std::vector<std::pair<double, double>> points,
                      double thickness, bool counted) {
    const auto inside = [&](double x, double y) {
        for (std::size_t k = 0; k + 1 < points.size(); ++k) {
            if (distance_to(x, y, points[k], points[k + 1]) < thickness / 2) return true;
        }
        return false;
    };
    fill(ink, inside);
    if (!counted) return;
    ++strokes_;
    for (int i = 0; i < side_ * side_; ++i) {
        if (inside(i % side_ + 0.5, i / side_ + 0.5))
            stroke_[static_cast<std::size_t>(i)] = strokes_;
    }
}

Picture DrawnScene::picture(double blur, double noise) const {
    Picture picture;
    picture.width = picture.height = static_cast<std::uint32_t>(side_);
    picture.samples8 = Samples<std::uint8_t>(picture.pixel_count() * 3);
    Random random(77);
    for (std::size_t c = 0; c < 3; ++c) {
        std::vector<double> values(picture.pixel_count(), 0.0);
        for (std::size_t s = 0; s < sub_.size(); ++s) {
            const auto width = static_cast<std::size_t>(3 * side_);
            const Rgb8 ink = inks_[sub_[s]];
            values[s / width / 3 * static_cast<std::size_t>(side_) + s % width / 3] +=
                (c == 0   ? ink.r
                 : c == 1 ? ink.g
                          : ink.b) /
                9.0;
        }
        if (blur > 0) blur_channel(values, side_, blur);
        for (std::size_t i = 0; i < values.size(); ++i) {
            const double value = values[i] + (noise > 0 ? noise * random.bell() : 0);
            picture.samples8[3 * i + c] =
                static_cast<std::uint8_t>(std::clamp(std::floor(value + 0.5), 0.0, 255.0));
        }
    }
    return picture;
}

Palette DrawnScene::palette() const {
    const ColourSpace srgb = ColourSpace::standard(ColourModel::rgb);
    Palette palette;
    palette.count = static_cast<int>(inks_.size());
    for (const Rgb8 ink : inks_) {
        Swatch swatch;
        swatch.written = swatch.srgb = ink;
        swatch.lab = srgb.lab_of(ink);
        palette.swatches.push_back(swatch);
    }
    return palette;
}

std::vector<std::uint8_t> DrawnScene::truth() const {
    std::vector<std::uint8_t> truth;
    for (int y = 0; y < side_; ++y) {
        for (int x = 0; x < side_; ++x) {
            truth.push_back(sub_[static_cast<std::size_t>((3 * y + 1) * 3 * side_ + 3 * x + 1)]);
        }
    }
    return truth;
}

int DrawnScene::halo_pixels(const std::vector<std::uint8_t>& labels) const {
    const std::vector<std::uint8_t> inks = truth();
    int halo = 0;
    for (int y = 0; y < side_; ++y) {
        for (int x = 0; x < side_; ++x) {
            bool present = false;
            for (int dy = std::max(y - 1, 0); dy <= std::min(y + 1, side_ - 1); ++dy) {
                for (int dx = std::max(x - 1, 0); dx <= std::min(x + 1, side_ - 1); ++dx) {
                    present |= inks[static_cast<std::size_t>(dy * side_ + dx)] ==
                               labels[static_cast<std::size_t>(y * side_ + x)];
                }
            }
            halo += present ? 0 : 1;
        }
    }
    return halo;
}

DrawnScene::Strokes DrawnScene::kept_strokes(const std::vector<std::uint8_t>& labels) const {
    const std::vector<std::uint8_t> inks = truth();
    Strokes strokes;
    int pixels = 0;
    int kept = 0;
    for (int s = 1; s <= strokes_; ++s) {
        std::vector<int> left;
        int area = 0;
        for (int i = 0; i < side_ * side_; ++i) {
            const auto p = static_cast<std::size_t>(i);
            if (stroke_[p] != s) continue;
            ++area;
            if (labels[p] == inks[p]) left.push_back(i);
        }
        pixels += area;
        kept += static_cast<int>(left.size());
        std::size_t largest = 0;
        while (!left.empty()) {
            std::vector<int> open = {left.back()};
            left.pop_back();
            std::size_t piece = 0;
            while (!open.empty()) {
                const int at = open.back();
                open.pop_back();
                ++piece;
                for (const int step : {1, side_ - 1, side_, side_ + 1}) {
                    for (const int other : {at - step, at + step}) {
                        const auto found = std::find(left.begin(), left.end(), other);
                        if (found == left.end()) continue;
                        open.push_back(other);
                        left.erase(found);
                    }
                }
            }
            largest = std::max(largest, piece);
        }
        ++strokes.all;
        if (static_cast<double>(largest) >= 0.9 * area) ++strokes.whole;
    }
    strokes.kept = static_cast<double>(kept) / pixels;
    return strokes;
}

}  // namespace tincture::test_support
