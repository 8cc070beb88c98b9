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

/// Percentiles by linear interpolation (Hyndman and Fan 1996, type 7); infinite values may stand at the ends.
/// @throws std::invalid_argument without values or where one is not a number.
Interval intervalOf(std::vector<double> values);

/// The share of values above 0, those that are 0 counting half: the probability that the number is positive.
/// @throws std::invalid_argument without values.
double probabilityPositive(const std::vector<double>& values);

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

/// How much of the numeraire n makes up for one step of another feature j: the change of the numeraire that
/// leaves the utility as it was when the feature grows by a step (the marginal rate of substitution),
///     -(w_j / sd_j) step / (w_n / sd_n),   step = speakPer, or ln 2 (a doubling) for a logarithmic feature.
struct TradeOff {
    std::string feature = {};
    bool determined = false;    ///< the sign of the numeraire's weight has a probability of at least 0.99
    double signProbability = 0; ///< of the numeraire's more likely sign
    double featureSignProbability = 0; ///< of the feature's own more likely sign; hides nothing
    Interval change = {}; ///< of the numeraire, in its unit (in doublings where it is logarithmic)

    // The same in words, turned so that what the person gives up is positive at the median. Where it is not
    // determined, only `forWhat` and `sentence` are there.
    std::string give = {};     ///< "1.3 s"
    std::string giveWhat = {}; ///< "more travel time"
    std::string forWhat = {};  ///< "0.1 m more closest distance"
    std::string range = {};    ///< "0.7 to 2.2 s"; below 0: the person would have to be given something
    std::string sentence = {}; ///< the whole, in plain English with units and interval
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
