#include "histogram/key_index.h"

#include <gtest/gtest.h>

#include <set>

#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;

ColourTable table_of(const std::set<std::uint64_t>& keys) {
    ColourTable table;
    table.key.assign(keys.begin(), keys.end());
    return table;
}

void expect_index(const std::set<std::uint64_t>& keys, Random& random) {
    const ColourTable table = table_of(keys);
    const KeyIndex index(table);
    for (std::size_t i = 0; i < table.size(); ++i) ASSERT_EQ(index.find(table.key[i]), i);
    const auto expect_missing = [&](std::uint64_t key) {
        if (keys.count(key) > 0) return;
        EXPECT_EQ(index.find(key), KeyIndex::missing) << key;
    };
    expect_missing(0);
    expect_missing(~std::uint64_t{0});
    for (const std::uint64_t key : keys) {
        expect_missing(key + 1);
        expect_missing(key ^ std::uint64_t{1} << random.below(64));
        expect_missing(random.bits());
    }
}

// Every size around the powers of two at which there are more places.
TEST(KeyIndex, FindsEveryKeyAndNoOther) {
    Random random(61);
    for (const std::size_t size : {1U, 2U, 3U, 4U, 5U, 7U, 8U, 9U, 63U, 64U, 65U, 5000U}) {
        SCOPED_TRACE(size);
        std::set<std::uint64_t> any;
        std::set<std::uint64_t> low;
        std::set<std::uint64_t> high;
        while (any.size() < size) any.insert(random.bits());
        while (low.size() < size) low.insert(random.below(2 * size));
        while (high.size() < size) high.insert(std::uint64_t{random.below(2 * size)} << 48);
        expect_index(any, random);
        expect_index(low, random);
        expect_index(high, random);
    }
}

// 0 is what free places hold; the highest key is no mark here.
TEST(KeyIndex, FindsTheLowestAndTheHighestKey) {
    Random random(62);
    constexpr std::uint64_t highest = ~std::uint64_t{0};
    expect_index({0}, random);
    expect_index({highest}, random);
    expect_index({0, highest}, random);
    expect_index({5, 6, 7}, random);
}

TEST(KeyIndex, OfNothingFindsNothing) {
    EXPECT_EQ(KeyIndex(ColourTable{}).find(0), KeyIndex::missing);
    EXPECT_EQ(KeyIndex(ColourTable{}).find(12), KeyIndex::missing);
}

// Keys whose places all lie at the end, so that looking goes on at the front.
TEST(KeyIndex, GoesRoundTheEnd) {
    Random random(63);
    std::set<std::uint64_t> keys;
    while (keys.size() < 100) {
        const std::uint64_t key = random.bits();
        if (key * 0x9E3779B97F4A7C15U >> 56 == 255) keys.insert(key);
    }
    expect_index(keys, random);
}

}  // namespace
}  // namespace tincture
