// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/consistency.h"

#include <fstream>
#include <gtest/gtest.h>
#include <nlohmann/json.hpp>

using namespace whichway;

namespace {

// scipy 1.10.1, binomtest(k, n).proportion_ci(method = "exact") and its two-sided p value.
nlohmann::json reference() {
    std::ifstream file(WHICHWAY_SOURCE_DIR "/tests/reference/binomial_ci.json");
    return nlohmann::json::parse(file).at("table");
}

TEST(ExactProportion, EqualsTheReferenceForEveryCountAndConfidence) {
    int compared = 0;
    for (const auto& row : reference()) {
        const Interval interval = exactProportion(row.at("k"), row.at("n"), row.at("conf"));
        EXPECT_NEAR(interval.low, row.at("clopper_pearson").at(0).get<double>(), 1e-10) << row;
        EXPECT_NEAR(interval.high, row.at("clopper_pearson").at(1).get<double>(), 1e-10) << row;
        EXPECT_DOUBLE_EQ(interval.median, row.at("estimate").get<double>());
        ++compared;
    }
    EXPECT_EQ(compared, 36);
}

TEST(ExactProportion, OfNothingOrOfMoreThanAllIsRefused) {
    EXPECT_THROW(exactProportion(0, 0), std::invalid_argument);
    EXPECT_THROW(exactProportion(3, 2), std::invalid_argument);
    EXPECT_THROW(exactProportion(-1, 2), std::invalid_argument);
    EXPECT_THROW(exactProportion(1, 2, 1.0), std::invalid_argument);
}

TEST(EvenSplit, EqualsTheReference) {
    for (const auto& row : reference())
        EXPECT_NEAR(evenSplitProbability(row.at("k"), row.at("n")), row.at("p_two_sided_half").get<double>(),
                    1e-12)
            << row;
}

TEST(EvenSplit, StandsOutFromTheCountsOnThatAreUsedAtTheBench) {
    // 15 of 20, 21 of 30, 27 of 40 and 39 of 60 are the least counts with a two-sided p below 0.05 (sums of
    // the binomial formula).
    for (const auto& [count, of] : {std::pair{15, 20}, {21, 30}, {27, 40}, {39, 60}}) {
        EXPECT_LT(evenSplitProbability(count, of), 0.05) << count << " of " << of;
        EXPECT_GE(evenSplitProbability(count - 1, of), 0.05) << count << " of " << of;
        EXPECT_DOUBLE_EQ(evenSplitProbability(count, of), evenSplitProbability(of - count, of));
    }
}

TEST(EvenSplit, OfNothingIsCertain) {
    EXPECT_EQ(evenSplitProbability(0, 0), 1);
}

} // namespace
