// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/estimates.h"

#include "tests/support/small_study.h"

#include <cmath>
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <limits>

using namespace whichway;
using ::testing::HasSubstr;

namespace {

Draws drawsOf(const std::vector<std::vector<double>>& weights) {
    Draws draws;
    draws.weights = Matrix(weights.size(), weights.front().size());
    draws.cuts = Matrix(weights.size(), 3);
    for (std::size_t i = 0; i < weights.size(); ++i)
        for (std::size_t j = 0; j < weights[i].size(); ++j)
            draws.weights(i, j) = weights[i][j];
    draws.sideBias.assign(weights.size(), 0.0);
    return draws;
}

/// Travel time in s (s.d. 2, the numeraire), clearance in m (s.d. 0.5, spoken of per 0.1 m), and a third.
Protocol protocolOf(FeatureDefinition third, double thirdDeviation) {
    Protocol protocol;
    protocol.features = {{.name = "time", .label = "Travel time", .unit = "s"},
                         {.name = "clearance", .label = "Closest distance", .unit = "m", .speakPer = 0.1},
                         std::move(third)};
    protocol.table.standardisation = {
        {.mean = 9, .deviation = 2}, {.mean = 1, .deviation = 0.5}, {.deviation = thirdDeviation}};
    protocol.numeraire = "time";
    return protocol;
}

Protocol protocolOf() {
    return protocolOf({.name = "speed", .label = "Speed", .unit = "m/s"}, 1);
}

TEST(Interval, IsMedianAndFifthToNinetyFifthPercentile) {
    std::vector<double> values;
    for (int i = 100; i >= 0; --i)
        values.push_back(i);
    const Interval interval = intervalOf(values);
    EXPECT_DOUBLE_EQ(interval.median, 50);
    EXPECT_DOUBLE_EQ(interval.low, 5);
    EXPECT_DOUBLE_EQ(interval.high, 95);
    // Hyndman and Fan's type 7, by hand: position 0.05 * 3 = 0.15 between the first two.
    EXPECT_DOUBLE_EQ(intervalOf({4, 1, 2, 3}).low, 1.15);
}

TEST(Interval, MayEndInInfinityButHoldsNoNaN) {
    const double infinite = std::numeric_limits<double>::infinity();
    const Interval interval = intervalOf({-infinite, 0, 1, infinite, infinite});
    EXPECT_EQ(interval.median, 1);
    EXPECT_EQ(interval.high, infinite);
    EXPECT_EQ(interval.low, -infinite);
    EXPECT_THROW(intervalOf({1, std::numeric_limits<double>::quiet_NaN()}), std::invalid_argument);
    EXPECT_THROW(intervalOf({}), std::invalid_argument);
}

TEST(ProbabilityPositive, CountsZeroHalf) {
    EXPECT_DOUBLE_EQ(probabilityPositive({1, -1, 0, 2}), 0.625);
    EXPECT_THROW(probabilityPositive({}), std::invalid_argument);
}

TEST(TradeOffs, EqualTheClosedFormInTheUnitsOfSpeech) {
    // -(w_c / 0.5) 0.1 / (w_t / 2) = -(1.5 / 0.5) 0.1 / (-1 / 2) = 0.6 s for 0.1 m more clearance; and for
    // 1 m/s more speed -(-0.25) / (-0.5) = -0.5 s.
    const auto found = findTradeOffs(protocolOf(), drawsOf({{-1, 1.5, -0.25}, {-1, 1.5, -0.25}}));
    ASSERT_EQ(found.size(), 2u);
    EXPECT_EQ(found[0].feature, "clearance");
    EXPECT_TRUE(found[0].determined);
    EXPECT_NEAR(found[0].change.median, 0.6, 1e-12);
    EXPECT_NEAR(found[1].change.median, -0.5, 1e-12);
    EXPECT_EQ(found[0].sentence, "For 0.1\u00a0m more closest distance, this person accepts 0.6\u00a0s more "
                                 "travel time (90\u00a0% interval 0.6 to 0.6\u00a0s).");
    // Turned so that what is given up is positive.
    EXPECT_EQ(found[1].give, "0.5\u00a0s");
    EXPECT_EQ(found[1].forWhat, "1\u00a0m/s less speed");
}

TEST(TradeOffs, DoNotDependOnTheLengthOfTheWeights) {
    const auto one = findTradeOffs(protocolOf(), drawsOf({{-1, 1.5, -0.25}, {-0.8, 1.5, 0.25}}));
    const auto tenfold = findTradeOffs(protocolOf(), drawsOf({{-10, 15, -2.5}, {-8, 15, 2.5}}));
    for (std::size_t j = 0; j < one.size(); ++j)
        EXPECT_NEAR(one[j].change.high, tenfold[j].change.high, 1e-12);
}

TEST(TradeOffs, OfLogFeaturesArePerDoubling) {
    const Protocol protocol = protocolOf(
        {.name = "jerk", .label = "Jerk", .unit = "m/s3", .scale = FeatureScale::Log, .speakPer = 7}, 0.25);
    const auto found = findTradeOffs(protocol, drawsOf({{-1, 1, -0.5}, {-1, 1, -0.5}}));
    // -(-0.5 / 0.25) ln 2 / (-1 / 2) = -4 ln 2 s per doubling, whatever the unit of speech.
    EXPECT_NEAR(found[1].change.median, -4 * std::log(2.0), 1e-12);
    EXPECT_EQ(found[1].forWhat, "half the jerk");
}

TEST(TradeOffs, InALogNumeraireAreDoublings) {
    Protocol protocol = protocolOf();
    protocol.features[0].scale = FeatureScale::Log;
    const auto found = findTradeOffs(protocol, drawsOf({{-1, 1.5, 0}, {-1, 1.5, 0}}));
    EXPECT_NEAR(found[0].change.median, 0.6 / std::log(2.0), 1e-12);
    EXPECT_THAT(found[0].give, HasSubstr("doublings"));
}

TEST(TradeOffs, InALikedNumeraireGiveLessOfIt) {
    // A person who likes battery charge gives it up for clearance: the change is negative, the gift positive.
    const auto found = findTradeOffs(protocolOf(), drawsOf({{1, 1.5, 0}, {1, 1.5, 0}}));
    EXPECT_NEAR(found[0].change.median, -0.6, 1e-12);
    EXPECT_EQ(found[0].give, "0.6\u00a0s");
    EXPECT_EQ(found[0].giveWhat, "less travel time");
    EXPECT_EQ(found[0].forWhat, "0.1\u00a0m more closest distance");
}

TEST(TradeOffs, AreUndeterminedOnlyWhenTheNumerairesSignIs) {
    std::vector<std::vector<double>> weights(100, {-1, 1, 0.1});
    for (std::size_t i = 0; i < 40; ++i)
        weights[i][2] = -0.1; // the third feature's own sign is a coin: that hides nothing
    weights[0][0] = 0.5;
    const auto sure = findTradeOffs(protocolOf(), drawsOf(weights));
    EXPECT_DOUBLE_EQ(sure[0].signProbability, 0.99);
    EXPECT_TRUE(sure[0].determined);
    EXPECT_TRUE(sure[1].determined);
    EXPECT_DOUBLE_EQ(sure[1].featureSignProbability, 0.6);
    EXPECT_THAT(sure[1].sentence, HasSubstr("certain only to 0.60"));

    weights[1][0] = 0.5;
    const auto unsure = findTradeOffs(protocolOf(), drawsOf(weights));
    EXPECT_FALSE(unsure[0].determined);
    EXPECT_THAT(unsure[0].sentence, HasSubstr("not determined"));
    EXPECT_THAT(unsure[0].sentence, HasSubstr("0.98"));
    EXPECT_EQ(unsure[0].give, "");
}

TEST(TradeOffs, SurviveANumeraireOfNoWeight) {
    const auto found = findTradeOffs(protocolOf(), drawsOf({{0, 1, 0}, {-1, 1, 0}, {-1, 1, 0}}));
    EXPECT_FALSE(std::isnan(found[0].change.median));
    EXPECT_FALSE(std::isnan(found[1].change.low));
}

TEST(TradeOffs, NeedANumeraireAndFittingDraws) {
    Protocol protocol = protocolOf();
    EXPECT_THROW(findTradeOffs(protocol, drawsOf({{1, 2}})), std::invalid_argument);
    protocol.numeraire = "nothing";
    EXPECT_THROW(findTradeOffs(protocol, drawsOf({{1, 2, 3}})), std::invalid_argument);
}

TEST(Weights, TellDirectionAndSensitivityApart) {
    const WeightFindings found = findWeights(protocolOf(), drawsOf({{-3, 4, 0}, {-6, 8, 0}, {-1.5, 2, 0}}));
    EXPECT_NEAR(found.features[0].direction.median, -0.6, 1e-12);
    EXPECT_NEAR(found.features[0].direction.low, -0.6, 1e-12);
    EXPECT_NEAR(found.features[1].direction.high, 0.8, 1e-12);
    EXPECT_NEAR(found.sensitivity.median, 5, 1e-12);
    EXPECT_NEAR(found.features[1].standardised.median, 4, 1e-12);
    EXPECT_NEAR(found.features[1].perUnit.median, 8, 1e-12); // 4 per s.d. of 0.5 m
    EXPECT_EQ(found.features[0].positive, 0);
    EXPECT_EQ(found.features[2].positive, 0.5);
    EXPECT_NEAR(found.directionPrecision, 1, 1e-12);
}

TEST(Weights, HaveTheSampleCovarianceOfTheDraws) {
    // By hand: means (2, 3, 0); deviations (-1, -2), (0, 1), (1, 1).
    const WeightFindings found = findWeights(protocolOf(), drawsOf({{1, 1, 0}, {2, 4, 0}, {3, 4, 0}}));
    EXPECT_NEAR(found.covariance(0, 0), 1, 1e-12);
    EXPECT_NEAR(found.covariance(0, 1), 1.5, 1e-12);
    EXPECT_NEAR(found.covariance(1, 0), 1.5, 1e-12);
    EXPECT_NEAR(found.covariance(1, 1), 3, 1e-12);
    EXPECT_EQ(found.covariance(2, 2), 0);
}

TEST(Weights, OfZeroLengthHaveNoDirection) {
    const WeightFindings found = findWeights(protocolOf(), drawsOf({{0, 0, 0}, {0, 0, 0}}));
    EXPECT_EQ(found.features[0].direction.median, 0);
    EXPECT_EQ(found.sensitivity.median, 0);
}

TEST(BestMotions, HaveTheShareOfDrawsInWhichTheyAreBestAndTheRegretOfChoosingThem) {
    Protocol protocol;
    protocol.table.motions = {"a", "b", "c"};
    protocol.table.standardised = Matrix(3, 1);
    protocol.table.standardised(0, 0) = -1;
    protocol.table.standardised(2, 0) = 1;
    // Utilities: three draws (-1, 0, 1), one (2, 0, -2). Sums: a -1, b 0, c 1.
    const BestMotions found = findBestMotions(protocol, drawsOf({{1}, {1}, {1}, {-2}}));
    EXPECT_EQ(found.best.motion, "c");
    EXPECT_DOUBLE_EQ(found.best.probability, 0.75);
    EXPECT_EQ(found.worst.motion, "a");
    EXPECT_DOUBLE_EQ(found.worst.probability, 0.75);
    // E[max u] = (3 * 1 + 2) / 4, E[u(c)] = 1/4, E[mean u] = 0: (5/4 - 1/4) / (5/4).
    EXPECT_NEAR(found.expectedRegret, 0.8, 1e-12);
}

TEST(BestMotions, OfAPersonWhoCaresForNothingCostNothing) {
    Protocol protocol;
    protocol.table.motions = {"a", "b"};
    protocol.table.standardised = Matrix(2, 1, 0.5);
    EXPECT_EQ(findBestMotions(protocol, drawsOf({{1}, {2}})).expectedRegret, 0);
}

} // namespace
