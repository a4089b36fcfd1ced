#include "choose/proposal.h"

#include <gtest/gtest.h>

#include <array>
#include <cmath>

#include "choose/criteria.h"
#include "tests/support/random.h"

namespace tincture {
namespace {

using test_support::Random;

// Counts from 1: errors as the clustering has them, 95th percentiles as the palette has them.
Study study_of(const std::vector<double>& errors, const std::vector<double>& p95) {
    Study study;
    study.picture.distinct_colours = 100'000;
    for (std::size_t i = 0; i < errors.size(); ++i) {
        CurvePoint point;
        point.count = static_cast<int>(i) + 1;
        point.evidence_mse = errors[i];
        point.mse = errors[i];
        point.p95_de00 = p95[i];
        study.curve.push_back(point);
    }
    return study;
}

// ln(error + 0.5) falls by one a count up to `knee`, then hardly; the 95th percentile is above 3
// before `met` and below it from there on.
Study bent_study(int knee, int met, int end = 25) {
    std::vector<double> errors, p95;
    for (int count = 1; count <= end; ++count) {
        const double logarithm = 7 - std::min(count, knee) - 0.02 * std::max(0, count - knee);
        errors.push_back(std::exp(std::max(logarithm, -0.69)) - 0.5);
        p95.push_back(count >= met ? 2.0 : 6.0 - 0.1 * count);
    }
    return study_of(errors, p95);
}

void expect_sound(const Study& study, const Proposal& proposal) {
    EXPECT_LE(proposal.low, proposal.count);
    EXPECT_LE(proposal.count, proposal.high);
    EXPECT_GE(proposal.low, study.curve.front().count);
    EXPECT_LE(proposal.high, std::max(study.at_most, study.curve.front().count));
    EXPECT_NO_THROW((void)curve_at(study, proposal.count));
    EXPECT_NO_THROW((void)curve_at(study, proposal.low));
    EXPECT_NO_THROW((void)curve_at(study, proposal.high));
    EXPECT_GT(proposal.confidence, 0);
    EXPECT_LE(proposal.confidence, 1);
    EXPECT_FALSE(proposal.votes.empty());
    for (const Vote& vote : proposal.votes) EXPECT_FALSE(vote.reason.empty());
    EXPECT_EQ(proposal.sentence.back(), '.');
    for (const char* wrong : {"nan", "inf", "  ", "1 colours"}) {
        const std::size_t at = proposal.sentence.find(wrong);
        EXPECT_TRUE(at == std::string::npos || (at > 0 && std::isdigit(proposal.sentence[at - 1])))
            << proposal.sentence;
    }
}

TEST(Knee, LiesWhereTheLogarithmBends) {
    for (int knee = 2; knee <= 6; ++knee) {
        const Vote vote = knee_vote(bent_study(knee, 99));
        EXPECT_EQ(vote.count, knee);
        EXPECT_NE(vote.reason.find("at " + std::to_string(knee)), std::string::npos);
        const std::optional<CountRange> range = knee_range(bent_study(knee, 99));
        ASSERT_TRUE(range);
        EXPECT_LE(range->low, knee);
        EXPECT_GE(range->high, knee);
    }
}

TEST(Knee, TakesNoNoticeOfACountBeyondTheSweep) {
    Study study = bent_study(4, 99);
    CurvePoint far;
    far.count = 200;
    far.evidence_mse = 0;
    study.curve.push_back(far);
    EXPECT_EQ(swept(study).size(), 25U);
    EXPECT_EQ(knee_vote(study).count, 4);
}

TEST(Knee, AbstainsWhereNothingBends) {
    EXPECT_FALSE(knee_vote(study_of({5}, {9})).count);
    EXPECT_FALSE(knee_vote(study_of({5, 1}, {9, 8})).count);
    EXPECT_FALSE(knee_vote(study_of({5, 5, 5, 5}, {9, 9, 9, 9})).count);
    EXPECT_FALSE(knee_vote(study_of({0, 0, 0}, {0, 0, 0})).count);
    EXPECT_FALSE(knee_range(study_of({0, 0, 0}, {0, 0, 0})));
    EXPECT_FALSE(knee_vote(Study{}).count);
    // It bends the other way.
    EXPECT_FALSE(knee_vote(study_of({100, 99, 90, 5}, {9, 9, 9, 9})).count);
}

TEST(Tolerance, IsTheFirstCountThatMeetsIt) {
    Study study = study_of({9, 8, 7, 6}, {5.0, 3.0, 3.1, 1.0});
    EXPECT_EQ(tolerance_vote(study).count, 2) << "met where it is equal";
    study.tolerance = 2.99;
    EXPECT_EQ(tolerance_vote(study).count, 4);
    EXPECT_NE(tolerance_vote(study).reason.find("1.0 CIEDE2000"), std::string::npos);
    study.tolerance = 6;
    EXPECT_EQ(tolerance_vote(study).count, 1);
    EXPECT_NE(tolerance_vote(study).reason.find("1 colour,"), std::string::npos);
}

TEST(Tolerance, SaysWhatItWouldTake) {
    // Twice the tolerance at 25 colours: about 8 times as many (error falls with the cube root).
    Study study = bent_study(4, 99);
    study.curve.back().p95_de00 = 6.0;
    Vote vote = tolerance_vote(study);
    EXPECT_FALSE(vote.count);
    EXPECT_NE(vote.reason.find("not met up to 25 colours"), std::string::npos) << vote.reason;
    EXPECT_NE(vote.reason.find("within 6.0 CIEDE2000"), std::string::npos) << vote.reason;
    EXPECT_NE(vote.reason.find("roughly 200 colours"), std::string::npos) << vote.reason;
    // Far out of reach no number is made up.
    study.tolerance = 0.1;
    EXPECT_EQ(tolerance_vote(study).reason.find("roughly"), std::string::npos);
    study.tolerance = 0;
    EXPECT_EQ(tolerance_vote(study).reason.find("roughly"), std::string::npos);
    vote = tolerance_vote(study_of({9}, {9}));
    EXPECT_NE(vote.reason.find("up to 1 colour,"), std::string::npos) << vote.reason;
}

TEST(Tolerance, TakesNoNoticeOfACountBeyondTheSweep) {
    Study study = study_of({9, 8, 7}, {9, 8, 7});
    study.curve.push_back(study.curve.back());
    study.curve.back().count = 50;
    study.curve.back().p95_de00 = 0.5;
    EXPECT_FALSE(tolerance_vote(study).count);
    EXPECT_FALSE(tolerance_vote(Study{}).count);
}

TEST(DistinctColours, SpeakWhereTheRangeHoldsThem) {
    Study study = bent_study(4, 99);
    study.picture.distinct_colours = 24;
    EXPECT_EQ(distinct_colours_vote(study).count, 24);
    study.picture.distinct_colours = 25;
    EXPECT_FALSE(distinct_colours_vote(study).count);
    study.picture.distinct_colours = 1;
    EXPECT_EQ(distinct_colours_vote(study).count, 1);
    study.picture.distinct_colours = 20;
    study.picture.colour_cell_de = 0.25;
    EXPECT_FALSE(distinct_colours_vote(study).count) << "cells are no colours";
    study.picture.colour_cell_de.reset();
    study.picture.distinct_colours = ~std::uint64_t{0};
    EXPECT_FALSE(distinct_colours_vote(study).count);
}

// Flat art in which `inks` stand out, the curve bends at `knee`, and beyond `look_alikes` two
// colours come close.
Study flat_art(int inks, int knee, int look_alikes, double noise = 0) {
    Study study = bent_study(knee, 99);
    study.evidence = {"flat art", 0.9, noise, inks};
    for (CurvePoint& point : study.curve) {
        point.closest_pair_de00 = point.count > look_alikes ? 4.9 : 5.0;
    }
    return study;
}

// What looks like a blend may yet be an ink: the range reaches so far.
TEST(Proposal, LeavesRoomForInksThatLookLikeBlends) {
    Study study = flat_art(5, 5, 5);
    study.evidence.perhaps_more_inks = 2;
    const Proposal proposal = propose(study);
    EXPECT_EQ(proposal.count, 5);
    EXPECT_EQ(proposal.low, 5);
    EXPECT_EQ(proposal.high, 7);
    EXPECT_EQ(proposal.confidence, 0.7);
    EXPECT_NE(proposal.sentence.find("2 more stand out"), std::string::npos) << proposal.sentence;
}

TEST(Proposal, OfFlatArtIsTheMiddleOfThree) {
    Proposal proposal = propose(flat_art(5, 5, 5));
    EXPECT_EQ(proposal.count, 5);
    EXPECT_EQ(proposal.low, 5);
    EXPECT_EQ(proposal.high, 5);
    EXPECT_EQ(proposal.confidence, 0.9);
    EXPECT_EQ(propose(flat_art(5, 5, 5, 2)).confidence, 0.9);  // worn
    for (const auto& [inks, knee, look_alikes] :
         {std::array{4, 6, 6}, std::array{6, 4, 6}, std::array{6, 6, 4}}) {
        proposal = propose(flat_art(inks, knee, look_alikes));
        EXPECT_EQ(proposal.count, 6);
        EXPECT_EQ(proposal.low, 4);
        EXPECT_EQ(proposal.high, 6);
        EXPECT_EQ(proposal.confidence, 0.5);
        EXPECT_NE(proposal.sentence.find("disagrees"), std::string::npos) << proposal.sentence;
        expect_sound(flat_art(inks, knee, look_alikes), proposal);
    }
    proposal = propose(flat_art(3, 6, 5));
    EXPECT_EQ(proposal.count, 5);
    EXPECT_EQ(proposal.low, 3);
    EXPECT_EQ(proposal.high, 6);
    EXPECT_EQ(proposal.confidence, 0.2);
    // Few different colours may be blends: what stands out goes before them.
    Study study = flat_art(5, 5, 5);
    study.picture.distinct_colours = 9;
    EXPECT_EQ(propose(study).count, 5);
}

TEST(Inks, AbstainWhereTheyWereNotFoundInFlatArt) {
    Study study = flat_art(5, 6, 7);
    EXPECT_EQ(inks_vote(study).count, 5);
    EXPECT_NE(inks_vote(study).reason.find("90 %"), std::string::npos);
    study.evidence.kind = "continuous tone";
    EXPECT_FALSE(inks_vote(study).count);
    study.evidence = {"flat art", 0.9, 0.0, 0};
    EXPECT_FALSE(inks_vote(study).count);
    EXPECT_FALSE(inks_vote(Study{}).count);
}

TEST(LookAlikes, EndWhereTwoComeCloseOrOneStandsForNothing) {
    Study study = flat_art(5, 6, 7);
    EXPECT_EQ(look_alikes_vote(study).count, 7);
    study.curve[3].least_evidence_share = 0.0003;
    EXPECT_EQ(look_alikes_vote(study).count, 7);
    study.curve[3].least_evidence_share = 0.00029;
    EXPECT_EQ(look_alikes_vote(study).count, 3);
    EXPECT_FALSE(look_alikes_vote(flat_art(5, 6, 30)).count);
    EXPECT_FALSE(look_alikes_vote(Study{}).count);
}

TEST(SecondDifference, IsTheSharpestBend) {
    EXPECT_EQ(second_difference_vote(bent_study(4, 99)).count, 4);
    EXPECT_FALSE(second_difference_vote(study_of({5, 1}, {9, 8})).count);
    EXPECT_FALSE(second_difference_vote(study_of({5, 5, 5, 5}, {9, 9, 9, 9})).count);
    EXPECT_FALSE(second_difference_vote(Study{}).count);
}

TEST(Proposal, FollowsItsRule) {
    // 2. No more colours than the range allows.
    Study study = bent_study(4, 3, 7);
    study.picture.distinct_colours = 7;
    Proposal proposal = propose(study);
    EXPECT_EQ(proposal.count, 7);
    EXPECT_EQ(proposal.low, 3);
    EXPECT_EQ(proposal.high, 7);
    EXPECT_EQ(proposal.confidence, 0.9);
    expect_sound(study, proposal);
    // 3. No count is natural. Knee and tolerance agree, or nearly.
    for (const int met : {3, 4, 5}) {
        proposal = propose(bent_study(4, met));
        EXPECT_EQ(proposal.count, met);
        EXPECT_EQ(proposal.low, std::min(met, 4));
        EXPECT_EQ(proposal.high, std::max(met, 4));
        EXPECT_EQ(proposal.confidence, 0.5);
    }
    // They do not.
    proposal = propose(bent_study(4, 11));
    EXPECT_EQ(proposal.count, 4);
    EXPECT_EQ(proposal.low, 4);
    EXPECT_EQ(proposal.high, 11);
    EXPECT_EQ(proposal.confidence, 0.3);
    EXPECT_NE(proposal.sentence.find("no count is natural"), std::string::npos);
    EXPECT_NE(proposal.sentence.find("only at 11"), std::string::npos) << proposal.sentence;
    proposal = propose(bent_study(6, 2));
    EXPECT_EQ(proposal.count, 6);
    EXPECT_EQ(proposal.low, 2);
    EXPECT_NE(proposal.sentence.find("already at 2"), std::string::npos) << proposal.sentence;
    proposal = propose(bent_study(5, 99));
    EXPECT_EQ(proposal.count, 5);
    EXPECT_EQ(proposal.confidence, 0.3);
    // 4. Without a knee.
    const std::vector<double> flat(25, 2.0);
    std::vector<double> p95(25, 4.0);
    EXPECT_EQ(propose(study_of(flat, p95)).count, 24) << "neither: the end of the range";
    p95[8] = 2.5;
    EXPECT_EQ(propose(study_of(flat, p95)).count, 9);
}

TEST(Proposal, StaysWithinTheRange) {
    Study study = bent_study(4, 4);
    study.at_least = 6;
    study.at_most = 10;
    Proposal proposal = propose(study);
    EXPECT_EQ(proposal.count, 6);
    EXPECT_NE(proposal.sentence.find("speaks for 4"), std::string::npos) << proposal.sentence;
    expect_sound(study, proposal);
    study.at_least = 2;
    study.at_most = 3;
    proposal = propose(study);
    EXPECT_EQ(proposal.count, 3);
    expect_sound(study, proposal);
    study.at_least = study.at_most = 12;
    proposal = propose(study);
    EXPECT_EQ(proposal.count, 12);
    EXPECT_EQ(proposal.low, 12);
    EXPECT_EQ(proposal.high, 12);
    expect_sound(study, proposal);
}

TEST(Proposal, OfOneAndOfTwoColours) {
    Study one = study_of({0}, {0});
    one.picture.distinct_colours = 1;
    EXPECT_EQ(propose(one).count, 1);
    EXPECT_EQ(propose(one).sentence.substr(0, 9), "1 colour:");
    expect_sound(one, propose(one));
    Study two = study_of({80, 0}, {30, 0});
    two.picture.distinct_colours = 2;
    EXPECT_EQ(propose(two).count, 2);
    expect_sound(two, propose(two));
    // A range that lies above all there is.
    two.at_least = 8;
    EXPECT_EQ(propose(two).count, 2);
    expect_sound(two, propose(two));
}

TEST(Proposal, OfAnyStudyIsSound) {
    Random random(3);
    for (int trial = 0; trial < 3000; ++trial) {
        const std::size_t n = 1 + random.below(trial % 3 == 0 ? 4 : 60);
        std::vector<double> errors(n), p95(n);
        double error = random.between(0, 1000);
        for (std::size_t i = 0; i < n; ++i) {
            errors[i] = random.below(6) == 0 && i + 1 == n ? 0 : error;
            error *= random.below(4) == 0 ? 1 : random.between(0.3, 1);
            p95[i] = random.below(8) == 0 ? 0 : random.between(0, 12);
        }
        Study study = study_of(errors, p95);
        // With kept colours the curve starts later.
        const int first = static_cast<int>(random.below(5));
        for (CurvePoint& point : study.curve) point.count += first;
        if (random.below(4) == 0) {
            study.curve.push_back(study.curve.back());
            study.curve.back().count += 30;
        }
        study.at_least = 1 + static_cast<int>(random.below(30));
        study.at_most = study.at_least + static_cast<int>(random.below(30));
        study.tolerance = random.below(5) == 0 ? 0 : random.between(0, 10);
        study.picture.distinct_colours = 1 + random.below(random.below(2) == 0 ? 30 : 100'000);
        const Proposal proposal = propose(study);
        expect_sound(study, proposal);
        EXPECT_FALSE(::testing::Test::HasFailure()) << "trial " << trial;
        if (::testing::Test::HasFailure()) return;
    }
}

}  // namespace
}  // namespace tincture
