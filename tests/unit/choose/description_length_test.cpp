#include <gtest/gtest.h>

#include <cmath>

#include "choose/code_length.h"
#include "choose/criteria.h"

namespace tincture {
namespace {

// A picture of `inks` colours, all of the same share: each colour that is missing doubles the error
// and more, each that is too many halves a cluster, which saves a little of what is left.
Study inks_study(int inks, double left, double noise, int end = 12) {
    Study study;
    study.picture.opaque_pixels = 230'400;
    study.evidence.noise = noise;
    for (int count = 1; count <= end; ++count) {
        CurvePoint point;
        point.count = count;
        const int missing = std::max(0, inks - count);
        const int more = std::max(0, count - inks);
        point.evidence_mse = left * (1 - 0.04 * more) + 40 * (std::exp2(missing) - 1);
        point.label_bits = std::log2(std::min(count, inks)) + 1.0 * more / inks;
        study.curve.push_back(point);
    }
    return study;
}

TEST(DescriptionLength, IsShortestAtTheInks) {
    for (int inks = 2; inks <= 11; ++inks) {
        for (const double left : {0.0, 0.5, 3.0}) {
            const Vote vote = description_length_vote(inks_study(inks, left, 1));
            EXPECT_EQ(vote.count, inks) << left;
            EXPECT_EQ(vote.criterion, "description length");
        }
    }
    EXPECT_EQ(description_length_vote(inks_study(1, 0.5, 1)).count, 1);
}

// The figures of the reason, from their definition: 1000 pixels, 24 bits a colour, a precision of 2
// and 0.3 of the noise.
TEST(DescriptionLength, SaysHowTheBitsAreCounted) {
    const Study study = inks_study(4, 0.7, 2);
    const std::string reason = description_length_vote(study).reason;
    const double complexity = log_label_complexity(4, 1000).back() / std::log(2.0);
    const double offsets = 1500 * std::log2(1 + 0.7 / (2 + 0.36));
    for (const std::string& wanted :
         {std::string("with 4 colours"), std::string("describe 1000 pixels"),
          std::to_string(std::lround(2000 + complexity)) + " for which colour each has",
          std::to_string(std::lround(offsets)) + " for how far off",
          std::string("96 for the palette")}) {
        EXPECT_NE(reason.find(wanted), std::string::npos) << wanted << " in: " << reason;
    }
}

TEST(DescriptionLength, NoiseIsNotDescribed) {
    // What a third colour saves is below the noise, or above it.
    Study study = inks_study(2, 6, 0, 4);
    study.curve[2].evidence_mse = study.curve[3].evidence_mse = 1;
    study.curve[2].label_bits = study.curve[3].label_bits = 1.7;
    EXPECT_EQ(description_length_vote(study).count, 3);
    study.evidence.noise = 12;
    EXPECT_EQ(description_length_vote(study).count, 2);
}

TEST(DescriptionLength, TheSizeOfThePictureHasNoSay) {
    Study study = inks_study(5, 2, 1);
    const Vote vote = description_length_vote(study);
    study.picture.opaque_pixels = 20'000'000;
    EXPECT_EQ(description_length_vote(study).reason, vote.reason);
    study.picture.opaque_pixels = 3;
    EXPECT_LT(description_length_vote(study).count, 5) << "three pixels are not worth a palette";
}

TEST(DescriptionLength, Abstains) {
    EXPECT_FALSE(description_length_vote(Study{}).count);
    EXPECT_FALSE(description_length_vote(inks_study(1, 0, 0, 1)).count);
    // Still falling at the end.
    const Vote vote = description_length_vote(inks_study(30, 0, 1, 12));
    EXPECT_FALSE(vote.count);
    EXPECT_NE(vote.reason.find("every colour more"), std::string::npos);
    // All colours there are, on the other hand, are a description without error.
    EXPECT_EQ(description_length_vote(inks_study(12, 0, 1, 12)).count, 12);
}

TEST(DescriptionLength, EqualOnesGoToFewerColours) {
    Study study = inks_study(1, 0, 0, 2);
    // The second colour saves exactly what it costs: nothing is at stake.
    study.curve[0].evidence_mse = study.curve[1].evidence_mse = 0;
    study.picture.opaque_pixels = 0;
    EXPECT_EQ(description_length_vote(study).count, 1);
}

}  // namespace
}  // namespace tincture
