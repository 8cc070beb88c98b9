// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/look/numbers.h"

#include <cmath>
#include <gtest/gtest.h>

using namespace whichway;

TEST(Numbers, AreWrittenWithATrueMinusAndADecimalPoint) {
    EXPECT_EQ(numberText(-0.44, 2).toStdString(), "\u22120.44");
    EXPECT_EQ(numberText(12345.678, 1).toStdString(), "12345.7");
    EXPECT_EQ(numberText(-0.001, 2).toStdString(), "0.00"); // no minus before nothing
    EXPECT_EQ(numberText(std::nan(""), 2).toStdString(), "n/a");
    EXPECT_EQ(numberText(INFINITY, 2).toStdString(), "n/a");
}

TEST(Numbers, KeepThreeDigitsThatCount) {
    EXPECT_EQ(shortNumber(0.4142).toStdString(), "0.414");
    EXPECT_EQ(shortNumber(1.4142).toStdString(), "1.41");
    EXPECT_EQ(shortNumber(14.142).toStdString(), "14.1");
    EXPECT_EQ(shortNumber(141.42).toStdString(), "141");
    EXPECT_EQ(shortNumber(14142).toStdString(), "14142");
}

TEST(Numbers, CarryTheirUnit) {
    EXPECT_EQ(withUnit(3, 1, "s").toStdString(), "3.0\u00a0s");
    EXPECT_EQ(withUnit(1.25, 2, "1").toStdString(), "1.25");
    EXPECT_EQ(unitText("m/s^3").toStdString(), "m/s\u00b3");
    EXPECT_EQ(unitText("m/s2").toStdString(), "m/s\u00b2");
    EXPECT_EQ(unitText("1").toStdString(), "");
}

TEST(Numbers, SayIntervalsAsTwoNumbers) {
    EXPECT_EQ(intervalText(1.9, 5.0, 1, "s").toStdString(), "90 % interval 1.9 to 5.0\u00a0s");
    EXPECT_FALSE(intervalText(1.9, 5.0, 1, "s").contains(QChar(0x00b1)));
}

TEST(Numbers, SaySpansInWholeSeconds) {
    EXPECT_EQ(spanText(42.9).toStdString(), "42 s");
    EXPECT_EQ(spanText(18 * 60 + 2).toStdString(), "18 min 02 s");
    EXPECT_EQ(spanText(3600 + 5 * 60 + 59).toStdString(), "1 h 05 min");
    EXPECT_EQ(countText(1, "pair", "pairs").toStdString(), "1 pair");
    EXPECT_EQ(countText(0, "pair", "pairs").toStdString(), "0 pairs");
}
