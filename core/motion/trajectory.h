// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>
#include <vector>

namespace whichway {

/// A person near the robot, as a disc that moves.
struct PersonTrack {
    std::vector<double> x = {}; ///< m, at the times of the trajectory
    std::vector<double> y = {}; ///< m
    bool operator==(const PersonTrack&) const = default;
};

/// One motion: time-stamped states of a robot in the plane, and the people around it. A value.
/// Invariant of a checked trajectory: at least 2 samples, all lists of one length, times strictly increasing.
struct Trajectory {
    std::string name = {};            ///< [A-Za-z0-9_-]{1,64}, unique in its library
    std::string scene = {};           ///< name of a `Scene` of the study, empty where the study has none
    std::vector<double> time = {};    ///< s, from the first sample's 0
    std::vector<double> x = {};       ///< m
    std::vector<double> y = {};       ///< m
    std::vector<double> heading = {}; ///< rad, anticlockwise from +x, not wrapped
    std::vector<PersonTrack> people = {};

    double duration() const { return time.empty() ? 0 : time.back() - time.front(); }
    bool operator==(const Trajectory&) const = default;
};

/// What a motion looks like at one instant, for drawing.
struct Instant {
    double x = 0, y = 0; ///< m
    double heading = 0;  ///< rad
    struct Position {
        double x = 0, y = 0; ///< m
    };
    std::vector<Position> people = {};
};

/// Linear interpolation between samples; before the first and after the last sample the motion stands still.
/// `seconds` counts from the first sample.
Instant instantAt(const Trajectory& trajectory, double seconds);

} // namespace whichway
