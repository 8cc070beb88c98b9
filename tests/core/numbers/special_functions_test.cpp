// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/numbers/special_functions.h"

#include <cmath>
#include <gtest/gtest.h>
#include <stdexcept>

using namespace whichway;

TEST(Softplus, EqualsLog1pOfTheExponential) {
    for (double x = -30; x <= 40; x += 0.173)
        ASSERT_NEAR(softplus(x), static_cast<double>(std::log1p(std::exp(static_cast<long double>(x)))),
                    3e-16 * (1 + std::abs(x)));
    EXPECT_NEAR(softplus(800.0), 800.0, 1e-12);
    EXPECT_GE(softplus(-800.0), 0.0);
}

TEST(Logistic, IsSymmetricAndSaturates) {
    for (double x = -20; x <= 20; x += 0.37)
        ASSERT_NEAR(logistic(x) + logistic(-x), 1.0, 2.3e-16);
    EXPECT_EQ(logistic(0.0), 0.5);
    EXPECT_GT(logistic(-750.0), 0.0);
}

// Reference: erfc of the C library in long double.
TEST(NormalCdf, EqualsTheComplementaryErrorFunction) {
    for (double x = -37; x <= 9; x += 0.0137) {
        const double expected =
            static_cast<double>(0.5L * std::erfc(-static_cast<long double>(x) / std::sqrt(2.0L)));
        ASSERT_NEAR(normalCdf(x), expected, 1e-12 * expected) << x;
    }
}

// Published values: Abramowitz and Stegun, table 26.1 and 26.5 (z at 0.975, 0.95, 0.995), to the digits
// printed there.
TEST(NormalQuantile, GivesTheTabulatedValues) {
    EXPECT_NEAR(normalQuantile(0.975), 1.959963984540054, 1e-14);
    EXPECT_NEAR(normalQuantile(0.95), 1.644853626951473, 1e-14);
    EXPECT_NEAR(normalQuantile(0.995), 2.575829303548901, 1e-14);
    EXPECT_EQ(normalQuantile(0.5), 0.0);
}

TEST(NormalQuantile, InvertsTheDistributionFunction) {
    for (double x = -30; x <= 6; x += 0.0731)
        ASSERT_NEAR(normalQuantile(normalCdf(x)), x,
                    1e-12 * (1 + std::abs(x)) + (x > 0 ? 3e-16 / std::exp(-0.5 * x * x) : 0))
            << x;
}

TEST(NormalQuantile, RefusesProbabilitiesOutsideTheOpenInterval) {
    EXPECT_THROW((void)normalQuantile(0.0), std::invalid_argument);
    EXPECT_THROW((void)normalQuantile(1.0), std::invalid_argument);
    EXPECT_THROW((void)normalQuantile(std::nan("")), std::invalid_argument);
}
