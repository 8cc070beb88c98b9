// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/base_coordinates.h"
#include "core/preference/likelihood.h"

#include <vector>

namespace whichway {

/// A normal approximation of the posterior in base coordinates: where sampling starts, never what is
/// reported.
struct LaplaceFit {
    std::vector<double> centre = {};
    Matrix covariance = {};
};

/// Empirical-Bayes Laplace fit: Newton steps with the model's expected information at a fixed scale of the
/// weights, the scale in turn from E|w|^2 (the joint mode of weights and scale is a place where the posterior
/// is not).
LaplaceFit fitLaplace(const ResponseLikelihood& likelihood, const BaseCoordinates& coordinates);

} // namespace whichway
