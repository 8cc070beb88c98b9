// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <span>
#include <vector>

namespace whichway {

/// Draws of one scalar: one list a chain, all of one length.
using Chains = std::vector<std::vector<double>>;

// Convergence diagnostics after Vehtari, Gelman, Simpson, Carpenter and Buerkner (2021), "Rank-normalization,
// folding, and localization", Bayesian Analysis 16(2). NaN where the draws are constant or fewer than 4 a
// chain.

/// The larger of the rank-normalised split R-hat and its folded form.
double rHat(const Chains& chains);
/// Effective sample size of the rank-normalised split draws.
double bulkEss(const Chains& chains);
/// The lesser of the effective sample sizes of the indicators of the 5 % and 95 % quantiles.
double tailEss(const Chains& chains);
/// Effective sample size for the mean.
double meanEss(const Chains& chains);
/// Monte Carlo standard error of the mean.
double meanMcse(const Chains& chains);

/// Sample quantile by linear interpolation of the order statistics (Hyndman and Fan 1996, type 7).
/// @throws std::invalid_argument for no values or p outside [0, 1].
double quantileOf(std::vector<double> values, double p);

} // namespace whichway
