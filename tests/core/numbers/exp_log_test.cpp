// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/numbers/exp_log.h"

#include <cmath>
#include <gtest/gtest.h>

using namespace whichway;

// Reference: the C library in long double (80 bits), an independent implementation.
TEST(ExactExp, EqualsTheLongDoubleExponentialTo4e16) {
    for (int i = -700000; i <= 700000; i += 37) {
        const double x = i * 1e-3 + 1.7e-5;
        const long double expected = std::exp(static_cast<long double>(x));
        ASSERT_NEAR(static_cast<double>(exactExp(x) / expected - 1.0L), 0.0, 4e-16) << x;
    }
}

TEST(ExactExp, IsExactAtZeroAndSaturatesWithoutOverflow) {
    EXPECT_EQ(exactExp(0.0), 1.0);
    EXPECT_GT(exactExp(-1e9), 0.0);
    EXPECT_TRUE(std::isfinite(exactExp(1e9)));
}

TEST(ExactLog, EqualsTheLongDoubleLogarithm) {
    for (double x = 1e-300; x < 1e300; x *= 1.0371) {
        const long double expected = std::log(static_cast<long double>(x));
        ASSERT_NEAR(exactLog(x), static_cast<double>(expected),
                    3e-16 * std::abs(static_cast<double>(expected)))
            << x;
    }
    for (double x = 0.5; x < 2.0; x += 1.3e-4) {
        const long double expected = std::log(static_cast<long double>(x));
        ASSERT_NEAR(exactLog(x), static_cast<double>(expected),
                    3.4e-16 * std::abs(static_cast<double>(expected)) + 1e-18)
            << x;
    }
    EXPECT_EQ(exactLog(1.0), 0.0);
}
