#include "histogram/rgb8_counts.h"

#include <array>
#include <bit>
#include <utility>

#include "support/cancel.h"
#include "support/large_block.h"
#include "support/parallel.h"
#include "support/stripes.h"

namespace tincture {
namespace {

// Pixels are dealt into buckets by the upper half of their 24 bits; the lower halves are counted
// bucket by bucket, in tables that stay near.
class BucketCounter {
  public:
    explicit BucketCounter(const Picture& picture)
        : picture_(picture), next_(stripes_.count), lower_(picture.pixel_count()) {
        parallel_for(stripes_.count, [&](std::size_t s) { size_up(s); });
        share_out();
        parallel_for(stripes_.count, [&](std::size_t s) { deal(s); });
    }

    // In the order of their keys.
    [[nodiscard]] std::vector<ColourCount> colours() const {
        constexpr std::size_t parts = 16;
        std::array<std::vector<ColourCount>, parts> found;
        parallel_for(parts, [&](std::size_t part) {
            Tally tally;
            for (std::size_t b = part * buckets / parts; b < (part + 1) * buckets / parts; ++b) {
                throw_if_cancelled();
                tally.add(lower_.data() + start_[b], lower_.data() + start_[b + 1]);
                tally.empty_into(b, found[part]);
            }
        });
        std::size_t size = 0;
        for (const auto& part : found) size += part.size();
        std::vector<ColourCount> all;
        all.reserve(size);
        for (const auto& part : found) all.insert(all.end(), part.begin(), part.end());
        return all;
    }

  private:
    static constexpr std::size_t buckets = 1 << 12;
    static constexpr std::size_t dropped = buckets;  // where pixels go that are not opaque
    using PerBucket = std::array<std::uint32_t, buckets + 1>;

    // How often each lower half was met.
    class Tally {
      public:
        void add(const std::uint16_t* lower, const std::uint16_t* end) {
            for (; lower != end; ++lower) {
                ++count_[*lower];
                met_[*lower / 64] |= std::uint64_t{1} << *lower % 64;
            }
        }
        void empty_into(std::size_t bucket, std::vector<ColourCount>& colours) {
            for (std::size_t word = 0; word < met_.size(); ++word) {
                for (std::uint64_t met = met_[word]; met != 0; met &= met - 1) {
                    const std::size_t lower =
                        64 * word + static_cast<std::size_t>(std::countr_zero(met));
                    const std::uint64_t n = bucket << 12 | lower;
                    const std::uint64_t key = (n >> 16) << 32 | (n >> 8 & 0xFF) << 16 | (n & 0xFF);
                    colours.push_back({key, count_[lower]});
                    count_[lower] = 0;
                }
                met_[word] = 0;
            }
        }

      private:
        std::array<std::uint32_t, buckets> count_{};
        std::array<std::uint64_t, buckets / 64> met_{};
    };

    // Calls use(bucket, lower half) for each pixel of a stripe.
    template <typename Use>
    void for_each_pixel(std::size_t stripe, const Use& use) const {
        throw_if_cancelled();
        const std::size_t begin = stripes_.begin(stripe);
        const std::size_t n = stripes_.begin(stripe + 1) - begin;
        const std::uint8_t* sample = picture_.samples8.data() + 3 * begin;
        const auto bucket_of = [](const std::uint8_t* s) {
            return std::size_t{s[0]} << 4 | s[1] >> 4;
        };
        const auto lower_of = [](const std::uint8_t* s) {
            return static_cast<std::uint16_t>((s[1] & 15) << 8 | s[2]);
        };
        if (picture_.opaque.empty()) {
            for (std::size_t i = 0; i < n; ++i, sample += 3)
                use(bucket_of(sample), lower_of(sample));
        } else {
            const std::uint8_t* opaque = picture_.opaque.data() + begin;
            for (std::size_t i = 0; i < n; ++i, sample += 3) {
                use(opaque[i] != 0 ? bucket_of(sample) : dropped, lower_of(sample));
            }
        }
    }

    void size_up(std::size_t stripe) {
        PerBucket& sizes = next_[stripe];
        sizes.fill(0);
        for_each_pixel(stripe, [&](std::size_t bucket, std::uint16_t) { ++sizes[bucket]; });
    }

    // From sizes to places: bucket after bucket, and in each stripe after stripe.
    void share_out() {
        std::uint32_t place = 0;
        for (std::size_t b = 0; b <= buckets; ++b) {
            start_[b] = place;
            for (PerBucket& next : next_) place += std::exchange(next[b], place);
        }
    }

    void deal(std::size_t stripe) {
        PerBucket& next = next_[stripe];
        std::uint16_t* lower_halves = lower_.data();
        for_each_pixel(stripe, [&](std::size_t bucket, std::uint16_t lower) {
            lower_halves[next[bucket]++] = lower;
        });
    }

    const Picture& picture_;
    Stripes stripes_{picture_.pixel_count(), 4};
    std::vector<PerBucket> next_;      // where the next pixel of a stripe goes
    PerBucket start_{};                // of each bucket
    LargeArray<std::uint16_t> lower_;  // the lower halves, bucket after bucket
};

}  // namespace

std::vector<ColourCount> count_rgb8(const Picture& picture) {
    return BucketCounter(picture).colours();
}

}  // namespace tincture
