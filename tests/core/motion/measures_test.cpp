// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/measures.h"

#include <cmath>
#include <functional>
#include <gtest/gtest.h>
#include <numbers>
#include <set>

using namespace whichway;

namespace {

/// A motion along x(t), y(t), with its heading, at `rate` for `duration` s.
Trajectory motionOf(double duration, double rate, const std::function<double(double)>& x,
                    const std::function<double(double)>& y) {
    Trajectory motion{.name = "m"};
    const int n = static_cast<int>(std::lround(duration * rate));
    for (int i = 0; i <= n; ++i) {
        const double t = duration * i / n, h = 1e-5;
        motion.time.push_back(t);
        motion.x.push_back(x(t));
        motion.y.push_back(y(t));
        double heading = std::atan2(y(t + h) - y(t - h), x(t + h) - x(t - h));
        if (!motion.heading.empty())
            heading -=
                2 * std::numbers::pi * std::round((heading - motion.heading.back()) / (2 * std::numbers::pi));
        motion.heading.push_back(heading);
    }
    return motion;
}

void addPerson(Trajectory& motion, const std::function<double(double)>& x,
               const std::function<double(double)>& y) {
    PersonTrack person;
    for (const double t : motion.time) {
        person.x.push_back(x(t));
        person.y.push_back(y(t));
    }
    motion.people.push_back(person);
}

double measured(const std::string& phrase, const Trajectory& motion, const MeasureSettings& settings = {},
                const Scene* scene = nullptr) {
    const Measure* measure = findMeasure(phrase);
    if (!measure) {
        ADD_FAILURE() << "no measure “" << phrase << "”";
        return 0;
    }
    const auto value = evaluateMeasure(*measure, motion, scene, settings);
    EXPECT_TRUE(value.ok()) << (value.ok() ? "" : value.error().message);
    return value.ok() ? *value : std::nan("");
}

std::string errorOf(const std::string& phrase, const Trajectory& motion) {
    const auto value = evaluateMeasure(*findMeasure(phrase), motion, nullptr);
    return value.ok() ? "" : value.error().code;
}

Trajectory minimumJerk(double amplitude, double duration, double rate) {
    return motionOf(
        duration, rate,
        [=](double t) {
            const double s = t / duration;
            return amplitude * s * s * s * (10 - 15 * s + 6 * s * s);
        },
        [](double) { return 0.0; });
}

const auto kZero = [](double) { return 0.0; };

} // namespace

// Closed forms of minimum jerk (derived from the polynomial): peak speed 1.875 A/T, peak acceleration
// 10/sqrt(3) A/T^2, root mean square jerk sqrt(720) A/T^3.
TEST(Measures, GiveTheClosedFormsOfMinimumJerk) {
    for (const double duration : {1.0, 2.0, 5.0})
        for (const double amplitude : {0.5, 3.0}) {
            const Trajectory motion = minimumJerk(amplitude, duration, 200);
            const MeasureSettings fine = {{"window", 0.03 * duration}};
            EXPECT_NEAR(measured("peak speed", motion, fine), 1.875 * amplitude / duration,
                        2e-3 * amplitude / duration);
            EXPECT_NEAR(measured("peak acceleration", motion, fine),
                        10 / std::sqrt(3.0) * amplitude / (duration * duration),
                        0.02 * amplitude / (duration * duration));
            EXPECT_NEAR(measured("roughness", motion, fine),
                        std::sqrt(720.0) * amplitude / (duration * duration * duration),
                        0.02 * std::sqrt(720.0) * amplitude / (duration * duration * duration));
            EXPECT_NEAR(measured("travel time", motion), duration, 1e-12);
            EXPECT_NEAR(measured("path length", motion), amplitude, 1e-9);
            EXPECT_NEAR(measured("mean speed", motion), amplitude / duration, 1e-9);
            EXPECT_NEAR(measured("detour", motion), 1.0, 1e-9);
        }
    // LDLJ by the peak-speed form is -ln(720 / 1.875^2) = -5.3220; at 100 Hz within 0.05 of it.
    EXPECT_NEAR(measured("log dimensionless jerk", minimumJerk(1, 2, 100)), -5.3220, 0.05);
    EXPECT_NEAR(measured("spectral arc length", minimumJerk(1, 2, 100)), -1.406, 0.01);
}

// Closed form: a circle of radius R has curvature 1/R and turns by 2 pi.
TEST(Measures, GiveTheCurvatureAndTurningOfACircle) {
    for (const double radius : {0.5, 2.0}) {
        const Trajectory circle = motionOf(
            4, 100, [=](double t) { return radius * std::cos(0.5 * std::numbers::pi * t); },
            [=](double t) { return radius * std::sin(0.5 * std::numbers::pi * t); });
        EXPECT_NEAR(measured("mean curvature", circle), 1 / radius, 0.01 / radius);
        EXPECT_NEAR(measured("total turning", circle), 2 * std::numbers::pi, 1e-6);
        EXPECT_NEAR(measured("path length", circle), 2 * std::numbers::pi * radius, 1e-3);
        EXPECT_EQ(errorOf("detour", circle), "measure.undefined"); // it ends where it began
    }
}

// Worked example: head-on from 2 m, closing at 1 m/s, radii 0.5 m in all: 1.5 s to collision.
TEST(Measures, TimeToCollisionOfTheHeadOnExample) {
    Trajectory motion = motionOf(
        0.1, 20, [](double t) { return 0.5 * t; }, kZero);
    addPerson(
        motion, [](double t) { return 2 - 0.5 * t; }, kZero);
    EXPECT_NEAR(measured("time to collision", motion, {{"robot_radius", 0.3}, {"person_radius", 0.2}}), 1.45,
                0.06);
    motion.time.resize(2);
    EXPECT_NEAR(measured("time to collision", motion, {{"robot_radius", 0.3}, {"person_radius", 0.2}}), 1.5,
                1e-9);
}

TEST(Measures, ParallelMotionHasNoCollisionAhead) {
    Trajectory motion = motionOf(
        2, 20, [](double t) { return t; }, kZero);
    addPerson(
        motion, [](double t) { return t; }, [](double) { return 1.0; });
    EXPECT_EQ(measured("time to collision", motion, {{"robot_radius", 0.3}, {"person_radius", 0.2}}), 10);
}

TEST(Measures, ClosestDistanceIsThatOfSurfaces) {
    Trajectory motion = motionOf(
        4, 50, [](double t) { return t - 2; }, kZero);
    addPerson(motion, kZero, [](double) { return 1.25; });
    Scene scene{.robotRadius = 0.45, .personRadius = 0.22};
    EXPECT_NEAR(measured("closest distance to a person", motion, {}, &scene), 1.25 - 0.67, 1e-9);
    EXPECT_NEAR(measured("closest distance to a person", motion), 1.25, 1e-9);
    EXPECT_NEAR(
        measured("closest distance to a person", motion, {{"robot_radius", 0.25}, {"person_radius", 0.0}}),
        1.0, 1e-9);
}

// Closed form: straight past a person at distance b, the time closer than r is 2 sqrt(r^2 - b^2) / v.
TEST(Measures, TimeCloseIsTheChordOverTheSpeed) {
    Trajectory motion = motionOf(
        8, 200, [](double t) { return t - 4; }, kZero);
    addPerson(motion, kZero, [](double) { return 0.6; });
    EXPECT_NEAR(measured("time close to people", motion, {{"distance", 1.0}}), 2 * std::sqrt(1 - 0.36),
                0.011);
}

TEST(Measures, AConstantSpeedIsItsOwnSpeedBesidePeople) {
    Trajectory motion = motionOf(
        8, 50, [](double t) { return 0.8 * t; }, kZero);
    addPerson(
        motion, [](double) { return 3.0; }, [](double) { return 0.9; });
    EXPECT_NEAR(measured("speed beside people", motion), 0.8, 1e-9);
}

TEST(Measures, KeepingRightIsSeenAlongTheWay) {
    const Scene scene{.keepRightAxis = 2};
    const Trajectory there = motionOf(
        5, 20, [](double t) { return t; }, [](double) { return 1.6; });
    const Trajectory back = motionOf(
        5, 20, [](double t) { return -t; }, [](double) { return 1.6; });
    EXPECT_NEAR(measured("keeping right", there, {}, &scene), 0.4, 1e-12);
    EXPECT_NEAR(measured("keeping right", back, {}, &scene), -0.4, 1e-12);
}

// Closed form: at rest beside a person at distance d the cost is exp(-d^2 / (2 range^2)).
TEST(Measures, PersonalSpaceCostOfStandingBesideSomeone) {
    Trajectory motion = motionOf(3, 20, kZero, kZero);
    addPerson(
        motion, [](double) { return 0.9; }, kZero);
    EXPECT_NEAR(measured("personal space cost", motion, {{"range", 0.6}}), std::exp(-0.5 * 1.5 * 1.5), 1e-12);
}

// A constant velocity has no jerk: its logarithm is not defined, and is never made up.
TEST(Measures, SayWhatIsUndefined) {
    const Trajectory straight = motionOf(
        2, 50, [](double t) { return t; }, kZero);
    EXPECT_EQ(errorOf("log dimensionless jerk", straight), "measure.undefined");
    EXPECT_NEAR(measured("roughness", straight), 0, 1e-6);
    EXPECT_EQ(errorOf("closest distance to a person", straight), "measure.undefined");
    EXPECT_EQ(errorOf("time to collision", straight), "measure.undefined");
    EXPECT_EQ(errorOf("spectral arc length", motionOf(2, 50, kZero, kZero)), "measure.undefined");
}

TEST(Measures, HaveNamesOfTheirOwnAndRefuseUnknownSettings) {
    std::set<std::string> phrases;
    for (const Measure& measure : measures())
        EXPECT_TRUE(phrases.insert(measure.phrase).second);
    EXPECT_EQ(findMeasure("travel tim"), nullptr);
    EXPECT_THROW(
        (void)evaluateMeasure(*findMeasure("travel time"), minimumJerk(1, 1, 50), nullptr, {{"radius", 1}}),
        std::invalid_argument);
}
