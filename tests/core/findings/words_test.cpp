// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/words.h"

#include <gtest/gtest.h>
#include <limits>

using namespace whichway;

namespace {

TEST(Words, WriteATrueMinusAndNoMinusZero) {
    EXPECT_EQ(spokenNumber(-0.44, 2), "\u22120.44");
    EXPECT_EQ(spokenNumber(-0.001, 2), "0.00");
    EXPECT_EQ(spokenNumber(-25), "\u221225");
}

TEST(Words, NameWhatIsNoFiniteNumber) {
    EXPECT_EQ(spokenNumber(std::numeric_limits<double>::quiet_NaN(), 1), "n/a");
    EXPECT_EQ(spokenNumber(-std::numeric_limits<double>::infinity(), 1), "\u2212unlimited");
}

TEST(Words, ShowAnIntervalToTwoDigits) {
    EXPECT_EQ(decimalsFor(3.1), 1);
    EXPECT_EQ(decimalsFor(31), 0);
    EXPECT_EQ(decimalsFor(3100), 0);
    EXPECT_EQ(decimalsFor(0.042), 3);
    EXPECT_EQ(decimalsFor(0), 1);
    EXPECT_EQ(decimalsFor(1e-30), 6);
    EXPECT_EQ(decimalsFor(std::numeric_limits<double>::infinity()), 1);
}

TEST(Words, WriteUnitsAsPeopleDoAndNoneForPureNumbers) {
    EXPECT_EQ(spokenQuantity("1.3", "m/s2"), "1.3\u00a0m/s²");
    EXPECT_EQ(spokenQuantity("1.3", "m/s3"), "1.3\u00a0m/s³");
    EXPECT_EQ(spokenQuantity("1.3", "1"), "1.3");
    EXPECT_EQ(spokenQuantity("1.3", ""), "1.3");
    EXPECT_EQ(spokenRange(-0.5, 2, 1, "s"), "\u22120.5 to 2.0\u00a0s");
}

TEST(Words, PutLabelsIntoSentencesButKeepCapitals) {
    EXPECT_EQ(inSentence("Travel time"), "travel time");
    EXPECT_EQ(inSentence("TTC margin"), "TTC margin");
    EXPECT_EQ(inSentence("A"), "A");
    EXPECT_EQ(inSentence(""), "");
}

} // namespace
