#include "histogram/colour_counts.h"

#include <algorithm>
#include <array>
#include <cstring>
#include <utility>

#include "histogram/colour_table.h"
#include "support/cancel.h"
#include "support/large_block.h"
#include "support/parallel.h"

namespace tincture {
namespace {

constexpr std::uint64_t free_place = ~std::uint64_t{0};

// Smaller 8-bit RGB pictures are counted by sorting their pixels, larger ones in one place for each
// of the 2^24 colours, which is quick once filled but must be walked through afterwards.
constexpr std::size_t direct_from_pixels = 2'000'000;

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

// Cuts [0, n) into stripes of whole rows' size; few, so that what each needs stays small.
struct Stripes {
    std::size_t n;
    std::size_t count;
    [[nodiscard]] std::size_t begin(std::size_t s) const { return n * s / count; }
};

template <typename Sample>
CountedColours count_hashed(const Picture& picture, const Sample* samples, std::size_t limit) {
    const Stripes stripes{picture.pixel_count(), picture.pixel_count() < direct_from_pixels
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

// Sorts 24-bit numbers by their low and then their high half, counting (radix sort).
void sort_24_bits(std::vector<std::uint32_t>& numbers) {
    std::vector<std::uint32_t> other(numbers.size());
    for (const int shift : {0, 12}) {
        std::array<std::size_t, 4096> next{};
        for (const std::uint32_t n : numbers) ++next[n >> shift & 4095];
        std::size_t start = 0;
        for (std::size_t& place : next) start += std::exchange(place, start);
        for (const std::uint32_t n : numbers) other[next[n >> shift & 4095]++] = n;
        numbers.swap(other);
    }
}

// For RGB with 8 bits: the opaque pixels sorted, equal ones counted.
CountedColours count_sorted(const Picture& picture, std::size_t limit) {
    throw_if_cancelled();
    std::vector<std::uint32_t> numbers;
    numbers.reserve(picture.pixel_count());
    for (std::size_t i = 0; i < picture.pixel_count(); ++i) {
        if (!picture.opaque.empty() && picture.opaque[i] == 0) continue;
        const std::uint8_t* s = picture.samples8.data() + 3 * i;
        numbers.push_back(std::uint32_t{s[0]} << 16 | std::uint32_t{s[1]} << 8 | s[2]);
    }
    sort_24_bits(numbers);
    CountedColours counted;
    for (std::size_t i = 0; i < numbers.size();) {
        std::size_t end = i + 1;
        while (end < numbers.size() && numbers[end] == numbers[i]) ++end;
        const std::uint64_t n = numbers[i];
        counted.colours.push_back({(n >> 16) << 32 | (n >> 8 & 0xFF) << 16 | (n & 0xFF), end - i});
        i = end;
    }
    if (counted.colours.size() > limit) return {{}, true};
    return counted;
}

// One place for each 24-bit colour, in the order of their keys.
struct DirectTable {
    static constexpr std::size_t size = std::size_t{1} << 24;
    LargeArray<std::uint32_t> places{size};

    static std::size_t place(std::size_t r, std::size_t g, std::size_t b) {
        return r << 16 | g << 8 | b;
    }

    void add(const Picture& picture, std::size_t begin, std::size_t end) {
        const std::uint8_t* s = picture.samples8.data() + 3 * begin;
        std::uint32_t* counts = places.data();
        if (picture.opaque.empty()) {
            for (std::size_t i = begin; i < end; ++i, s += 3) ++counts[place(s[0], s[1], s[2])];
        } else {
            const std::uint8_t* opaque = picture.opaque.data();
            for (std::size_t i = begin; i < end; ++i, s += 3) {
                counts[place(s[0], s[1], s[2])] += opaque[i];
            }
        }
    }
};

// Most places are empty: eight at once are passed over.
bool eight_are_zero(const std::uint32_t* places) {
    std::array<std::uint64_t, 4> words;
    std::memcpy(words.data(), places, sizeof words);
    return (words[0] | words[1] | words[2] | words[3]) == 0;
}

std::vector<ColourCount> sorted_colours(const DirectTable& table) {
    constexpr std::size_t parts = 64;
    std::array<std::vector<ColourCount>, parts> found;
    parallel_for(parts, [&](std::size_t part) {
        constexpr std::size_t part_size = DirectTable::size / parts;
        for (std::size_t at = part * part_size; at < (part + 1) * part_size; at += 8) {
            if (eight_are_zero(table.places.data() + at)) continue;
            for (std::size_t p = at; p < at + 8; ++p) {
                if (table.places[p] == 0) continue;
                const std::uint64_t key =
                    std::uint64_t{p >> 16} << 32 | (p >> 8 & 0xFF) << 16 | (p & 0xFF);
                found[part].push_back({key, table.places[p]});
            }
        }
    });
    std::vector<ColourCount> colours;
    for (const auto& part : found) colours.insert(colours.end(), part.begin(), part.end());
    return colours;
}

CountedColours count_direct(const Picture& picture, std::size_t limit) {
    DirectTable table;
    constexpr std::size_t step = 1 << 20;
    for (std::size_t at = 0; at < picture.pixel_count(); at += step) {
        throw_if_cancelled();
        table.add(picture, at, std::min(at + step, picture.pixel_count()));
    }
    CountedColours counted{sorted_colours(table), false};
    if (counted.colours.size() > limit) return {{}, true};
    return counted;
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
    if (picture.model != ColourModel::rgb) {
        return count_hashed(picture, picture.samples8.data(), limit);
    }
    return picture.pixel_count() >= direct_from_pixels ? count_direct(picture, limit)
                                                       : count_sorted(picture, limit);
}

}  // namespace tincture
