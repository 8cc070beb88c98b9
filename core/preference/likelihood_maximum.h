// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/likelihood.h"
#include "core/result.h"

#include <vector>

namespace whichway {

/// The maximum of the likelihood alone, flat in every parameter that the model leaves free: the weights, the
/// side bias unless its deviation is 0, the cut points (all but a c_0 that is fixed at 0) unless the
/// deviation of their gaps is 0.
struct LikelihoodMaximum {
    std::vector<double> natural = {}; ///< as in ResponseLikelihood
    Matrix covariance = {};           ///< inverse observed information of the free parameters, others 0
    double logLikelihood = 0;
    int iterations = 0;
};

/// Newton's method with the observed information (the expected one where that is not positive definite) and
/// step halving. With a lapse the likelihood may have several maxima: then it is the one found from 0.
/// @return "preference.no-maximum" if no step improves the likelihood any more or 100 steps do not converge:
/// the answers separate perfectly, a level was never used, or a feature never varied.
Result<LikelihoodMaximum> maximiseLikelihood(const ResponseLikelihood& likelihood);

} // namespace whichway
