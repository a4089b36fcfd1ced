#include "output/place_labels.h"

#include <gtest/gtest.h>

#include <cmath>

namespace tincture {
namespace {

constexpr Box frame{0, 0, 200, 100};

TEST(Geometry, BoxesAndSegments) {
    const Box box{10, 10, 20, 10};
    EXPECT_TRUE(overlap(box, {29, 19, 5, 5}));
    EXPECT_FALSE(overlap(box, {30, 10, 5, 5})) << "touching is no overlap";
    EXPECT_TRUE(contains(box, {10, 10, 20, 10}));
    EXPECT_FALSE(contains(box, {10, 10, 20.1, 10}));
    EXPECT_TRUE(crosses({{0, 15}, {100, 15}}, box));
    EXPECT_TRUE(crosses({{100, 18}, {0, 12}}, box)) << "leftwards and up";
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
    const auto places = place_labels(frame, lines, taken, requests);
    ASSERT_TRUE(places[0] && places[1]);
    EXPECT_EQ(places[0]->box.x, 70) << "after: off the frame, on the line, on a box";
    EXPECT_FALSE(places[0]->leader);
    EXPECT_EQ(places[1]->box.x, 130) << "after: on the first label, too near to the line";
}

TEST(PlaceLabels, GoesApartWithALeader) {
    const std::vector<Segment> lines = {{{0, 50}, {200, 50}}};
    const std::vector<LabelRequest> requests = {{40, 16, {100, 50}, {{90, 45}}}};
    const auto places = place_labels(frame, lines, {}, requests);
    ASSERT_TRUE(places[0] && places[0]->leader);
    EXPECT_EQ(places[0]->leader->to.x, 100);
    EXPECT_LT(std::abs(places[0]->leader->from.y - 50), 12) << "as near as it may stand";
}

TEST(PlaceLabels, SaysWhenTheFrameIsFull) {
    const std::vector<LabelRequest> requests(40, LabelRequest{60, 16, {100, 50}, {}});
    const auto places = place_labels(frame, {}, {}, requests);
    std::size_t placed = 0;
    for (std::size_t i = 0; i < places.size(); ++i) {
        if (!places[i]) continue;
        ++placed;
        EXPECT_TRUE(contains(frame, places[i]->box));
        for (std::size_t j = 0; j < i; ++j) {
            EXPECT_FALSE(places[j] && overlap(places[i]->box, places[j]->box));
        }
    }
    EXPECT_GE(placed, 4U);
    EXPECT_LT(placed, 16U);
}

}  // namespace
}  // namespace tincture
