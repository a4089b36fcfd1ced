#include <gtest/gtest.h>

#include "choose/criteria.h"

namespace tincture {
namespace {

Study strengths_study(const std::vector<double>& strengths) {
    Study study;
    for (const double strength : strengths) {
        CurvePoint point;
        point.count = static_cast<int>(study.curve.size()) + 1;
        point.evidence_mse = 10.0 / point.count;
        point.prediction_strength = strength;
        study.curve.push_back(point);
    }
    return study;
}

TEST(Stability, IsTheLargestStrongCount) {
    const Vote vote = stability_vote(strengths_study({1, 0.5, 0.97, 0.6, 0.9, 0.52, 0.3}));
    EXPECT_EQ(vote.count, 5);
    EXPECT_EQ(vote.criterion, "stability");
    for (const char* wanted :
         {"the same 5 colours", "90 % stay together", "with 6 colours only 52 %"}) {
        EXPECT_NE(vote.reason.find(wanted), std::string::npos) << vote.reason;
    }
    EXPECT_EQ(stability_vote(strengths_study({1, 0.5, 0.97, 0.6, 0.899, 0.5})).count, 3);
    EXPECT_EQ(stability_vote(strengths_study({1, 0.5, 0.5})).count, 1);
}

TEST(Stability, AtTheEndOfTheCurve) {
    Study study = strengths_study({1, 0.95, 0.92});
    EXPECT_FALSE(stability_vote(study).count) << "more colours might do as well";
    study.curve.back().evidence_mse = 0;
    EXPECT_EQ(stability_vote(study).count, 3) << "there are no more colours";
    study = strengths_study({1});
    study.curve.back().evidence_mse = 0;
    EXPECT_EQ(stability_vote(study).count, 1);
}

TEST(Stability, Abstains) {
    EXPECT_FALSE(stability_vote(Study{}).count);
    Study study = strengths_study({1, 0.95, 0.5});
    for (CurvePoint& point : study.curve) point.prediction_strength.reset();
    EXPECT_FALSE(stability_vote(study).count);
    // Kept colours that halves do not agree on.
    EXPECT_FALSE(stability_vote(strengths_study({0.5, 0.4, 0.1})).count);
}

// Counts beyond those that were measured have no say.
TEST(Stability, WhereOnlySomeWereMeasured) {
    Study study = strengths_study({1, 0.95, 0.5, 0.99});
    study.curve[3].prediction_strength.reset();
    EXPECT_EQ(stability_vote(study).count, 2);
    study.curve[2].prediction_strength.reset();
    EXPECT_FALSE(stability_vote(study).count) << "it may be the next";
}

}  // namespace
}  // namespace tincture
