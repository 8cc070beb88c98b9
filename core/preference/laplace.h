// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/base_coordinates.h"
#include "core/preference/likelihood.h"
#include "core/result.h"

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

/// The maximum of the likelihood alone, flat in every parameter that the model leaves free (the weights, the
/// side bias unless its deviation is 0, the cut points).
struct LikelihoodMaximum {
    std::vector<double> natural = {}; ///< as in ResponseLikelihood
    Matrix covariance = {};           ///< inverse expected information of the free parameters, others 0
    double logLikelihood = 0;
    int iterations = 0;
};

/// Fisher scoring with step halving. @return "preference.no-maximum" if the likelihood has none (the answers
/// separate perfectly, or a feature never varied).
Result<LikelihoodMaximum> maximiseLikelihood(const ResponseLikelihood& likelihood);

} // namespace whichway
