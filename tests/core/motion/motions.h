// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/measures.h"
#include "core/motion/trajectory.h"

#include <cmath>
#include <functional>
#include <gtest/gtest.h>
#include <numbers>

namespace whichway::motions {

using Spot = Instant::Position;

/// Samples `at` at 0, 1/rate, … up to `duration`; the heading is that of `at`'s movement.
inline Trajectory sampled(double duration, double rate, const std::function<Spot(double)>& at) {
    Trajectory motion;
    motion.name = "m";
    const auto last = static_cast<int>(std::lround(duration * rate));
    for (int i = 0; i <= last; ++i) {
        const double t = i / rate, h = 1e-6;
        const Spot here = at(t), before = at(t - h), after = at(t + h);
        motion.time.push_back(t);
        motion.x.push_back(here.x);
        motion.y.push_back(here.y);
        double heading = std::atan2(after.y - before.y, after.x - before.x);
        if (!motion.heading.empty())
            heading -=
                2 * std::numbers::pi * std::round((heading - motion.heading.back()) / (2 * std::numbers::pi));
        motion.heading.push_back(heading);
    }
    return motion;
}

/// Adds a person who is at `at` at each of the motion's times.
inline Trajectory withPerson(Trajectory motion, const std::function<Spot(double)>& at) {
    PersonTrack person;
    for (const double t : motion.time) {
        person.x.push_back(at(t).x);
        person.y.push_back(at(t).y);
    }
    motion.people.push_back(std::move(person));
    return motion;
}

inline Trajectory straight(double speed, double duration, double rate) {
    return sampled(duration, rate, [=](double t) { return Spot{speed * t, 0}; });
}

/// The minimum-jerk movement over `amplitude` m, x = A (10 s^3 - 15 s^4 + 6 s^5), s = t / T (Flash and Hogan
/// 1985, J. Neuroscience 5:1688), turned by `direction`.
inline Trajectory minimumJerk(double amplitude, double duration, double rate, double direction = 0) {
    return sampled(duration, rate, [=](double t) {
        const double s = t / duration;
        const double way = amplitude * s * s * s * (10 + s * (-15 + 6 * s));
        return Spot{way * std::cos(direction), way * std::sin(direction)};
    });
}

inline Trajectory circle(double radius, double duration, double rate) {
    return sampled(duration, rate, [=](double t) {
        const double angle = 2 * std::numbers::pi * t / duration;
        return Spot{radius * std::sin(angle), radius * (1 - std::cos(angle))};
    });
}

inline Result<double> measured(const char* phrase, const Trajectory& motion,
                               const MeasureSettings& settings = {}, const Scene* scene = nullptr) {
    const Measure* measure = findMeasure(phrase);
    if (measure == nullptr)
        return Error{.code = "no such measure", .message = phrase};
    return evaluateMeasure(*measure, motion, scene, settings);
}

/// The measured number; the test fails if there is none.
inline double numberOf(const char* phrase, const Trajectory& motion, const MeasureSettings& settings = {},
                       const Scene* scene = nullptr) {
    const Result<double> value = measured(phrase, motion, settings, scene);
    if (!value) {
        ADD_FAILURE() << phrase << ": " << describe(value.error());
        return std::nan("");
    }
    return *value;
}

inline std::string codeOf(const Result<double>& result) {
    return result ? "none" : result.error().code;
}

} // namespace whichway::motions
