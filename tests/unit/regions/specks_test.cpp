#include "regions/specks.h"

#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <map>
#include <tuple>

#include "colour/delta_e.h"
#include "support/parallel.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;
using Map = std::vector<std::uint8_t>;

struct Size {
    std::uint32_t width;
    std::uint32_t height;
};

Palette palette_of(const std::vector<Lab>& colours) {
    Palette palette;
    palette.count = static_cast<int>(colours.size());
    for (const Lab& lab : colours) {
        palette.swatches.emplace_back();
        palette.swatches.back().lab = lab;
    }
    return palette;
}

// Distances between them are all different.
Palette uneven_palette() {
    return palette_of({{90, 0, 0}, {10, 0, 0}, {55, 40, 3}, {30, -7, 50}});
}

struct Tidied {
    Map map;
    std::uint64_t changed;
};

Tidied tidied(const Map& map, Size size, const Palette& palette, std::uint32_t smallest) {
    Samples<std::uint8_t> labels(map.size());
    std::copy(map.begin(), map.end(), labels.data());
    const std::uint64_t changed = tidy_specks(labels, size.width, size.height, palette, smallest);
    return {{labels.data(), labels.data() + labels.size()}, changed};
}

// Rows of a map as digits.
Tidied tidied(const std::vector<std::string>& rows, const Palette& palette,
              std::uint32_t smallest) {
    Map map;
    for (const std::string& row : rows) {
        for (const char c : row) map.push_back(static_cast<std::uint8_t>(c - '0'));
    }
    return tidied(
        map, {static_cast<std::uint32_t>(rows[0].size()), static_cast<std::uint32_t>(rows.size())},
        palette, smallest);
}

std::vector<std::string> rows_of(const Map& map, std::size_t width) {
    std::vector<std::string> rows;
    for (std::size_t i = 0; i < map.size(); ++i) {
        if (i % width == 0) rows.emplace_back();
        rows.back() += static_cast<char>('0' + map[i]);
    }
    return rows;
}

// The rules of tidy_specks(), pixel by pixel and round by round.
class PlainTidying {
  public:
    PlainTidying(const Map& map, Size size, const Palette& palette, std::uint32_t smallest)
        : map_(map), size_(size), palette_(palette), smallest_(smallest) {}

    Map run() {
        find_components();
        settle_rounds();
        for (;;) {
            const int island = largest_left();
            if (island < 0) break;
            settled_[static_cast<std::size_t>(island)] = true;
            settle_rounds();
        }
        Map result = map_;
        for (std::size_t i = 0; i < result.size(); ++i) {
            result[i] = label_[static_cast<std::size_t>(component_[i])];
        }
        return result;
    }

    std::vector<std::uint32_t> areas() {
        find_components();
        return area_;
    }

  private:
    template <typename Body>
    void around(std::size_t i, bool corners, const Body& body) const {
        const auto width = static_cast<int>(size_.width);
        const int x = static_cast<int>(i) % width;
        const int y = static_cast<int>(i) / width;
        for (int dy = -1; dy <= 1; ++dy) {
            for (int dx = -1; dx <= 1; ++dx) {
                if ((dx == 0 && dy == 0) || (!corners && dx != 0 && dy != 0)) continue;
                if (x + dx < 0 || y + dy < 0 || x + dx >= width) continue;
                if (y + dy >= static_cast<int>(size_.height)) continue;
                body(static_cast<std::size_t>((y + dy) * width + x + dx));
            }
        }
    }

    void find_components() {
        component_.assign(map_.size(), -1);
        area_.clear();
        label_.clear();
        for (std::size_t start = 0; start < map_.size(); ++start) {
            if (component_[start] >= 0) continue;
            const auto c = static_cast<int>(area_.size());
            area_.push_back(0);
            label_.push_back(map_[start]);
            std::vector<std::size_t> open = {start};
            component_[start] = c;
            while (!open.empty()) {
                const std::size_t i = open.back();
                open.pop_back();
                ++area_.back();
                around(i, true, [&](std::size_t q) {
                    if (component_[q] >= 0 || map_[q] != map_[start]) return;
                    component_[q] = c;
                    open.push_back(q);
                });
            }
        }
        settled_.clear();
        for (std::size_t c = 0; c < area_.size(); ++c) settled_.push_back(area_[c] >= smallest_);
    }

    void settle_rounds() {
        for (bool changed = true; changed;) {
            changed = false;
            // For each component the border that it has with each label.
            std::map<int, std::map<int, int>> border;
            for (std::size_t i = 0; i < map_.size(); ++i) {
                const int c = component_[i];
                if (settled_[static_cast<std::size_t>(c)] || map_[i] == palette_.count) continue;
                around(i, false, [&](std::size_t q) {
                    const auto other = static_cast<std::size_t>(component_[q]);
                    if (map_[q] == palette_.count || !settled_[other]) return;
                    ++border[c][label_[other]];
                });
            }
            for (const auto& [c, labels] : border) {
                const auto place = static_cast<std::size_t>(c);
                const Lab own = palette_.swatches[label_[place]].lab;
                std::tuple<int, double, int> best{1, 0, 0};
                for (const auto& [label, sides] : labels) {
                    const Lab lab = palette_.swatches[static_cast<std::size_t>(label)].lab;
                    best = std::min(best, std::tuple(-sides, delta_e_76(own, lab), label));
                }
                label_[place] = static_cast<std::uint8_t>(std::get<2>(best));
                settled_[place] = true;
                changed = true;
            }
        }
    }

    [[nodiscard]] int largest_left() const {
        std::tuple<std::int64_t, int, int> best{1, 0, -1};
        for (std::size_t c = 0; c < area_.size(); ++c) {
            if (settled_[c] || label_[c] == palette_.count) continue;
            best = std::min(
                best, std::tuple(-std::int64_t{area_[c]}, int{label_[c]}, static_cast<int>(c)));
        }
        return std::get<2>(best);
    }

    const Map& map_;
    Size size_;
    const Palette& palette_;
    std::uint32_t smallest_;
    std::vector<int> component_;
    std::vector<std::uint32_t> area_;
    Map label_;
    std::vector<bool> settled_;
};

// Patches of labels 0 to 3 with some noise, and transparent pixels (4) where `holes` is above 0.
Map patchy_map(Random& random, Size size, double noise, double holes) {
    Map map(std::size_t{size.width} * size.height);
    const std::uint32_t patch = 1 + static_cast<std::uint32_t>(random.below(9));
    const std::uint64_t key = random.bits();
    for (std::size_t i = 0; i < map.size(); ++i) {
        const std::size_t block = i / size.width / patch * 1000 + i % size.width / patch;
        map[i] = static_cast<std::uint8_t>(Random(key + block).below(4));
        if (random.unit() < noise) map[i] = static_cast<std::uint8_t>(random.below(4));
        if (random.unit() < holes) map[i] = 4;
    }
    return map;
}

TEST(TidySpecks, AsThePlainRulesSay) {
    Random random(11);
    const Palette palette = uneven_palette();
    int cases_with_changes = 0;
    for (const Size size : {Size{1, 1}, {1, 40}, {40, 1}, {13, 9}, {40, 90}, {33, 150}}) {
        for (const double noise : {0.02, 0.3, 1.0}) {
            for (const double holes : {0.0, 0.1, 0.6}) {
                for (const std::uint32_t smallest : {2U, 5U, 40U, 100'000U}) {
                    const Map map = patchy_map(random, size, noise, holes);
                    const Map wanted = PlainTidying(map, size, palette, smallest).run();
                    const Tidied got = tidied(map, size, palette, smallest);
                    ASSERT_EQ(got.map, wanted);
                    std::uint64_t changed = 0;
                    for (std::size_t i = 0; i < map.size(); ++i) changed += map[i] != wanted[i];
                    EXPECT_EQ(got.changed, changed);
                    cases_with_changes += changed > 0 ? 1 : 0;
                }
            }
        }
    }
    EXPECT_GE(cases_with_changes, 100);
}

TEST(TidySpecks, ThreadsHaveNoSay) {
    Random random(12);
    const Size size{500, 700};
    const Map map = patchy_map(random, size, 0.4, 0.05);
    set_thread_count(1);
    const Map wanted = tidied(map, size, uneven_palette(), 12).map;
    EXPECT_NE(wanted, map);
    for (const int threads : {2, 3, 7}) {
        set_thread_count(threads);
        EXPECT_EQ(tidied(map, size, uneven_palette(), 12).map, wanted) << threads;
    }
    set_thread_count(0);
}

TEST(TidySpecks, NoneRemainsAndNothingElseChanges) {
    Random random(13);
    const Palette palette = uneven_palette();
    const Size size{60, 60};
    for (const double holes : {0.0, 0.02}) {
        const Map map = patchy_map(random, size, 0.2, holes);
        const std::uint32_t smallest = 9;
        const Tidied got = tidied(map, size, palette, smallest);
        EXPECT_GT(got.changed, 100U);
        for (std::size_t i = 0; i < map.size(); ++i) {
            EXPECT_EQ(map[i] == 4, got.map[i] == 4) << "transparent pixels stay";
        }
        EXPECT_EQ(tidied(got.map, size, palette, smallest).changed, 0U) << "nothing is left to do";
        if (holes > 0) continue;
        const std::vector<std::uint32_t> areas =
            PlainTidying(got.map, size, palette, smallest).areas();
        EXPECT_GE(*std::min_element(areas.begin(), areas.end()), smallest);
    }
}

TEST(TidySpecks, SmallestOfOneChangesNothing) {
    Random random(14);
    const Size size{30, 30};
    const Map map = patchy_map(random, size, 1, 0);
    for (const std::uint32_t smallest : {0U, 1U}) {
        EXPECT_EQ(tidied(map, size, uneven_palette(), smallest).changed, 0U);
    }
}

// Only where borders and distances are equal does the number of a label matter.
TEST(TidySpecks, NamesOfLabelsDoNotMatter) {
    Random random(15);
    const Palette palette = uneven_palette();
    const std::array<std::uint8_t, 5> other = {2, 0, 3, 1, 4};
    Palette renamed = palette;
    for (std::size_t l = 0; l < 4; ++l) renamed.swatches[other[l]] = palette.swatches[l];
    const Size size{80, 80};
    const Map map = patchy_map(random, size, 0.3, 0.02);
    Map renamed_map = map;
    for (std::uint8_t& l : renamed_map) l = other[l];
    Map wanted = tidied(map, size, palette, 6).map;
    ASSERT_NE(wanted, map);
    for (std::uint8_t& l : wanted) l = other[l];
    EXPECT_EQ(tidied(renamed_map, size, renamed, 6).map, wanted);
}

TEST(TidySpecks, LongestBorderThenNearestColourThenLowerLabel) {
    const Palette palette = palette_of({{0, 0, 0}, {50, 0, 0}, {60, 0, 0}, {100, 0, 0}});
    // Three sides to 0, one to 3, which is nearer to nothing.
    EXPECT_EQ(rows_of(tidied({"0000", "0013", "0003", "3333"}, palette, 2).map, 4),
              (std::vector<std::string>{"0000", "0003", "0003", "3333"}));
    // Two sides each: 60 is nearer to 100 than to 0.
    EXPECT_EQ(
        rows_of(tidied({"000333", "000333", "000233", "000033", "000033"}, palette, 2).map, 6)[2],
        "000333");
    // Two sides each and as far: 50 lies in the middle.
    EXPECT_EQ(
        rows_of(tidied({"000333", "000333", "000133", "000033", "000033"}, palette, 2).map, 6)[2],
        "000033");
}

TEST(TidySpecks, StrokesAslantStand) {
    const std::vector<std::string> rows = {"10000", "01000", "00100", "00010", "00001"};
    const Palette palette = uneven_palette();
    EXPECT_EQ(tidied(rows, palette, 5).changed, 0U);
    EXPECT_EQ(tidied(rows, palette, 6).changed, 5U);
}

TEST(TidySpecks, TransparentIsNoNeighbour) {
    const Palette palette = uneven_palette();
    EXPECT_EQ(tidied({"44444", "44144", "44444"}, palette, 9).changed, 0U);
    // One side to 0 counts, three to nothing do not.
    EXPECT_EQ(rows_of(tidied({"44444", "44100", "44400", "00000"}, palette, 2).map, 5)[1], "44000");
}

TEST(TidySpecks, AmongSpecksTheLargestStays) {
    const Palette palette = uneven_palette();
    EXPECT_EQ(rows_of(tidied({"0112", "0112"}, palette, 50).map, 4),
              (std::vector<std::string>{"1111", "1111"}));
    EXPECT_EQ(rows_of(tidied({"2211"}, palette, 50).map, 4), (std::vector<std::string>{"1111"}));
}

// The label that would be transparent is that of no swatch where there are 256.
TEST(TidySpecks, TwoHundredAndFiftySixColours) {
    std::vector<Lab> colours(256);
    for (std::size_t i = 0; i < colours.size(); ++i) colours[i].L = static_cast<double>(i) / 3;
    const Palette palette = palette_of(colours);
    Map map(100, 255);
    map[55] = 0;
    EXPECT_EQ(tidied(map, {10, 10}, palette, 2).changed, 1U);
    std::fill(map.begin(), map.end(), std::uint8_t{0});
    map[55] = 255;
    EXPECT_EQ(tidied(map, {10, 10}, palette, 2).changed, 1U);
}

}  // namespace
}  // namespace tincture
