// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/measures.h"

#include "core/motion/derivatives.h"
#include "core/motion/smoothness.h"
#include "core/numbers/exp_log.h"

#include <algorithm>
#include <cmath>
#include <optional>
#include <stdexcept>

namespace whichway {
namespace {

// IEEE 754 fixes the bits of the square root but not of hypot, so lengths are written out: the same motion
// gives the same feature on every machine.
double lengthOf(double x, double y) {
    return std::sqrt(x * x + y * y);
}

Error undefined(const std::string& why) {
    return {.code = "measure.undefined", .place = {}, .message = why, .remedy = "", .values = {why}};
}

double radiusOf(const MeasureSettings& chosen, const char* key, double ofScene) {
    const double chosenRadius = chosen.at(key);
    return chosenRadius >= 0 ? chosenRadius : ofScene;
}

double reach(const Scene* scene, const MeasureSettings& chosen) {
    return radiusOf(chosen, "robot_radius", scene ? scene->robotRadius : 0) +
           radiusOf(chosen, "person_radius", scene ? scene->personRadius : 0);
}

/// Distance of surfaces to the nearest person at sample i, m.
double clearanceAt(const Trajectory& motion, std::size_t i, double radii) {
    double least = 1e300;
    for (const PersonTrack& person : motion.people)
        least = std::min(least, lengthOf(motion.x[i] - person.x[i], motion.y[i] - person.y[i]) - radii);
    return least;
}

/// The share of the whole time that belongs to sample i (trapezoid rule), s.
double timeShare(const Trajectory& motion, std::size_t i) {
    const double before = i > 0 ? motion.time[i] - motion.time[i - 1] : 0;
    const double after = i + 1 < motion.time.size() ? motion.time[i + 1] - motion.time[i] : 0;
    return 0.5 * (before + after);
}

std::optional<Error> peopleMissing(const Trajectory& motion) {
    if (motion.people.empty())
        return undefined("There are no people around this motion.");
    return std::nullopt;
}

double pathLength(const Trajectory& motion) {
    double length = 0;
    for (std::size_t i = 1; i < motion.time.size(); ++i)
        length += lengthOf(motion.x[i] - motion.x[i - 1], motion.y[i] - motion.y[i - 1]);
    return length;
}

Result<double> travelTime(const Trajectory& motion, const Scene*, const MeasureSettings&) {
    return motion.duration();
}

Result<double> closestDistance(const Trajectory& motion, const Scene* scene, const MeasureSettings& chosen) {
    if (auto error = peopleMissing(motion))
        return *error;
    double least = 1e300;
    for (std::size_t i = 0; i < motion.time.size(); ++i)
        least = std::min(least, clearanceAt(motion, i, reach(scene, chosen)));
    return least;
}

Result<double> meanSpeed(const Trajectory& motion, const Scene*, const MeasureSettings&) {
    return pathLength(motion) / motion.duration();
}

Result<double> peakSpeed(const Trajectory& motion, const Scene*, const MeasureSettings& chosen) {
    return peakOf(derivativesOf(motion, chosen.at("window")).speed);
}

Result<double> peakAcceleration(const Trajectory& motion, const Scene*, const MeasureSettings& chosen) {
    return peakOf(derivativesOf(motion, chosen.at("window")).acceleration);
}

Result<double> speedBesidePeople(const Trajectory& motion, const Scene* scene,
                                 const MeasureSettings& chosen) {
    if (auto error = peopleMissing(motion))
        return *error;
    const double range = chosen.at("range"), radii = reach(scene, chosen);
    const std::vector<double> speed = derivativesOf(motion, chosen.at("window")).speed;
    double weighted = 0, weights = 0;
    for (std::size_t i = 0; i < motion.time.size(); ++i) {
        const double d = std::max(0.0, clearanceAt(motion, i, radii));
        const double weight = exactExp(-0.5 * d * d / (range * range)) * timeShare(motion, i);
        weighted += weight * speed[i];
        weights += weight;
    }
    if (!(weights > 1e-12))
        return undefined("No person comes near this motion.");
    return weighted / weights;
}

Result<double> timeClose(const Trajectory& motion, const Scene* scene, const MeasureSettings& chosen) {
    if (auto error = peopleMissing(motion))
        return *error;
    double time = 0;
    for (std::size_t i = 0; i < motion.time.size(); ++i)
        if (clearanceAt(motion, i, reach(scene, chosen)) < chosen.at("distance"))
            time += timeShare(motion, i);
    return time;
}

Result<double> personalSpaceCost(const Trajectory& motion, const Scene*, const MeasureSettings& chosen) {
    if (auto error = peopleMissing(motion))
        return *error;
    const double range = chosen.at("range");
    double cost = 0;
    for (std::size_t i = 0; i < motion.time.size(); ++i) {
        const double d = clearanceAt(motion, i, 0);
        cost += exactExp(-0.5 * d * d / (range * range)) * timeShare(motion, i);
    }
    return cost / motion.duration();
}

Result<double> timeToCollision(const Trajectory& motion, const Scene* scene, const MeasureSettings& chosen) {
    if (auto error = peopleMissing(motion))
        return *error;
    const double radius = reach(scene, chosen);
    double least = chosen.at("cap");
    for (std::size_t i = 0; i + 1 < motion.time.size(); ++i) {
        const double dt = motion.time[i + 1] - motion.time[i];
        for (const PersonTrack& person : motion.people) {
            const double x = person.x[i] - motion.x[i], y = person.y[i] - motion.y[i];
            const double u = (person.x[i + 1] - motion.x[i + 1] - x) / dt;
            const double v = (person.y[i + 1] - motion.y[i + 1] - y) / dt;
            const double approach = x * u + y * v, speed2 = u * u + v * v;
            const double gap2 = x * x + y * y - radius * radius;
            if (gap2 <= 0)
                return 0.0;
            const double root2 = approach * approach - speed2 * gap2;
            if (approach < 0 && root2 >= 0 && speed2 > 0)
                least = std::min(least, (-approach - std::sqrt(root2)) / speed2);
        }
    }
    return least;
}

Result<double> roughness(const Trajectory& motion, const Scene*, const MeasureSettings& chosen) {
    const std::vector<double> jerk = derivativesOf(motion, chosen.at("window")).jerk;
    double sum = 0;
    for (std::size_t i = 0; i < jerk.size(); ++i)
        sum += jerk[i] * jerk[i] * timeShare(motion, i);
    return std::sqrt(sum / motion.duration());
}

Result<double> logDimensionlessJerk(const Trajectory& motion, const Scene*, const MeasureSettings&) {
    const EvenSpeed even = evenSpeedOf(motion);
    if (even.speed.size() < 3 || !(peakOf(even.speed) > 0))
        return undefined("The motion stands still, is too short, or is sampled too unevenly.");
    const double jerk = -dimensionlessJerk(even.speed, even.rate);
    if (!(jerk > 1e-9))
        return undefined("The speed is constant, so the logarithm of its jerk is not defined.");
    return -exactLog(jerk);
}

Result<double> spectralArc(const Trajectory& motion, const Scene*, const MeasureSettings& chosen) {
    const EvenSpeed even = evenSpeedOf(motion);
    if (even.speed.size() < 2 || !(peakOf(even.speed) > 0))
        return undefined("The motion stands still or is sampled too unevenly.");
    return spectralArcLength(even.speed, even.rate, chosen.at("cutoff"), chosen.at("threshold"));
}

Result<double> lengthOfPath(const Trajectory& motion, const Scene*, const MeasureSettings&) {
    return pathLength(motion);
}

Result<double> detour(const Trajectory& motion, const Scene*, const MeasureSettings&) {
    const double straight = lengthOf(motion.x.back() - motion.x.front(), motion.y.back() - motion.y.front());
    if (!(straight > 0.01))
        return undefined("The motion ends where it began, so there is no straight way to compare with.");
    return pathLength(motion) / straight;
}

Result<double> totalTurning(const Trajectory& motion, const Scene*, const MeasureSettings&) {
    double turning = 0;
    for (std::size_t i = 1; i < motion.heading.size(); ++i)
        turning += std::abs(motion.heading[i] - motion.heading[i - 1]);
    return turning;
}

Result<double> meanCurvature(const Trajectory& motion, const Scene* scene, const MeasureSettings& chosen) {
    const double length = pathLength(motion);
    if (!(length > 0.01))
        return undefined("The motion stands still.");
    return *totalTurning(motion, scene, chosen) / length;
}

Result<double> peakCurvature(const Trajectory& motion, const Scene*, const MeasureSettings& chosen) {
    const Derivatives derivatives = derivativesOf(motion, chosen.at("window"));
    double peak = 0;
    bool moves = false;
    for (std::size_t i = 0; i < derivatives.speed.size(); ++i) {
        const double speed = derivatives.speed[i];
        if (speed < chosen.at("slowest"))
            continue;
        moves = true;
        peak = std::max(peak, derivatives.across[i] / (speed * speed));
    }
    if (!moves)
        return undefined("The motion is never fast enough to have a curvature.");
    return peak;
}

Result<double> keepingRight(const Trajectory& motion, const Scene* scene, const MeasureSettings& chosen) {
    const double axis = scene ? scene->keepRightAxis : chosen.at("axis");
    const double forward = motion.x.back() >= motion.x.front() ? 1.0 : -1.0;
    double sum = 0;
    for (std::size_t i = 0; i < motion.time.size(); ++i)
        sum += forward * (axis - motion.y[i]) * timeShare(motion, i);
    return sum / motion.duration();
}

const MeasureSettings kRadii = {{"robot_radius", -1}, {"person_radius", -1}};

MeasureSettings radiiAnd(const MeasureSettings& more) {
    MeasureSettings all = kRadii;
    all.insert(more.begin(), more.end());
    return all;
}

const Measure kMeasures[] = {
    {"travel time", "s", "From the first to the last sample.", {}, false, travelTime},
    {"closest distance to a person", "m",
     "min over samples and people of |robot - person| - robot radius - person radius; the radii are the "
     "scene's unless "
     "given.",
     kRadii, true, closestDistance},
    {"mean speed", "m/s", "Path length over travel time.", {}, false, meanSpeed},
    {"peak speed", "m/s", "Largest speed, from local cubic fits.", {{"window", 0.2}}, false, peakSpeed},
    {"peak acceleration",
     "m/s2",
     "Largest length of the acceleration, from local cubic fits.",
     {{"window", 0.2}},
     false,
     peakAcceleration},
    {"speed beside people", "m/s",
     "Mean speed weighted by exp(-d^2 / (2 range^2)), d the distance of surfaces to the nearest person.",
     radiiAnd({{"range", 0.8}, {"window", 0.2}}), true, speedBesidePeople},
    {"time close to people", "s", "Time with the nearest person's surface closer than `distance`.",
     radiiAnd({{"distance", 1.2}}), true, timeClose},
    {"personal space cost",
     "1",
     "Mean over time of exp(-d^2 / (2 range^2)), d from centre to centre.",
     {{"range", 1.0}},
     true,
     personalSpaceCost},
    {"time to collision", "s",
     "Least time after which robot and person would touch if both kept their velocity, at most `cap`.",
     radiiAnd({{"cap", 10}}), true, timeToCollision},
    {"roughness",
     "m/s3",
     "Root mean square over time of the jerk, from local cubic fits.",
     {{"window", 0.2}},
     false,
     roughness},
    {"log dimensionless jerk",
     "1",
     "-ln |dimensionless jerk| of the speed; nearer 0 is smoother.",
     {},
     false,
     logDimensionlessJerk},
    {"spectral arc length",
     "1",
     "Minus the arc length of the speed's normalised spectrum; nearer 0 is smoother.",
     {{"cutoff", 10}, {"threshold", 0.05}},
     false,
     spectralArc},
    {"path length", "m", "Sum of the straight pieces between samples.", {}, false, lengthOfPath},
    {"detour", "1", "Path length over the straight distance from start to end.", {}, false, detour},
    {"total turning", "rad", "Sum of the absolute changes of heading.", {}, false, totalTurning},
    {"mean curvature", "1/m", "Total turning over path length.", {}, false, meanCurvature},
    {"peak curvature",
     "1/m",
     "Largest |x' y'' - y' x''| / speed^3, from local cubic fits, where the speed is at least `slowest`.",
     {{"window", 0.2}, {"slowest", 0.1}},
     false,
     peakCurvature},
    {"keeping right",
     "m",
     "Mean over time of the offset to the right of the corridor's axis, seen along the way; the axis lies "
     "along x "
     "at the scene's keep_right_axis, or at y = `axis` where there is no scene.",
     {{"axis", 0}},
     false,
     keepingRight},
};

} // namespace

std::span<const Measure> measures() {
    return kMeasures;
}

const Measure* findMeasure(std::string_view phrase) {
    const auto found = std::find_if(std::begin(kMeasures), std::end(kMeasures),
                                    [&](const Measure& measure) { return measure.phrase == phrase; });
    return found == std::end(kMeasures) ? nullptr : found;
}

std::optional<std::string> faultOfSetting(std::string_view name, double value) {
    if (!std::isfinite(value))
        return "It is not finite.";
    if (name == "axis" || name == "robot_radius" || name == "person_radius")
        return std::nullopt; // a negative radius is the scene's
    if (!(value > 0))
        return "It is not above 0.";
    if (name == "threshold" && value >= 1)
        return "It is not below 1.";
    return std::nullopt;
}

Result<double> evaluateMeasure(const Measure& measure, const Trajectory& motion, const Scene* scene,
                               const MeasureSettings& overrides) {
    MeasureSettings chosen = measure.settings;
    for (const auto& [key, value] : overrides) {
        if (!chosen.contains(key))
            throw std::invalid_argument("evaluateMeasure: “" + measure.phrase + "” has no setting “" + key +
                                        "”");
        if (const auto fault = faultOfSetting(key, value))
            throw std::invalid_argument("evaluateMeasure: the setting “" + key + "” cannot be " +
                                        std::to_string(value) + ". " + *fault);
        chosen[key] = value;
    }
    if (motion.time.size() < 2)
        throw std::invalid_argument("evaluateMeasure: the motion has fewer than 2 samples");
    return measure.evaluate(motion, scene, chosen);
}

} // namespace whichway
