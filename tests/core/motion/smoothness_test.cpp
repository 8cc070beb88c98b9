// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/smoothness.h"

#include <cmath>
#include <fstream>
#include <gtest/gtest.h>
#include <nlohmann/json.hpp>
#include <numbers>
#include <stdexcept>
#include <vector>

namespace whichway {
namespace {

/// tests/reference/smoothness.json: evaluations, outside this program, of the definitions of Balasubramanian
/// et al. 2015, and the values that the authors published for a Gaussian profile.
nlohmann::json reference() {
    std::ifstream file(std::string(WHICHWAY_SOURCE_DIR) + "/tests/reference/smoothness.json");
    return nlohmann::json::parse(file);
}

/// Speed of the minimum-jerk movement at t = 0, 1/rate, …, T.
std::vector<double> minimumJerkSpeed(double amplitude, double duration, double rate) {
    std::vector<double> speed;
    for (int i = 0; i <= std::lround(duration * rate); ++i) {
        const double s = i / rate / duration;
        speed.push_back(amplitude / duration * 30 * s * s * (1 - s) * (1 - s));
    }
    return speed;
}

TEST(Smoothness, EqualsTheReferenceForMinimumJerkProfiles) {
    const nlohmann::json cases = reference()["cases"];
    ASSERT_EQ(cases.size(), 4u);
    for (const auto& each : cases) {
        const auto speed = minimumJerkSpeed(each["A"], each["T"], each["fs"]);
        ASSERT_EQ(speed.size(), each["samples"].get<std::size_t>());
        const double jerk = each["dlj_discrete"];
        EXPECT_NEAR(dimensionlessJerk(speed, each["fs"]), jerk, 1e-9 * std::abs(jerk));
        EXPECT_NEAR(spectralArcLength(speed, each["fs"]), each["sparc_default"].get<double>(), 1e-9);
        EXPECT_NEAR(spectralArcLength(speed, each["fs"], 10, 0.05, 10), each["sparc_pad10"].get<double>(),
                    1e-9);
    }
}

TEST(Smoothness, EqualsThePublishedValuesOfAGaussianProfile) {
    const nlohmann::json published = reference()["published_gaussian"];
    std::vector<double> speed;
    for (int i = 0; i < 200; ++i)
        speed.push_back(std::exp(-5 * (-1 + 0.01 * i) * (-1 + 0.01 * i)));
    // The authors print -1.41403, -335.74684 and -5.81636.
    EXPECT_NEAR(spectralArcLength(speed, 100), -1.41403, 5e-6);
    EXPECT_NEAR(dimensionlessJerk(speed, 100), -335.74684, 5e-6);
    EXPECT_NEAR(-std::log(-dimensionlessJerk(speed, 100)), -5.81636, 5e-6);
    EXPECT_NEAR(spectralArcLength(speed, 100), published["sparc"].get<double>(), 1e-9);
    EXPECT_NEAR(dimensionlessJerk(speed, 100), published["dlj"].get<double>(), 1e-7);
}

TEST(Smoothness, OfMinimumJerkTendsToItsClosedForm) {
    // (T^3 / v_peak^2) integral of jerk^2 = 720 / 1.875^2: from the polynomial, by hand.
    EXPECT_NEAR(dimensionlessJerk(minimumJerkSpeed(1, 1, 20000), 20000), -720 / (1.875 * 1.875), 0.05);
    EXPECT_NEAR(-std::log(-dimensionlessJerk(minimumJerkSpeed(0.4, 2, 20000), 20000)), -5.3220, 1e-3);
}

TEST(SpectralArcLength, OfMinimumJerkIsTheKnownValueAtAnyRateCutoffAndAmplitude) {
    for (const double rate : {50., 100., 200.})
        for (const double cutoff : {10., 20.})
            for (const double amplitude : {0.01, 1., 250.}) {
                SCOPED_TRACE(testing::Message()
                             << rate << " Hz, cutoff " << cutoff << " Hz, " << amplitude << " m");
                // evaluated outside this program, Balasubramanian et al. 2015
                EXPECT_NEAR(spectralArcLength(minimumJerkSpeed(amplitude, 1, rate), rate, cutoff), -1.406,
                            2e-3);
                EXPECT_NEAR(spectralArcLength(minimumJerkSpeed(amplitude, 2, rate), rate, cutoff), -1.406,
                            2e-3);
                EXPECT_NEAR(spectralArcLength(minimumJerkSpeed(amplitude, 5, rate), rate, cutoff), -1.402,
                            4e-3);
            }
}

TEST(SpectralArcLength, DoesNotDependOnTheAmplitude) {
    EXPECT_NEAR(spectralArcLength(minimumJerkSpeed(1, 1, 100), 100),
                spectralArcLength(minimumJerkSpeed(37, 1, 100), 100), 1e-12);
}

TEST(SpectralArcLength, OfTwoMovementsInARowIsTheKnownValueAndWorseThanOfOne) {
    std::vector<double> speed = minimumJerkSpeed(1, 1, 100);
    const double one = spectralArcLength(speed, 100);
    const std::vector<double> again = speed;
    speed.insert(speed.end(), again.begin() + 1, again.end());
    EXPECT_NEAR(spectralArcLength(speed, 100), -2.245, 5e-3); // evaluated outside this program
    EXPECT_LT(spectralArcLength(speed, 100), one);
}

TEST(DimensionlessJerk, OfAConstantSpeedIsZero) {
    EXPECT_EQ(dimensionlessJerk(std::vector<double>(50, 1.5), 20), 0);
}

TEST(Smoothness, RefusesWhatHasNone) {
    const std::vector<double> still(50, 0.0), two = {1, 2}, one = {1}, three = {1, 2, 1};
    EXPECT_THROW((void)dimensionlessJerk(still, 20), std::invalid_argument);
    EXPECT_THROW((void)dimensionlessJerk(two, 20), std::invalid_argument);
    EXPECT_THROW((void)dimensionlessJerk(three, 0), std::invalid_argument);
    EXPECT_THROW((void)spectralArcLength(still, 20), std::invalid_argument);
    EXPECT_THROW((void)spectralArcLength(one, 20), std::invalid_argument);
    EXPECT_THROW((void)spectralArcLength(three, -1), std::invalid_argument);
}

} // namespace
} // namespace whichway
