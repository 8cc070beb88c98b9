// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <span>
#include <vector>

namespace whichway {

// Smoothness of a speed profile that is sampled at equal steps.

/// Dimensionless jerk -(T^3 / v_peak^2) integral (d^2 v/dt^2)^2 dt with T = n / rate (Balasubramanian,
/// Melendez-Calderon, Roby-Brami and Burdet 2015, J. NeuroEngineering and Rehabilitation 12:112). Always <=
/// 0; 0 for a constant speed.
/// @throws std::invalid_argument for fewer than 3 samples, a rate that is not positive, or a peak speed of 0.
double dimensionlessJerk(std::span<const double> speed, double rate);

/// Spectral arc length (the same paper): minus the length of the curve of the normalised magnitude spectrum
/// between its first and last bin of at least `threshold` below `cutoff` Hz, the frequency axis scaled to
/// length one. The profile is padded with zeros to 2^(ceil(log2 n) + padLevel). Nearer 0 is smoother.
/// @throws std::invalid_argument for fewer than 2 samples, a rate that is not positive, or a speed that is 0
/// throughout.
double spectralArcLength(std::span<const double> speed, double rate, double cutoff = 10,
                         double threshold = 0.05, int padLevel = 4);

} // namespace whichway
