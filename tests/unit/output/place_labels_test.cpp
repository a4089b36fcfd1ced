#include "output/place_labels.h"

#include <gtest/gtest.h>

#include "output/plot_axes.h"

namespace tincture {
namespace {

constexpr Box kFrame{0, 0, 200, 100};

TEST(Geometry, BoxesAndSegments) {
    const Box box{10, 10, 20, 10};
    EXPECT_TRUE(overlap(box, {29, 19, 5, 5}));
    EXPECT_FALSE(overlap(box, {30, 10, 5, 5})) << "touching is no overlap";
    EXPECT_TRUE(contains(box, {10, 10, 20, 10}));
    EXPECT_FALSE(contains(box, {10, 10, 20.1, 10}));
    EXPECT_TRUE(crosses({{0, 15}, {100, 15}}, box));
    EXPECT_TRUE(crosses({{15, 12}, {16, 13}}, box)) << "within";
    EXPECT_TRUE(crosses({{5, 18}, {15, 28}}, {10, 10, 20, 14}));
    EXPECT_FALSE(crosses({{0, 10}, {100, 10}}, box)) << "along the edge";
    EXPECT_FALSE(crosses({{0, 0}, {8, 100}}, box));
    EXPECT_FALSE(crosses({{0, 24}, {14, 38}}, box)) << "past the corner";
    EXPECT_FALSE(crosses({{40, 15}, {50, 15}}, box)) << "ends before";
}

TEST(PlaceLabels, TakesTheFirstFreePlace) {
    const std::vector<Segment> lines = {{{0, 50}, {200, 50}}};
    const std::vector<Box> taken = {{0, 0, 60, 40}};
    const std::vector<LabelRequest> requests = {
        {40, 16, {50, 50}, {{190, 20}, {40, 45}, {30, 20}, {70, 20}, {120, 20}}},
        {40, 16, {50, 50}, {{75, 25}, {100, 36}, {130, 22}}}};
    const auto places = place_labels(kFrame, lines, taken, requests);
    ASSERT_TRUE(places[0] && places[1]);
    EXPECT_EQ(places[0]->box.x, 70) << "after: off the frame, on the line, on a box";
    EXPECT_FALSE(places[0]->leader);
    EXPECT_EQ(places[1]->box.x, 130) << "after: on the first label, too near to the line";
}

TEST(PlaceLabels, GoesApartWithALeader) {
    const std::vector<Segment> lines = {{{0, 50}, {200, 50}}};
    const std::vector<LabelRequest> requests = {{40, 16, {100, 50}, {{90, 45}}}};
    const auto places = place_labels(kFrame, lines, {}, requests);
    ASSERT_TRUE(places[0] && places[0]->leader);
    EXPECT_EQ(places[0]->leader->to.x, 100);
    EXPECT_LT(std::abs(places[0]->leader->from.y - 50), 12) << "as near as it may stand";
}

TEST(PlaceLabels, SaysWhenTheFrameIsFull) {
    const std::vector<LabelRequest> requests(40, LabelRequest{60, 16, {100, 50}, {}});
    const auto places = place_labels(kFrame, {}, {}, requests);
    std::size_t placed = 0;
    for (std::size_t i = 0; i < places.size(); ++i) {
        if (!places[i]) continue;
        ++placed;
        EXPECT_TRUE(contains(kFrame, places[i]->box));
        for (std::size_t j = 0; j < i; ++j) {
            EXPECT_FALSE(places[j] && overlap(places[i]->box, places[j]->box));
        }
    }
    EXPECT_GE(placed, 4U);
    EXPECT_LT(placed, 16U);
}

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
            EXPECT_LE(ticks[i].position, ticks[i - 1].position - 17.9) << largest;
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
                    if (i > 0) EXPECT_GE(ticks[i].position - ticks[i - 1].position, 24);
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
