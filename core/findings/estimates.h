// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/preference/posterior.h"
#include "core/study/protocol.h"

#include <string>
#include <vector>

namespace whichway {

/// A posterior median with its 90 % interval (5th to 95th percentile over the draws).
struct Interval {
    double median = 0, low = 0, high = 0;
};

Interval intervalOf(std::vector<double> values);

/// What one feature weighs.
struct WeightFinding {
    std::string feature = {};
    Interval direction = {};    ///< component of the weights' unit vector
    Interval standardised = {}; ///< utility per standard deviation of the (transformed) feature
    Interval perUnit = {};      ///< utility per unit of the (transformed) feature
    double positive = 0;        ///< probability that the weight is above 0
};

/// The direction of the weights and, apart from it, their length.
struct WeightFindings {
    std::vector<WeightFinding> features = {};
    Interval sensitivity = {};              ///< |w|
    std::vector<double> meanDirection = {}; ///< unit vector
    /// 5th percentile over the draws of the cosine to the mean direction: how well the direction is known.
    double directionPrecision = 0;
    Matrix covariance = {}; ///< of the standardised weights, d x d
};

WeightFindings findWeights(const Protocol& protocol, const Draws& draws);

/// How much of the numeraire balances a change of another feature at equal utility:
///     -(w_j / sd_j) / (w_n / sd_n) x step,  step = speakPer, or ln 2 (a doubling) for a logarithmic feature.
struct TradeOff {
    std::string feature = {};
    bool determined = false;    ///< the sign of the numeraire's weight has a probability of at least 0.99
    double signProbability = 0; ///< of the numeraire's more likely sign
    Interval change = {};       ///< of the numeraire, in its unit (in doublings where it is logarithmic)
    std::string sentence = {};  ///< the same in plain English, with units and interval
};

/// One a feature, the numeraire left out, in the order of the features.
/// @throws std::invalid_argument if the protocol has no such numeraire.
std::vector<TradeOff> findTradeOffs(const Protocol& protocol, const Draws& draws);

/// Which motion of the library suits the person best.
struct MotionFinding {
    std::string motion = {};
    double probability = 0; ///< that it is the best (or the worst)
};
struct BestMotions {
    MotionFinding best = {}, worst = {}; ///< by mean utility
    /// E[max u - u(best)] / E[max u - mean u]: what acting on the estimate costs, as a share of what choosing
    /// matters.
    double expectedRegret = 0;
};

BestMotions findBestMotions(const Protocol& protocol, const Draws& draws);

} // namespace whichway
