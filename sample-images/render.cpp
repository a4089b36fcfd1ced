#include "render.h"

#include <array>
#include <atomic>
#include <thread>

#include "light_paths.h"
#include "numbers.h"

namespace tincture::samples {
namespace {

// Smooths the detour light along surfaces but not across edges: passes with ever wider gaps between
// the 5 x 5 taps (Dammertz et al. 2010, "Edge-avoiding a-trous wavelet transform").
void smooth_detours(std::vector<Seen>& pixels, int width, int height) {
    static constexpr std::array<double, 5> taps{1.0 / 16, 1.0 / 4, 3.0 / 8, 1.0 / 4, 1.0 / 16};
    std::vector<Vec> smoothed(pixels.size());
    for (int gap = 1; gap <= 8; gap *= 2) {
        for (int y = 0; y < height; ++y) {
            for (int x = 0; x < width; ++x) {
                const std::size_t here = static_cast<std::size_t>(y) * width + x;
                const Seen& a = pixels[here];
                Vec sum;
                double total = 0;
                for (int k = 0; k < 25; ++k) {
                    const int nx = x + (k % 5 - 2) * gap;
                    const int ny = y + (k / 5 - 2) * gap;
                    if (nx < 0 || ny < 0 || nx >= width || ny >= height) continue;
                    const Seen& b = pixels[static_cast<std::size_t>(ny) * width + nx];
                    const double lift = std::fabs(dot(a.normal, b.point - a.point)) / 0.35;
                    const double turn = std::max(0.0, 1 - dot(a.normal, b.normal)) / 0.08;
                    const double weight = taps[static_cast<std::size_t>(k % 5)] *
                                          taps[static_cast<std::size_t>(k / 5)] /
                                          (1 + lift * lift * lift * lift) / (1 + turn * turn);
                    sum += b.detour * weight;
                    total += weight;
                }
                smoothed[here] = sum / total;
            }
        }
        for (std::size_t i = 0; i < pixels.size(); ++i) pixels[i].detour = smoothed[i];
    }
}

}  // namespace

void Group::add(std::unique_ptr<Body> body) {
    low = {std::min(low.x, body->low.x), std::min(low.y, body->low.y),
           std::min(low.z, body->low.z)};
    high = {std::max(high.x, body->high.x), std::max(high.y, body->high.y),
            std::max(high.z, body->high.z)};
    bodies.push_back(std::move(body));
}

std::vector<Vec> render(const Stage& stage, const Camera& camera, int width, int height,
                        int samples) {
    std::vector<Seen> pixels(static_cast<std::size_t>(width) * height);
    const Vec front = normalised(camera.target - camera.eye);
    const Vec right = normalised(cross(front, {0, 1, 0}));
    const Vec up = cross(right, front);
    const double scale = 2 * camera.half_height / height;
    const auto sample = [&](int x, int y, Sampler sampler) {
        const double px = x + sampler.next();
        const double py = y + sampler.next();
        const double turn = 2 * pi * sampler.next();
        const double off = camera.lens_radius * std::sqrt(sampler.next());
        const Vec aim =
            front + right * ((px - width / 2.0) * scale) + up * ((height / 2.0 - py) * scale);
        const Vec lens = right * (off * cosine(turn)) + up * (off * sine(turn));
        return look(stage, {camera.eye + lens, normalised(aim * camera.focus - lens)}, sampler);
    };
    const auto draw_row = [&](int y) {
        for (int x = 0; x < width; ++x) {
            const std::size_t i = static_cast<std::size_t>(y) * width + x;
            for (int k = 0; k < samples; ++k) pixels[i] += sample(x, y, Sampler(i, k));
            const double share = 1.0 / samples;
            pixels[i].light *= share;
            pixels[i].detour *= share;
            pixels[i].colour *= share;
            pixels[i].point *= share;
            pixels[i].normal = normalised(pixels[i].normal);
        }
    };
    std::atomic<int> next_row{0};
    const auto work = [&] {
        for (int y = next_row++; y < height; y = next_row++) draw_row(y);
    };
    std::vector<std::jthread> threads(std::max(1U, std::thread::hardware_concurrency()));
    for (auto& thread : threads) thread = std::jthread(work);
    threads.clear();

    smooth_detours(pixels, width, height);
    std::vector<Vec> radiance;
    radiance.reserve(pixels.size());
    for (const Seen& seen : pixels) radiance.push_back(seen.light + seen.detour * seen.colour);
    return radiance;
}

}  // namespace tincture::samples
