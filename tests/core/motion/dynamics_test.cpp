// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/dynamics.h"

#include "core/random.h"

#include <cmath>
#include <gtest/gtest.h>
#include <numbers>

namespace whichway {
namespace {

constexpr BaseLimits kLimits = {.speed = 1.5, .acceleration = 1, .turnRate = 1.2, .turnAcceleration = 3};

TEST(DriveFor, SpeedsUpByTheUniformLaw) {
    BaseState state;
    for (int i = 0; i < 100; ++i)
        state = driveFor(0.01, state, 10, 0, kLimits);
    EXPECT_NEAR(state.speed, 1, 1e-12);
    EXPECT_NEAR(state.x, 0.5, 1e-12); // a t^2 / 2
    for (int i = 0; i < 100; ++i)
        state = driveFor(0.01, state, 10, 0, kLimits);
    EXPECT_EQ(state.speed, kLimits.speed);
    EXPECT_NEAR(state.x, 0.5 + (0.5 + 0.125) + 0.75, 1e-12);
    EXPECT_EQ(state.y, 0);
}

TEST(DriveFor, AtConstantRatesIsExactlyACircleWhateverTheStep) {
    // Radius v / omega about (0, v / omega). By hand.
    for (const double step : {0.001, 0.1, 0.5}) {
        BaseState state = {.speed = 1, .turnRate = 0.8};
        for (double t = 0; t < 3; t += step) {
            state = driveFor(step, state, 1, 0.8, kLimits);
            EXPECT_NEAR(std::hypot(state.x, state.y - 1.25), 1.25, 1e-10);
        }
        EXPECT_NEAR(state.x, 1.25 * std::sin(state.heading), 1e-10);
    }
}

class DriveForAnything : public testing::TestWithParam<int> {};

TEST_P(DriveForAnything, KeepsEveryLimitAndNeverDrivesBackwards) {
    Random random(static_cast<std::uint64_t>(GetParam()));
    BaseState state;
    for (int i = 0; i < 500; ++i) {
        const BaseState next =
            driveFor(0.02, state, 6 * random.uniform() - 3, 8 * random.uniform() - 4, kLimits);
        EXPECT_GE(next.speed, 0);
        EXPECT_LE(next.speed, kLimits.speed);
        EXPECT_LE(std::abs(next.turnRate), kLimits.turnRate);
        EXPECT_LE(std::abs(next.speed - state.speed), 0.02 * kLimits.acceleration + 1e-12);
        EXPECT_LE(std::abs(next.turnRate - state.turnRate), 0.02 * kLimits.turnAcceleration + 1e-12);
        EXPECT_LE(std::abs(next.heading - state.heading), 0.02 * kLimits.turnRate + 1e-12);
        EXPECT_LE(std::hypot(next.x - state.x, next.y - state.y), 0.02 * kLimits.speed + 1e-12);
        state = next;
    }
}

INSTANTIATE_TEST_SUITE_P(Seeds, DriveForAnything, testing::Range(1, 6));

} // namespace
} // namespace whichway
