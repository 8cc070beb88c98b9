// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/preference/posterior.h"
#include "core/preference/response_model.h"

#include <span>
#include <vector>

namespace whichway {

/// Draws prepared for scoring pairs. Scores are mutual informations in bits between the answer to a pair and
/// all parameters theta = (w, delta, cuts),
///     I = H(mean over draws of p(y | theta)) - mean over draws of H(p(y | theta))
/// (Houlsby, Huszar, Ghahramani and Lengyel 2011, arXiv 1112.5745). Answers that are still open are averaged
/// over: each possible combination of them is a context, that is, another weighting of the draws, and the
/// score is the information given the context, averaged over contexts. Immutable but for `condition`;
/// deterministic; no allocation in `information`.
class InformationScorer {
public:
    /// @throws std::invalid_argument if the draws do not fit the model.
    InformationScorer(const ResponseModel& model, const Draws& draws);

    std::size_t draws() const { return sideBias_.size(); }
    std::size_t contexts() const { return contexts_.rows; }

    /// From now on the answer to the pair of this difference counts as open. Up to 49 contexts are all
    /// enumerated; beyond, as many are drawn from their joint distribution with `seed`.
    void condition(std::span<const double> difference, std::uint64_t seed);

    /// Information of the pair of this difference (left minus right, standardised), with the first
    /// `drawCount` draws.
    double information(std::span<const double> difference, std::size_t drawCount) const;
    double information(std::span<const double> difference) const { return information(difference, draws()); }

private:
    /// P(answer | draw), categories x draws.
    Matrix probabilities(std::span<const double> difference) const;
    void block(std::span<const double> difference, std::size_t first, std::size_t count, double* p) const;

    ResponseModel model_;
    Matrix drawWeights_; ///< d x draws, so that a utility is a sum of rows
    std::vector<double> sideBias_;
    Matrix cutFactors_;        ///< levels x draws: e^{c_k}
    Matrix contexts_;          ///< contexts x draws: joint weights, all summing to 1
    std::vector<Matrix> open_; ///< probabilities of each open pair
};

} // namespace whichway
