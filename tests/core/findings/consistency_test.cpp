// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/consistency.h"

#include "core/preference/model_of_protocol.h"
#include "tests/support/answered_session.h"
#include "tests/support/small_study.h"

#include <cmath>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

/// One draw: likes the first feature, with cut points 0, 0.8, 2.2.
Draws draw(double weight = 2, double sideBias = 0) {
    Draws draws;
    draws.weights = Matrix(1, 3);
    draws.weights(0, 0) = weight;
    draws.sideBias = {sideBias};
    draws.cuts = Matrix(1, 3);
    draws.cuts(0, 1) = 0.8;
    draws.cuts(0, 2) = 2.2;
    return draws;
}

class Checks : public ::testing::Test {
protected:
    AnsweredSession session{[] {
        Protocol protocol = smallStudy().protocol;
        protocol.cannotTell = true;
        return protocol;
    }()};

    Consistency found() const { return findConsistency(session.state, draw()); }
    Prediction predicted(const Draws& draws) const {
        return findPrediction(session.state, responseModelOf(session.state.began.protocol), draws,
                              found().repeats);
    }
    /// Two motions of which a person who likes the first feature prefers the first.
    std::pair<std::string, std::string> betterAndWorse(std::size_t from = 0) const {
        const FeatureTable& table = session.state.began.protocol.table;
        const bool firstIsBetter = table.standardised(from, 0) > table.standardised(from + 1, 0);
        return {table.motions[firstIsBetter ? from : from + 1],
                table.motions[firstIsBetter ? from + 1 : from]};
    }
};

TEST_F(Checks, RepeatsAgreeWhenTheSameMotionIsChosenOnTheOtherSide) {
    const int one = session.add(TrialKind::HeldOut, "m000", "m001", 2);
    const int two = session.add(TrialKind::HeldOut, "m002", "m003", -1);
    const int three = session.add(TrialKind::HeldOut, "m004", "m005", 0);
    session.repeat(one, -3); // m000 again
    session.repeat(two, -1); // the right side again, which is the other motion
    session.repeat(three, 1);
    EXPECT_EQ(found().repeats.count, 1);
    EXPECT_EQ(found().repeats.of, 2);
    EXPECT_EQ(found().repeats.cannotTell, 1);
}

TEST_F(Checks, CatchPairsAreExpectedUnexpectedOrNeither) {
    session.addCatch(Side::Left, 3);
    session.addCatch(Side::Right, 1);
    session.addCatch(Side::Right, 0);
    EXPECT_EQ(found().catches.count, 1);
    EXPECT_EQ(found().catches.of, 2);
    EXPECT_EQ(found().catches.cannotTell, 1);
}

TEST_F(Checks, PracticeAndIdenticalPairsCountForNoSide) {
    session.add(TrialKind::Practice, "extra1", "extra2", 3);
    session.add(TrialKind::Identical, "m001", "m001", 1);
    session.add(TrialKind::Main, "m000", "m001", -1);
    EXPECT_EQ(found().left.count, 0);
    EXPECT_EQ(found().left.of, 1);
    EXPECT_EQ(found().identicalLeft.count, 1);
    EXPECT_EQ(found().identicalLeft.of, 1);
}

TEST_F(Checks, OneWordForNineInTenOfFifteenAnswersIsFlagged) {
    for (int i = 0; i < 14; ++i)
        session.add(TrialKind::Main, "m000", "m001", i % 2 == 0 ? 2 : -2);
    EXPECT_FALSE(found().oneWord) << "14 answers are too few";
    session.add(TrialKind::Main, "m000", "m001", 1);
    EXPECT_TRUE(found().oneWord) << "14 of 15";
    session.add(TrialKind::Main, "m000", "m001", 3);
    EXPECT_FALSE(found().oneWord) << "14 of 16";
    EXPECT_EQ(found().confidence, (std::vector<int>{1, 14, 1}));
}

TEST_F(Checks, UnknownResponseTimesAndThoseOfPracticeAreLeftOut) {
    session.add(TrialKind::Practice, "extra1", "extra2", 1, 0.1);
    EXPECT_FALSE(found().medianResponseTime);
    session.add(TrialKind::Main, "m000", "m001", 1, -1);
    session.add(TrialKind::Main, "m000", "m002", 1, 0.4);
    session.add(TrialKind::Main, "m000", "m003", 1, 5);
    EXPECT_EQ(found().quick, 1);
    EXPECT_DOUBLE_EQ(found().medianResponseTime.value(), 2.7);
}

TEST_F(Checks, AnEmptySessionIsConsistent) {
    EXPECT_EQ(found().left.of, 0);
    EXPECT_EQ(found().leftProbability, 1);
    EXPECT_FALSE(found().oneWord);
}

TEST_F(Checks, HeldOutAnswersAloneJudgeThePrediction) {
    const auto [better, worse] = betterAndWorse();
    session.add(TrialKind::Main, better, worse, -3);
    session.add(TrialKind::HeldOut, better, worse, 1);
    session.add(TrialKind::HeldOut, worse, better, 2);
    session.add(TrialKind::HeldOut, worse, better, 0);
    const Prediction prediction = predicted(draw());
    EXPECT_EQ(prediction.heldOut.count, 1);
    EXPECT_EQ(prediction.heldOut.of, 2);
    EXPECT_EQ(prediction.heldOut.cannotTell, 1);
    EXPECT_TRUE(prediction.tooFew);
    EXPECT_FALSE(prediction.reachable) << "there were no repeats";
}

TEST_F(Checks, TheLogScoreIsTheModelsWithItsLapse) {
    // A person of no weights and no side bias: eta = 0. Cumulative logit by hand, sigma(-0.8) - sigma(-2.2) =
    // 0.2100 for level 2 with c_0 = 0; with a lapse of 0.05 over 7 answers.
    session.add(TrialKind::HeldOut, "m000", "m001", 2);
    const double ordinal = 1 / (1 + std::exp(0.8)) - 1 / (1 + std::exp(2.2));
    EXPECT_NEAR(predicted(draw(0)).logScore.value(), std::log(0.05 / 7 + 0.95 * ordinal), 1e-12);
}

TEST_F(Checks, TenHeldOutAnswersAreEnoughToJudge) {
    const auto [better, worse] = betterAndWorse();
    for (int i = 0; i < 9; ++i)
        session.add(TrialKind::HeldOut, better, worse, 1);
    EXPECT_TRUE(predicted(draw()).tooFew);
    session.add(TrialKind::HeldOut, better, worse, 1);
    const Prediction prediction = predicted(draw());
    EXPECT_FALSE(prediction.tooFew);
    EXPECT_DOUBLE_EQ(prediction.accuracy->median, 1);
    // Clopper and Pearson for 10 of 10: (0.05)^(1/10).
    EXPECT_NEAR(prediction.accuracy->low, std::pow(0.05, 0.1), 1e-12);
    EXPECT_EQ(prediction.accuracy->high, 1);
}

TEST_F(Checks, TheReachableRangeGoesFromTheAgreementToThatOfEquallyHardPairs) {
    // A person who picks a side with probability .8 agrees with himself .68 of the time: 17 of 25.
    for (int i = 0; i < 25; ++i)
        session.repeat(session.add(TrialKind::HeldOut, "m000", "m001", 1), i < 17 ? -1 : 1);
    const auto reachable = predicted(draw()).reachable;
    ASSERT_TRUE(reachable);
    EXPECT_DOUBLE_EQ(reachable->low, 0.68);
    EXPECT_NEAR(reachable->high, 0.8, 1e-12);
}

TEST_F(Checks, AgreementBelowChanceGivesNoReachableRange) {
    for (int i = 0; i < 5; ++i)
        session.repeat(session.add(TrialKind::HeldOut, "m000", "m001", 1), i < 2 ? -1 : 1);
    EXPECT_FALSE(predicted(draw()).reachable);
}

} // namespace
