// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/trajectory.h"
#include "core/result.h"

#include <string>
#include <string_view>
#include <vector>

namespace whichway {

struct TrajectoryReading {
    Trajectory trajectory = {}; ///< whole only if `problems` is empty; name and scene are the caller's
    std::vector<Error> problems = {};
};

/// Reads one motion from CSV with the columns
///     time_s, x_m, y_m, heading_rad, person1_x_m, person1_y_m, person2_x_m, …
/// in any order. The heading may be left out: then it is that of the movement, and a robot slower than
/// 0.02 m/s keeps the one it had. Times become relative to the first. Problems: the codes of csv.h,
/// "trajectory.unit" (a known quantity in another unit), "trajectory.unknown-column",
/// "trajectory.missing-column", "trajectory.too-short" (fewer than 2 samples), "trajectory.too-long" (more
/// than 20,000 samples), "trajectory.time-repeats", "trajectory.time-backward",
/// "trajectory.time-looks-like-ms" (a median step of 5 s or more), "trajectory.too-far" (a coordinate beyond
/// 10 km).
TrajectoryReading parseTrajectory(std::string_view content, const std::string& file);

/// The same format, with times in 0.001 s and the rest rounded to `decimals`.
std::string writeTrajectory(const Trajectory& trajectory, int decimals = 4);

} // namespace whichway
