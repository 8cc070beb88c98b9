// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/planning/moment_table.h"
#include "core/planning/rules.h"
#include "core/preference/posterior.h"

#include <vector>

namespace whichway {

struct ScreenedPair {
    Pair pair = {};  ///< canonical
    float score = 0; ///< bits, by the moment table
};

/// What is believed about the weights, as mean and covariance: screens every pair of the library, and shrinks
/// as the answers to open pairs would make it.
class Belief {
public:
    Belief(const PlanningProblem& problem, const Draws& draws);

    /// The covariance becomes what it would be after the answer to this pair.
    void expectAnswer(Pair pair);
    /// The `most` allowed pairs of the highest score, best first; ties by row numbers.
    std::vector<ScreenedPair> screen(const PairRules& rules, std::size_t most) const;
    /// |cos| of the angle between two pairs in the covariance's metric.
    double alignment(Pair a, Pair b) const;

private:
    std::vector<double> difference(Pair pair) const;
    void whiten();

    const PlanningProblem& problem_;
    double sideVariance_ = 0;
    std::vector<double> mean_;
    Matrix covariance_;
    MomentTable table_;
    std::vector<float> utility_;  ///< mean utility of each motion
    std::vector<float> whitened_; ///< d x motions: L' z with covariance L L'
};

} // namespace whichway
