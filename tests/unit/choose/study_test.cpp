#include "choose/study.h"

#include <gtest/gtest.h>

namespace tincture {
namespace {

TEST(Study, FindsByCount) {
    Study study;
    study.curve.resize(3);
    study.curve[0].count = 1;
    study.curve[1].count = 2;
    study.curve[2].count = 40;
    study.curve[2].mse = 5;
    study.palettes = {{1, {}}, {2, {}}, {40, {}}};
    EXPECT_EQ(curve_at(study, 40).mse, 5);
    EXPECT_EQ(&palette_at(study, 2), &study.palettes[1]);
    EXPECT_THROW((void)curve_at(study, 3), std::out_of_range);
    EXPECT_THROW((void)palette_at(study, 0), std::out_of_range);
}

}  // namespace
}  // namespace tincture
