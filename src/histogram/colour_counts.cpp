#include "histogram/colour_counts.h"

#include <algorithm>
#include <array>

#include "histogram/colour_table.h"
#include "histogram/rgb8_counts.h"
#include "support/cancel.h"
#include "support/parallel.h"
#include "support/stripes.h"

namespace tincture {
namespace {

constexpr std::uint64_t free_place = ~std::uint64_t{0};

// Smaller pictures are counted in one go: joining two tables costs more than it saves.
constexpr std::size_t two_stripes_from = 2'000'000;

// Calls run(key, n) for each run of equal neighbours among the opaque pixels [begin, end).
template <typename Sample, typename Run>
void for_each_run(const Picture& picture, const Sample* samples, std::size_t begin, std::size_t end,
                  const Run& run) {
    const int channels = channel_count(picture.model);
    const std::uint8_t* opaque = picture.opaque.empty() ? nullptr : picture.opaque.data();
    std::uint64_t last = free_place;
    std::uint64_t length = 0;
    for (std::size_t i = begin; i < end; ++i) {
        if (opaque != nullptr && opaque[i] == 0) continue;
        const std::uint64_t key =
            colour_key(samples + i * static_cast<std::size_t>(channels), channels);
        if (key == last) {
            ++length;
            continue;
        }
        if (length > 0) run(last, length);
        last = key;
        length = 1;
    }
    if (length > 0) run(last, length);
}

template <typename Sample>
CountedColours count_hashed(const Picture& picture, const Sample* samples, std::size_t limit) {
    const Stripes stripes{picture.pixel_count(), picture.pixel_count() < two_stripes_from
                                                     ? std::size_t{1}
                                                     : std::size_t{2}};
    std::vector<KeyCounter> counters(stripes.count);
    parallel_for(stripes.count, [&](std::size_t s) {
        constexpr std::size_t step = 1 << 16;
        for (std::size_t at = stripes.begin(s); at < stripes.begin(s + 1); at += step) {
            throw_if_cancelled();
            if (counters[s].size() > limit) return;
            for_each_run(picture, samples, at, std::min(at + step, stripes.begin(s + 1)),
                         [&](std::uint64_t key, std::uint64_t n) { counters[s].add(key, n); });
        }
    });
    KeyCounter& all = counters.front();
    for (std::size_t s = 1; s < stripes.count && all.size() <= limit; ++s) {
        for (const ColourCount& colour : counters[s].sorted()) all.add(colour.key, colour.count);
    }
    if (all.size() > limit) return {{}, true};
    return {all.sorted(), false};
}

}  // namespace

KeyCounter::KeyCounter() : places_(1 << 12, ColourCount{free_place, 0}), shift_(64 - 12) {}

void KeyCounter::add(std::uint64_t key, std::uint64_t count) {
    if (key == free_place) {
        highest_ += count;
        return;
    }
    const std::size_t mask = places_.size() - 1;
    // Multiplicative hashing with the golden ratio, high bits.
    for (std::size_t at = key * 0x9E3779B97F4A7C15U >> shift_;; at = (at + 1) & mask) {
        ColourCount& place = places_[at];
        if (place.key == key) {
            place.count += count;
            return;
        }
        if (place.key == free_place) {
            place = {key, count};
            if (++size_ * 2 > places_.size()) grow();
            return;
        }
    }
}

void KeyCounter::add(const KeyCounter& other) {
    // Places are in the order of their hash: put into a smaller table, they would all crowd at its
    // beginning.
    while (places_.size() < other.places_.size()) grow();
    for (const ColourCount& place : other.places_) {
        if (place.key != free_place) add(place.key, place.count);
    }
    highest_ += other.highest_;
}

void KeyCounter::grow() {
    std::vector<ColourCount> old(places_.size() * 2, ColourCount{free_place, 0});
    old.swap(places_);
    --shift_;
    size_ = 0;
    for (const ColourCount& place : old) {
        if (place.key != free_place) add(place.key, place.count);
    }
}

std::vector<ColourCount> KeyCounter::sorted() const {
    std::vector<ColourCount> colours;
    colours.reserve(size());
    std::copy_if(places_.begin(), places_.end(), std::back_inserter(colours),
                 [](const ColourCount& place) { return place.key != free_place; });
    std::sort(colours.begin(), colours.end(),
              [](const ColourCount& one, const ColourCount& two) { return one.key < two.key; });
    if (highest_ > 0) colours.push_back({free_place, highest_});
    return colours;
}

CountedColours count_keys(const Picture& picture, std::size_t limit) {
    if (picture.bits == 16) return count_hashed(picture, picture.samples16.data(), limit);
    if (picture.model != ColourModel::rgb || picture.pixel_count() > max_rgb8_pixels) {
        return count_hashed(picture, picture.samples8.data(), limit);
    }
    CountedColours counted{count_rgb8(picture), false};
    if (counted.colours.size() > limit) return {{}, true};
    return counted;
}

}  // namespace tincture
