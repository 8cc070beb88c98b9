// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/random.h"
#include "tests/core/motion/motions.h"

#include <set>
#include <stdexcept>

namespace whichway {
namespace {

using namespace motions;
using std::numbers::pi;

TEST(Measures, HaveEachItsOwnPhraseAUnitAndAMeaning) {
    std::set<std::string> phrases;
    for (const Measure& measure : measures()) {
        EXPECT_TRUE(phrases.insert(measure.phrase).second) << measure.phrase;
        EXPECT_FALSE(measure.unit.empty()) << measure.phrase;
        EXPECT_FALSE(measure.meaning.empty()) << measure.phrase;
        EXPECT_EQ(findMeasure(measure.phrase), &measure);
    }
    EXPECT_EQ(findMeasure("travel  time"), nullptr);
}

TEST(Measures, OfMinimumJerkAreItsClosedForms) {
    // Of x = A (10 s^3 - 15 s^4 + 6 s^5), by differentiation: peak speed 15/8 A/T, peak acceleration
    // 10/sqrt(3) A/T^2, root mean square of the jerk sqrt(720) A/T^3.
    for (const double amplitude : {0.3, 4.0})
        for (const double duration : {1.0, 3.0})
            for (const double direction : {0.0, 0.7, -2.5}) {
                SCOPED_TRACE(testing::Message()
                             << amplitude << " m in " << duration << " s at " << direction);
                const Trajectory motion = minimumJerk(amplitude, duration, 1000 / duration, direction);
                const double fine = 0.02 * duration, a = amplitude, t = duration;
                EXPECT_NEAR(numberOf("travel time", motion), t, 1e-12);
                EXPECT_NEAR(numberOf("mean speed", motion), a / t, 1e-9);
                EXPECT_NEAR(numberOf("peak speed", motion, {{"window", fine}}) / (1.875 * a / t), 1, 1e-3);
                EXPECT_NEAR(numberOf("peak acceleration", motion, {{"window", fine}}) / (5.7735 * a / t / t),
                            1, 1e-3);
                EXPECT_NEAR(numberOf("roughness", motion, {{"window", fine}}) /
                                (std::sqrt(720) * a / t / t / t),
                            1, 5e-3);
                EXPECT_NEAR(numberOf("log dimensionless jerk", motion), -5.3220, 0.01);
                EXPECT_NEAR(numberOf("detour", motion), 1, 1e-12);
            }
}

TEST(Measures, OfMinimumJerkAtARecordersRateAreNearItsClosedForms) {
    const Trajectory motion = minimumJerk(1, 2, 100);
    EXPECT_NEAR(numberOf("log dimensionless jerk", motion), -5.3220, 0.04);
    EXPECT_NEAR(numberOf("spectral arc length", motion), -1.406,
                3e-3); // evaluated outside this program, Balasubramanian et al. 2015
    EXPECT_NEAR(numberOf("peak speed", motion), 0.9375, 0.01);
    EXPECT_NEAR(numberOf("roughness", motion, {{"window", 0.1}}) / (std::sqrt(720) / 8), 1, 0.05);
}

TEST(Measures, OfAConstantVelocityHaveNoJerkNoDetourAndNoLogarithmOfIt) {
    const Trajectory motion = straight(1.25, 4, 20);
    EXPECT_NEAR(numberOf("roughness", motion), 0, 1e-9);
    EXPECT_NEAR(numberOf("peak acceleration", motion), 0, 1e-10);
    EXPECT_NEAR(numberOf("peak speed", motion), 1.25, 1e-12);
    EXPECT_NEAR(numberOf("detour", motion), 1, 1e-12);
    EXPECT_NEAR(numberOf("total turning", motion), 0, 1e-12);
    EXPECT_NEAR(numberOf("peak curvature", motion), 0, 1e-9);
    EXPECT_EQ(codeOf(measured("log dimensionless jerk", motion)), "measure.undefined");
}

TEST(Measures, OfACircleAreItsCurvatureAndTurning) {
    for (const double radius : {0.5, 2.0}) {
        const Trajectory motion = circle(radius, 6, 200);
        EXPECT_NEAR(numberOf("mean curvature", motion), 1 / radius, 1e-4 / radius);
        EXPECT_NEAR(numberOf("peak curvature", motion), 1 / radius, 1e-2 / radius);
        EXPECT_NEAR(numberOf("total turning", motion), 2 * pi, 1e-6);
        EXPECT_NEAR(numberOf("path length", motion), 2 * pi * radius, 1e-4 * radius);
        EXPECT_NEAR(numberOf("peak acceleration", motion), radius * (pi / 3) * (pi / 3), 1e-2 * radius);
        EXPECT_EQ(codeOf(measured("detour", motion)), "measure.undefined");
    }
}

TEST(Measures, OfASpiralHaveThePeakCurvatureWhereItIsTightest) {
    // An ellipse with half axes a and b is tightest at the ends of the long one: a / b^2.
    const Trajectory motion = sampled(8, 200, [](double t) {
        return Spot{3 * std::cos(pi / 4 * t), 1.5 * std::sin(pi / 4 * t)};
    });
    EXPECT_NEAR(numberOf("peak curvature", motion, {{"window", 0.1}}), 3 / (1.5 * 1.5), 5e-3);
}

TEST(Detour, OfAHalfCircleIsHalfOfPi) {
    const Trajectory motion = sampled(5, 200, [](double t) {
        return Spot{1 - std::cos(pi * t / 5), std::sin(pi * t / 5)};
    });
    EXPECT_NEAR(numberOf("detour", motion), pi / 2, 1e-4);
}

TEST(KeepingRight, IsSeenAlongTheWay) {
    Scene scene;
    scene.keepRightAxis = 4;
    const auto along = [](double direction, double y) {
        return sampled(5, 20, [=](double t) { return Spot{direction * t, y}; });
    };
    EXPECT_NEAR(numberOf("keeping right", along(1, 3.7), {}, &scene), 0.3, 1e-12);
    EXPECT_NEAR(numberOf("keeping right", along(1, 4.2), {}, &scene), -0.2, 1e-12);
    EXPECT_NEAR(numberOf("keeping right", along(-1, 4.2), {}, &scene), 0.2, 1e-12);
    EXPECT_NEAR(numberOf("keeping right", along(1, 0.5), {{"axis", 2}}), 1.5, 1e-12);
}

TEST(KeepingRight, WeighsByTimeNotBySamples) {
    Trajectory motion = straight(1, 10, 1);
    motion.time = {0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 10};
    motion.y = {-1, -1, -1, -1, -1, -1, -1, -1, -1, 0, 0};
    EXPECT_NEAR(numberOf("keeping right", motion), 0.085, 1e-12); // trapezoids: (0.8 + 0.05) / 10
}

TEST(Measures, OfAMotionThatStandsStillAreUndefinedWhereTheyDivideByItsSpeed) {
    const Trajectory still = straight(0, 3, 20);
    for (const char* phrase :
         {"log dimensionless jerk", "spectral arc length", "detour", "mean curvature", "peak curvature"}) {
        const Result<double> value = measured(phrase, still);
        EXPECT_EQ(codeOf(value), "measure.undefined") << phrase;
        EXPECT_FALSE(value ? true : value.error().message.empty()) << phrase;
    }
    EXPECT_EQ(numberOf("mean speed", still), 0);
    EXPECT_EQ(numberOf("roughness", still), 0);
}

TEST(Measures, OfTheFewestSamplesAreFiniteOrUndefined) {
    for (const int samples : {2, 3, 4}) {
        const Trajectory motion = withPerson(straight(1, samples - 1, 1), [](double) {
            return Spot{0.5, 1};
        });
        for (const Measure& measure : measures())
            if (const Result<double> value = evaluateMeasure(measure, motion, nullptr))
                EXPECT_TRUE(std::isfinite(*value)) << measure.phrase << " of " << samples;
            else
                EXPECT_EQ(value.error().code, "measure.undefined") << measure.phrase;
    }
}

TEST(Measures, RefuseAMotionThatNoEvenStepCanFollow) {
    Trajectory motion = straight(1, 10, 1);
    for (std::size_t i = 0; i < motion.time.size(); ++i)
        motion.time[i] = 1e-6 * static_cast<double>(i);
    motion.time.back() = 1e9;
    EXPECT_EQ(codeOf(measured("spectral arc length", motion)), "measure.undefined");
    EXPECT_EQ(codeOf(measured("log dimensionless jerk", motion)), "measure.undefined");
}

TEST(Measures, RefuseSettingsThatTheyDoNotKnowOrCannotUse) {
    const Trajectory motion = straight(1, 3, 20);
    EXPECT_THROW((void)measured("roughness", motion, {{"windw", 0.3}}), std::invalid_argument);
    EXPECT_THROW((void)measured("roughness", motion, {{"window", 0}}), std::invalid_argument);
    EXPECT_THROW((void)measured("roughness", motion, {{"window", -1}}), std::invalid_argument);
    EXPECT_THROW((void)measured("spectral arc length", motion, {{"threshold", 1}}), std::invalid_argument);
    EXPECT_THROW((void)measured("keeping right", motion, {{"axis", std::nan("")}}), std::invalid_argument);
    EXPECT_THROW((void)measured("travel time", straight(1, 0, 1)), std::invalid_argument);
    for (const Measure& measure : measures())
        for (const auto& [name, value] : measure.settings)
            EXPECT_EQ(faultOfSetting(name, value), std::nullopt) << measure.phrase << ": " << name;
}

// Moving the whole scene changes nothing (but the side of the corridor), and a film run twice as fast
// changes each measure by the power of its unit.
class MeasuresOfAnyMotion : public testing::TestWithParam<int> {
protected:
    MeasuresOfAnyMotion() {
        Random random(static_cast<std::uint64_t>(GetParam()));
        const double a = random.uniform(), b = random.uniform(), c = random.uniform();
        const auto at = [=](double t) {
            return Spot{(0.5 + a) * t + 0.1 * std::sin((1 + b) * t), b * std::sin((0.5 + c) * t)};
        };
        motion_ = withPerson(sampled(6, 50, at), [=](double t) { return Spot{5 - a * t, 1.5 + c}; });
    }
    Trajectory motion_;
};

TEST_P(MeasuresOfAnyMotion, DoNotChangeWhenEverythingIsMovedAndTurned) {
    Trajectory moved = motion_;
    const double angle = 0.3 * GetParam();
    const auto move = [&](double& x, double& y) {
        const double turnedX = std::cos(angle) * x - std::sin(angle) * y + 7;
        y = std::sin(angle) * x + std::cos(angle) * y - 3;
        x = turnedX;
    };
    for (std::size_t i = 0; i < moved.time.size(); ++i) {
        move(moved.x[i], moved.y[i]);
        move(moved.people[0].x[i], moved.people[0].y[i]);
        moved.heading[i] += angle;
    }
    for (const Measure& measure : measures()) {
        if (measure.phrase == "keeping right")
            continue;
        const double before = numberOf(measure.phrase.c_str(), motion_);
        EXPECT_NEAR(numberOf(measure.phrase.c_str(), moved), before, 1e-6 * (1 + std::abs(before)))
            << measure.phrase;
    }
}

TEST_P(MeasuresOfAnyMotion, ScaleWithTheFilmsSpeedByTheirUnits) {
    Trajectory fast = motion_;
    for (double& t : fast.time)
        t /= 2;
    const auto ratio = [&](const char* phrase, MeasureSettings settings = {}) {
        const double slow = numberOf(phrase, motion_, settings);
        if (settings.contains("window"))
            settings["window"] /= 2;
        return numberOf(phrase, fast, settings) / slow;
    };
    EXPECT_NEAR(ratio("travel time"), 0.5, 1e-12);
    EXPECT_NEAR(ratio("mean speed"), 2, 1e-12);
    EXPECT_NEAR(ratio("peak speed", {{"window", 0.2}}), 2, 1e-9);
    EXPECT_NEAR(ratio("speed beside people", {{"window", 0.2}, {"range", 2}}), 2, 1e-9);
    EXPECT_NEAR(ratio("peak acceleration", {{"window", 0.2}}), 4, 1e-8);
    EXPECT_NEAR(ratio("roughness", {{"window", 0.2}}), 8, 1e-6);
    EXPECT_NEAR(ratio("log dimensionless jerk"), 1, 1e-9);
    EXPECT_NEAR(ratio("closest distance to a person"), 1, 1e-12);
    EXPECT_NEAR(ratio("personal space cost"), 1, 1e-12);
    EXPECT_NEAR(ratio("peak curvature", {{"window", 0.2}}), 1, 1e-8);
}

INSTANTIATE_TEST_SUITE_P(Seeds, MeasuresOfAnyMotion, testing::Range(1, 11));

} // namespace
} // namespace whichway
