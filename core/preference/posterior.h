// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/response_model.h"
#include "core/result.h"

#include <cstdint>
#include <span>
#include <stop_token>
#include <string>
#include <vector>

namespace whichway {

/// Draws of the parameters of one person's response model, one row a draw, on their natural scales. A value.
struct Draws {
    Matrix weights = {};               ///< draws x d, per standard deviation of the features
    std::vector<double> sideBias = {}; ///< delta
    Matrix cuts = {};                  ///< draws x K: c_0 … c_{K-1}
    std::size_t count() const { return weights.rows; }
    bool operator==(const Draws&) const = default;
};

/// Diagnostics of one scalar (Vehtari, Gelman, Simpson, Carpenter and Buerkner 2021, Bayesian Analysis
/// 16(2)).
struct ScalarSummary {
    std::string name = {};
    double mean = 0, deviation = 0;
    double median = 0, low = 0, high = 0; ///< low, high: 5th and 95th percentile
    double rHat = 0;                      ///< rank-normalised split R-hat, the larger of bulk and folded
    double bulkEss = 0, tailEss = 0;
    double mcse = 0; ///< Monte Carlo standard error of the mean
};

struct Posterior {
    Draws draws = {}; ///< chains one after another
    int chains = 0;
    /// "weight 1" … "weight d", "sensitivity" |w|, "side bias", "cut 0" … "cut K-1", without those that the
    /// model fixes.
    std::vector<ScalarSummary> summaries = {};
    /// Every R-hat below 1.01 and every bulk and tail effective sample size at least 400: else it is not
    /// shown without saying so.
    bool converged = false;
};

struct SamplerSettings {
    int chains = 4;
    int warmUp = 80; ///< iterations per chain, discarded
    int drawsPerChain = 1000;
    std::uint64_t seed = 1;
    /// Summarise, and where the summaries show no convergence go on, up to eight times the draws, which are
    /// then thinned to `drawsPerChain`. Off: just the draws, for plans.
    bool diagnose = true;
};

/// Hamiltonian Monte Carlo in coordinates whose prior is standard normal, whitened first by an
/// empirical-Bayes Laplace fit, then by the covariance of a short pilot run, which is discarded. Same input,
/// same bits, on any machine. With no responses the draws are of the prior.
/// @return kCancelled if stop was requested (polled at each move of a chain).
/// @throws std::invalid_argument for a model or settings out of range, or a response that does not fit.
Result<Posterior> samplePosterior(const ResponseModel& model, std::span<const Response> responses,
                                  const SamplerSettings& settings, std::stop_token stop = {});

/// `count` independent draws of the prior.
/// @throws std::invalid_argument if the model is out of range or count < 1.
Draws drawPrior(const ResponseModel& model, int count, std::uint64_t seed);

/// The mean of the draws' directions w / |w|, scaled to length 1; zeros if the directions cancel.
std::vector<double> meanDirection(const Draws& draws);

} // namespace whichway
