#include "label/edges.h"

#include <algorithm>
#include <memory>
#include <mutex>
#include <vector>

#include "label/blends.h"
#include "label/edge_band.h"
#include "label/edge_blur.h"
#include "label/refit.h"
#include "support/cancel.h"
#include "support/parallel.h"

namespace tincture {
namespace {

// Blocks never depend on threads: what is decided in one sees a margin around it, no more.
constexpr std::uint32_t block_rows = 96;

// Softer edges than those of a drawing are fitted anew.
constexpr float soft_lightness = 0.45F;
constexpr float soft_colour = 0.6F;

// In soft pictures a pixel this far from its palette colour may be part of a faint stroke.
constexpr double faint_de = 6;
constexpr double faint_per_noise = 3;

// A deviation in dE76 is about twice as large on the scale of Mixed (noise of equal strength in
// red, green and blue, measured on mid-tones).
constexpr float mixed_per_de = 2;

// What a thread needs for a block, handed from block to block: fresh memory costs more than the
// work.
struct Memory {
    EdgeBand band;
    BlurFitMemory refit;
};

class MemoryPool {
  public:
    std::unique_ptr<Memory> take() {
        const std::lock_guard<std::mutex> lock(mutex_);
        if (free_.empty()) return std::make_unique<Memory>();
        std::unique_ptr<Memory> memory = std::move(free_.back());
        free_.pop_back();
        return memory;
    }
    void give_back(std::unique_ptr<Memory> memory) {
        const std::lock_guard<std::mutex> lock(mutex_);
        free_.push_back(std::move(memory));
    }

  private:
    std::mutex mutex_;
    std::vector<std::unique_ptr<Memory>> free_;
};

}  // namespace

Samples<std::uint8_t> settled_edges(const Samples<std::uint8_t>& nearest, const PixelLab& pixels,
                                    const Palette& palette, double noise_de) {
    const std::uint32_t width = pixels.width();
    const std::uint32_t height = pixels.height();
    Samples<std::uint8_t> settled(nearest.size());
    if (palette.count < 2) {
        std::copy_n(nearest.data(), nearest.size(), settled.data());
        return settled;
    }
    const std::vector<Mixed> mixed = mixed_of(palette);

    const EdgeBlur blur = measure_edge_blur(nearest.data(), pixels, mixed);
    const bool soft = blur.lightness > soft_lightness || blur.colour > soft_colour;
    const auto noise = static_cast<float>(noise_de) * mixed_per_de;
    MemoryPool pool;
    parallel_for((height + block_rows - 1) / block_rows, [&](std::size_t block) {
        throw_if_cancelled();
        const auto first = static_cast<std::uint32_t>(block) * block_rows;
        const LabelRows rows{nearest.data(), width, height, first,
                             std::min(block_rows, height - first)};
        std::unique_ptr<Memory> memory = pool.take();
        EdgeBand& band = memory->band;
        load_labels(rows, palette.count, band);
        if (soft || !band.edges.empty()) read_lab(rows, pixels, band);
        if (soft) add_faint_edges(rows, palette, faint_de + faint_per_noise * noise_de, band);
        if (!band.edges.empty()) {
            load_colours(rows, soft ? BlurFit::zone_radius : 0, band);
            settle_blends(mixed, noise, band);
            if (soft) refit_labels(mixed, blur, noise, band, memory->refit);
        }
        for (std::uint32_t row = 0; row < rows.rows; ++row) {
            const int from = static_cast<int>(row) + EdgeBand::margin;
            std::copy_n(&band.label[band.at(EdgeBand::margin, from)], width,
                        settled.data() + std::size_t{first + row} * width);
        }
        pool.give_back(std::move(memory));
    });
    return settled;
}

}  // namespace tincture
