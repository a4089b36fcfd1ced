#include "regions/components.h"

#include <gtest/gtest.h>

#include "regions/runs.h"
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

// Labels at random, each pixel that of its left or upper neighbour with the probability `alike`.
Map random_map(Random& random, Size size, std::size_t labels, double alike) {
    Map map(std::size_t{size.width} * size.height);
    for (std::size_t i = 0; i < map.size(); ++i) {
        map[i] = static_cast<std::uint8_t>(random.below(labels));
        if (random.unit() >= alike || i < size.width || i % size.width == 0) continue;
        map[i] = random.below(2) == 0 ? map[i - 1] : map[i - size.width];
    }
    return map;
}

// For each pixel the first pixel, row by row, of its component: flood fill, pixel by pixel.
std::vector<std::size_t> plain_components(const Map& map, Size size, bool corners) {
    const auto none = static_cast<std::size_t>(-1);
    std::vector<std::size_t> component(map.size(), none);
    const auto width = static_cast<std::int64_t>(size.width);
    for (std::size_t start = 0; start < map.size(); ++start) {
        if (component[start] != none) continue;
        std::vector<std::size_t> open = {start};
        component[start] = start;
        while (!open.empty()) {
            const auto at = static_cast<std::int64_t>(open.back());
            open.pop_back();
            for (std::int64_t dy = -1; dy <= 1; ++dy) {
                for (std::int64_t dx = -1; dx <= 1; ++dx) {
                    if (!corners && dx != 0 && dy != 0) continue;
                    const std::int64_t x = at % width + dx;
                    const std::int64_t y = at / width + dy;
                    if (x < 0 || y < 0 || x >= width || y >= size.height) continue;
                    const auto other = static_cast<std::size_t>(y * width + x);
                    if (component[other] != none || map[other] != map[start]) continue;
                    component[other] = start;
                    open.push_back(other);
                }
            }
        }
    }
    return component;
}

// The same out of runs: the first pixel of the first run.
std::vector<std::size_t> found_components(const Map& map, Size size, Connectivity connectivity) {
    const Runs runs = find_runs(map.data(), size.width, size.height);
    const std::vector<std::uint32_t> component = find_components(runs, connectivity);
    std::vector<std::size_t> first(runs.size());
    std::vector<std::size_t> result(map.size());
    for (std::uint32_t y = 0; y < runs.rows(); ++y) {
        for (std::uint32_t r = runs.row_start[y]; r < runs.row_start[y + 1]; ++r) {
            const std::size_t row = std::size_t{y} * size.width;
            first[r] = row + runs.begin[r];
            for (std::uint32_t x = runs.begin[r]; x < runs.end(r, y); ++x) {
                result[row + x] = first[component[r]];
            }
        }
    }
    return result;
}

constexpr Size sizes[] = {{1, 1}, {1, 200},  {200, 1}, {7, 5},
                          {8, 9}, {17, 130}, {64, 64}, {70, 200}};

TEST(FindRuns, SpellTheMap) {
    Random random(1);
    for (const Size size : sizes) {
        for (const double alike : {0.0, 0.5, 0.95}) {
            const Map map = random_map(random, size, 3, alike);
            const Runs runs = find_runs(map.data(), size.width, size.height);
            ASSERT_EQ(runs.rows(), size.height);
            Map spelt;
            for (std::uint32_t y = 0; y < size.height; ++y) {
                for (std::uint32_t r = runs.row_start[y]; r < runs.row_start[y + 1]; ++r) {
                    ASSERT_LT(runs.begin[r], runs.end(r, y));
                    const bool first = r == runs.row_start[y];
                    EXPECT_TRUE(first || runs.label[r] != runs.label[r - 1])
                        << "not as long as can be";
                    spelt.insert(spelt.end(), runs.end(r, y) - runs.begin[r], runs.label[r]);
                }
            }
            EXPECT_EQ(spelt, map);
        }
    }
}

TEST(FindRuns, NothingInNothing) {
    const Runs runs = find_runs(nullptr, 5, 0);
    EXPECT_EQ(runs.rows(), 0U);
    EXPECT_TRUE(find_components(runs, Connectivity::sides).empty());
}

TEST(ForRunsOver, SharedColumns) {
    Random random(2);
    const Size size{60, 3};
    for (int i = 0; i < 200; ++i) {
        const Map map = random_map(random, size, 2, 0.8);
        const Runs runs = find_runs(map.data(), size.width, size.height);
        const auto begin = static_cast<std::uint32_t>(random.below(60));
        const auto end = begin + 1 + static_cast<std::uint32_t>(random.below(60 - begin));
        Map seen;
        for_runs_over(runs, 1, begin, end, [&](std::uint32_t r, std::uint32_t n) {
            seen.insert(seen.end(), n, runs.label[r]);
        });
        EXPECT_EQ(seen, Map(map.begin() + 60 + begin, map.begin() + 60 + end));
    }
}

TEST(FindComponents, AsFloodFillFindsThem) {
    Random random(3);
    for (const Size size : sizes) {
        for (const std::size_t labels : {std::size_t{2}, std::size_t{5}}) {
            for (const double alike : {0.0, 0.6, 0.95}) {
                const Map map = random_map(random, size, labels, alike);
                for (const bool corners : {false, true}) {
                    const Connectivity connectivity =
                        corners ? Connectivity::sides_and_corners : Connectivity::sides;
                    EXPECT_EQ(found_components(map, size, connectivity),
                              plain_components(map, size, corners));
                }
            }
        }
    }
}

// Spirals make long chains of unions.
TEST(FindComponents, Spiral) {
    const Size size{61, 197};
    Map map(std::size_t{size.width} * size.height, 0);
    for (std::uint32_t y = 0; y < size.height; ++y) {
        for (std::uint32_t x = 0; x < size.width; ++x) {
            const std::uint32_t ring =
                std::min(std::min(x, y), std::min(size.width - 1 - x, size.height - 1 - y));
            map[std::size_t{y} * size.width + x] = ring % 2 == 0 ? 1 : 0;
            if (x == ring && y == ring + 1) map[std::size_t{y} * size.width + x] ^= 1;
        }
    }
    for (const bool corners : {false, true}) {
        EXPECT_EQ(found_components(map, size,
                                   corners ? Connectivity::sides_and_corners : Connectivity::sides),
                  plain_components(map, size, corners));
    }
}

TEST(FindComponents, ThreadsHaveNoSay) {
    Random random(4);
    const Size size{300, 1000};
    const Map map = random_map(random, size, 3, 0.7);
    const std::vector<std::size_t> wanted = plain_components(map, size, true);
    for (const int threads : {1, 2, 3, 7}) {
        set_thread_count(threads);
        EXPECT_EQ(found_components(map, size, Connectivity::sides_and_corners), wanted) << threads;
    }
    set_thread_count(0);
}

TEST(ComponentAreas, CountPixels) {
    Random random(5);
    const Size size{70, 200};
    const Map map = random_map(random, size, 3, 0.8);
    const Runs runs = find_runs(map.data(), size.width, size.height);
    const std::vector<std::uint32_t> component =
        find_components(runs, Connectivity::sides_and_corners);
    const std::vector<std::uint64_t> area = component_areas(runs, component);
    const std::vector<std::size_t> plain = plain_components(map, size, true);
    std::vector<std::uint64_t> plain_area(map.size(), 0);
    for (const std::size_t first : plain) ++plain_area[first];
    for (std::uint32_t y = 0; y < runs.rows(); ++y) {
        for (std::uint32_t r = runs.row_start[y]; r < runs.row_start[y + 1]; ++r) {
            const std::size_t first = std::size_t{y} * size.width + runs.begin[r];
            EXPECT_EQ(area[r], component[r] == r ? plain_area[first] : 0);
        }
    }
}

}  // namespace
}  // namespace tincture
