#include "output/plot_axes.h"

#include <gtest/gtest.h>

namespace tincture {
namespace {

std::vector<std::string> words(const std::vector<AxisTick>& ticks) {
    std::vector<std::string> list;
    for (const AxisTick& tick : ticks) list.push_back(tick.words);
    return list;
}

TEST(LogAxis, PlacesRatiosAndTicks) {
    const std::vector<double> values = {0.4, 40};
    const LogAxis axis(values, 0.05, 100, 300);
    EXPECT_NEAR(axis.position(4), (axis.position(0.4) + axis.position(40)) / 2, 0.01);
    EXPECT_LT(axis.position(40), axis.position(4));
    EXPECT_FALSE(axis.is_broken());
    EXPECT_EQ(words(axis.ticks()), (std::vector<std::string>{"0.5", "1", "2", "5", "10", "20"}));
}

TEST(LogAxis, NarrowAndWideRanges) {
    const std::vector<double> narrow = {11, 24};
    EXPECT_EQ(words(LogAxis(narrow, 0.05, 100, 300).ticks()),
              (std::vector<std::string>{"7", "10", "15", "20", "30"}));
    const std::vector<double> wide = {0.06, 90};
    EXPECT_EQ(words(LogAxis(wide, 0.05, 100, 170).ticks()),
              (std::vector<std::string>{"0.1", "1", "10", "100"}));
    for (const double largest : {0.07, 0.9, 8.0, 77.0, 12345.0}) {
        const std::vector<double> values = {0.06, largest};
        const auto ticks = LogAxis(values, 0.05, 100, 250).ticks();
        EXPECT_GE(ticks.size(), 2U);
        for (std::size_t i = 1; i < ticks.size(); ++i) {
            EXPECT_LE(ticks[i].position, ticks[i - 1].position - 14.9) << largest;
        }
    }
}

TEST(LogAxis, SmallValuesStandOnTheFoot) {
    const std::vector<double> values = {10, 1, 0};
    const LogAxis axis(values, 0.05, 100, 300);
    EXPECT_TRUE(axis.is_broken());
    EXPECT_EQ(axis.position(0), 300);
    EXPECT_LT(axis.position(1), 274);
    EXPECT_EQ(axis.ticks()[0].words, "0");
    const std::vector<double> tiny = {10, 0.01};
    EXPECT_EQ(LogAxis(tiny, 0.05, 100, 300).ticks()[0].words, "<0.05");
    const std::vector<double> nothing = {0};
    EXPECT_EQ(LogAxis(nothing, 0.05, 100, 300).position(0), 300);
}

std::vector<int> up_to(int last) {
    std::vector<int> counts;
    for (int count = 1; count <= last; ++count) counts.push_back(count);
    return counts;
}

TEST(CountAxis, TicksHaveRoomAndTheMarkedCount) {
    for (const int last : {1, 2, 3, 12, 25, 40, 60, 61, 100, 257}) {
        for (const bool alone : {false, true}) {
            std::vector<int> counts = up_to(last);
            if (alone) counts.push_back(last + 30);
            for (const int marked : {1, last, (last + 1) / 2, counts.back()}) {
                const CountAxis axis(counts, 70, 850);
                const auto ticks = axis.ticks(marked);
                bool found = false;
                for (std::size_t i = 0; i < ticks.size(); ++i) {
                    found = found || ticks[i].words == std::to_string(marked);
                    EXPECT_GT(ticks[i].position, 70);
                    EXPECT_LT(ticks[i].position, 850);
                    if (i == 0) continue;
                    EXPECT_GE(ticks[i].position - ticks[i - 1].position, 24);
                }
                EXPECT_TRUE(found) << last << ' ' << marked;
            }
        }
    }
}

TEST(CountAxis, LinearThenLogarithmicAndBroken) {
    const CountAxis plain(up_to(25), 70, 850);
    EXPECT_NEAR(plain.position(13), (plain.position(1) + plain.position(25)) / 2, 0.01);
    EXPECT_FALSE(plain.is_logarithmic());
    EXPECT_FALSE(plain.break_position());
    const CountAxis wide(up_to(256), 70, 850);
    EXPECT_TRUE(wide.is_logarithmic());
    EXPECT_NEAR(wide.position(16), (wide.position(1) + wide.position(256)) / 2, 0.01);
    std::vector<int> counts = up_to(25);
    counts.push_back(200);
    const CountAxis broken(counts, 70, 850);
    ASSERT_TRUE(broken.break_position());
    EXPECT_EQ(broken.last(), 25);
    EXPECT_LT(broken.position(25), *broken.break_position());
    EXPECT_GT(broken.position(200), *broken.break_position());
}

}  // namespace
}  // namespace tincture
