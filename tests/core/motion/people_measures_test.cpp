// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/core/motion/motions.h"

namespace whichway {
namespace {

using namespace motions;
using std::numbers::pi;

/// Along x at `speed` from -10 to 10 m, past somebody who stands at (0, beside).
Trajectory past(double beside, double speed = 2, double rate = 1000) {
    const double duration = 20 / speed;
    return withPerson(sampled(duration, rate,
                              [=](double t) {
                                  return Spot{-10 + speed * t, 0};
                              }),
                      [=](double) {
                          return Spot{0, beside};
                      });
}

TEST(ClosestDistance, IsFromSurfaceToSurface) {
    Scene scene;
    scene.robotRadius = 0.3;
    scene.personRadius = 0.25;
    const char* phrase = "closest distance to a person";
    EXPECT_NEAR(numberOf(phrase, past(1), {}, &scene), 0.45, 1e-9);
    EXPECT_NEAR(numberOf(phrase, past(1)), 1, 1e-9); // no scene, no radii
    EXPECT_NEAR(numberOf(phrase, past(1), {{"robot_radius", 0.5}}, &scene), 0.25, 1e-9);
    EXPECT_NEAR(numberOf(phrase, past(1), {{"robot_radius", 0}, {"person_radius", 0}}, &scene), 1, 1e-9);
    EXPECT_NEAR(numberOf(phrase, past(0.25), {}, &scene), -0.3, 1e-9) << "overlap is negative";
}

TEST(ClosestDistance, IsToWhoeverIsNearest) {
    const Trajectory two = withPerson(past(2), [](double) { return Spot{3, -0.7}; });
    EXPECT_NEAR(numberOf("closest distance to a person", two), 0.7, 1e-9);
}

TEST(TimeToCollision, OfAHeadOnMeetingIsTheGapOverTheClosingSpeed) {
    // 2 m apart, closing at 1 m/s, radii together 0.5 m: (2 - 0.5) / 1. By hand.
    Trajectory motion = withPerson(straight(0.6, 0.5, 2), [](double t) { return Spot{2 - 0.4 * t, 0}; });
    EXPECT_NEAR(numberOf("time to collision", motion, {{"robot_radius", 0.3}, {"person_radius", 0.2}}), 1.5,
                1e-12);
}

TEST(TimeToCollision, OfAnObliqueMeetingIsWhenTheDiscsTouch) {
    // Person 3 m ahead and 0.3 m aside, standing; radii 0.5 m: touches at x with (3 - x)^2 + 0.09 = 0.25, so
    // at x = 2.6 m; at 1.3 m/s after 2 s. By hand.
    const Trajectory motion = withPerson(straight(1.3, 0.1, 10), [](double) { return Spot{3, 0.3}; });
    EXPECT_NEAR(numberOf("time to collision", motion, {{"robot_radius", 0.5}}), 2, 1e-12);
}

TEST(TimeToCollision, IsTheCapWhereNoneIsInSight) {
    const auto beside = withPerson(straight(1, 5, 20), [](double t) { return Spot{t, 1}; });
    const auto away = withPerson(straight(1, 5, 20), [](double) { return Spot{-2, 0}; });
    const auto wide = withPerson(straight(1, 2, 20), [](double) { return Spot{4, 0.51}; });
    for (const Trajectory& motion : {beside, away, wide}) {
        EXPECT_EQ(numberOf("time to collision", motion, {{"robot_radius", 0.5}}), 10);
        EXPECT_EQ(numberOf("time to collision", motion, {{"robot_radius", 0.5}, {"cap", 4}}), 4);
    }
}

TEST(TimeToCollision, OfATouchIsZero) {
    const auto touching = withPerson(straight(1, 1, 20), [](double t) { return Spot{t, 0.4}; });
    EXPECT_EQ(numberOf("time to collision", touching, {{"robot_radius", 0.5}}), 0);
}

TEST(TimeClose, IsTheChordOverTheSpeed) {
    // Within d of a point b aside a straight way: 2 sqrt(d^2 - b^2) / v. By hand: 2 * 1.2 / 2.
    EXPECT_NEAR(numberOf("time close to people", past(0.5), {{"distance", 1.3}}), 1.2, 3e-3);
    EXPECT_EQ(numberOf("time close to people", past(0.5), {{"distance", 0.4}}), 0);
}

TEST(PersonalSpaceCost, OfAStraightPassIsAGaussianIntegral) {
    // Integral of exp(-(b^2 + v^2 t^2) / (2 s^2)) over all t = exp(-b^2 / (2 s^2)) s sqrt(2 pi) / v.
    for (const double range : {0.5, 1.0}) {
        const double expected = std::exp(-0.32 / (range * range)) * range * std::sqrt(2 * pi) / 2 / 10;
        EXPECT_NEAR(numberOf("personal space cost", past(0.8), {{"range", range}}), expected, 1e-9);
    }
}

TEST(PersonalSpaceCost, OfStandingBesideSomebodyIsTheValueThere) {
    const Trajectory motion = withPerson(straight(0, 3, 20), [](double) { return Spot{0.9, 0}; });
    EXPECT_NEAR(numberOf("personal space cost", motion, {{"range", 0.6}}), std::exp(-0.5 * 1.5 * 1.5), 1e-12);
}

TEST(SpeedBesidePeople, OfAConstantSpeedIsThatSpeed) {
    EXPECT_NEAR(numberOf("speed beside people", past(0.5, 1.7, 50)), 1.7, 1e-9);
}

TEST(SpeedBesidePeople, WeighsBySpaceBetween) {
    // Checked against a sum over the known speed, on a finer grid than the motion's.
    const double range = 0.8, beside = 0.9;
    const auto x = [](double t) { return -5 + t + 0.3 * std::sin(t); };
    const Trajectory motion = withPerson(sampled(10, 100,
                                                 [&](double t) {
                                                     return Spot{x(t), 0};
                                                 }),
                                         [=](double) {
                                             return Spot{0, beside};
                                         });
    double weighted = 0, weights = 0;
    for (int i = 0; i <= 100000; ++i) {
        const double t = i * 1e-4, d = std::hypot(x(t), beside);
        const double weight = std::exp(-0.5 * d * d / (range * range));
        weighted += weight * (1 + 0.3 * std::cos(t));
        weights += weight;
    }
    EXPECT_NEAR(numberOf("speed beside people", motion, {{"range", range}}), weighted / weights, 1e-4);
}

TEST(SpeedBesidePeople, OfAWayThatNobodyIsNearIsUndefined) {
    EXPECT_EQ(codeOf(measured("speed beside people", past(50), {{"range", 0.8}})), "measure.undefined");
}

TEST(MeasuresOfPeople, AreUndefinedWithoutPeople) {
    int needing = 0;
    for (const Measure& measure : measures()) {
        const Result<double> value = evaluateMeasure(measure, minimumJerk(2, 4, 20), nullptr);
        EXPECT_EQ(codeOf(value), measure.needsPeople ? "measure.undefined" : "none") << measure.phrase;
        needing += measure.needsPeople ? 1 : 0;
    }
    EXPECT_GE(needing, 5);
}

} // namespace
} // namespace whichway
