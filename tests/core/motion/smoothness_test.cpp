// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/smoothness.h"

#include <cmath>
#include <gtest/gtest.h>
#include <stdexcept>
#include <vector>

using namespace whichway;

namespace {

/// Speed of the minimum-jerk profile x = A (10 s^3 - 15 s^4 + 6 s^5), s = t/T, at every sample of [0, T].
std::vector<double> minimumJerkSpeed(double amplitude, double duration, double rate) {
    std::vector<double> speed;
    const int n = static_cast<int>(std::lround(duration * rate));
    for (int i = 0; i <= n; ++i) {
        const double s = static_cast<double>(i) / n;
        speed.push_back(amplitude / duration * 30 * s * s * (1 - s) * (1 - s));
    }
    return speed;
}

} // namespace

// Published check value: the definition's authors give, for v = exp(-5 t^2) on t = -1 … 0.99 at 100 Hz,
// spectral arc length -1.41403, dimensionless jerk -335.74684 (Balasubramanian et al.; recomputed to 17
// digits in double precision).
TEST(Smoothness, GivesThePublishedValuesOfAGaussianSpeed) {
    std::vector<double> speed;
    for (int i = 0; i < 200; ++i) {
        const double t = -1 + 0.01 * i;
        speed.push_back(std::exp(-5 * t * t));
    }
    EXPECT_NEAR(spectralArcLength(speed, 100), -1.4140312617104789, 1e-10);
    EXPECT_NEAR(dimensionlessJerk(speed, 100), -335.7468370326857, 1e-7);
}

// Closed form: T^3 / v_peak^2 times the integral of the squared jerk is 720 / 1.875^2 = 204.8 for any
// amplitude and duration; finite differences approach it as the rate grows.
TEST(Smoothness, ApproachesTheClosedFormOfMinimumJerk) {
    for (const double duration : {1.0, 2.0, 5.0})
        EXPECT_NEAR(-dimensionlessJerk(minimumJerkSpeed(0.7, duration, 2000), 2000), 204.8, 0.01 * 204.8);
    EXPECT_NEAR(-std::log(-dimensionlessJerk(minimumJerkSpeed(1, 2, 100), 100)), -5.322, 0.05);
}

// Reference: the published parameters (10 Hz, threshold 0.05, padding 4) on minimum jerk: -1.406 for T = 1
// and 2 s.
TEST(Smoothness, SpectralArcLengthOfMinimumJerkDependsOnNeitherRateNorAmplitude) {
    for (const double rate : {50.0, 100.0, 200.0})
        for (const double amplitude : {0.1, 1.0, 30.0}) {
            EXPECT_NEAR(spectralArcLength(minimumJerkSpeed(amplitude, 1, rate), rate), -1.406, 0.01);
            EXPECT_NEAR(spectralArcLength(minimumJerkSpeed(amplitude, 2, rate), rate), -1.406, 0.01);
        }
}

// Reference: two identical sub-movements of 1 s, back to back, at 100 Hz: -2.245.
TEST(Smoothness, TwoSubmovementsAreLessSmoothThanOne) {
    std::vector<double> speed = minimumJerkSpeed(1, 1, 100);
    const std::vector<double> second = speed;
    speed.pop_back();
    speed.insert(speed.end(), second.begin(), second.end());
    EXPECT_NEAR(spectralArcLength(speed, 100), -2.245, 0.02);
}

TEST(Smoothness, RefusesWhatHasNoSmoothness) {
    EXPECT_THROW((void)dimensionlessJerk(std::vector<double>{0, 0, 0}, 100), std::invalid_argument);
    EXPECT_THROW((void)dimensionlessJerk(std::vector<double>{1, 1}, 100), std::invalid_argument);
    EXPECT_THROW((void)spectralArcLength(std::vector<double>{0, 0, 0}, 100), std::invalid_argument);
    EXPECT_THROW((void)spectralArcLength(std::vector<double>{1, 2, 3}, 0), std::invalid_argument);
}
