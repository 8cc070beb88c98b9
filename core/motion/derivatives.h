// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/trajectory.h"

#include <span>
#include <vector>

namespace whichway {

/// Lengths of the derivatives of the position at every sample.
struct Derivatives {
    std::vector<double> speed = {};        ///< m/s
    std::vector<double> acceleration = {}; ///< m/s^2
    std::vector<double> jerk = {};         ///< m/s^3
    std::vector<double> across = {}; ///< m/s^2, the acceleration's part across the direction of movement
};

/// Derivatives of the least-squares cubic through the samples within half of `window` seconds on either side,
/// at least five samples (Savitzky and Golay 1964, for times that need not be even). Near the ends the window
/// stays inside the motion. Motions of fewer than five samples use polynomials of a lower degree.
Derivatives derivativesOf(const Trajectory& motion, double window);

/// The speed at equal steps of the median interval, from central differences of the interpolated positions.
/// Empty if that would take more than ten times the motion's own samples.
struct EvenSpeed {
    std::vector<double> speed = {}; ///< m/s
    double rate = 0;                ///< Hz
};
EvenSpeed evenSpeedOf(const Trajectory& motion);

/// The largest value, 0 for none.
double peakOf(std::span<const double> values);

} // namespace whichway
