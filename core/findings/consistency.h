// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/findings/estimates.h"
#include "core/journal/session_state.h"

#include <optional>
#include <string>
#include <vector>

namespace whichway {

/// Some of a number of trials. Trials answered "cannot tell" are counted apart, not among `of`.
struct Share {
    int count = 0, of = 0;
    int cannotTell = 0;
};

/// Exact interval of a proportion (Clopper and Pearson 1934), two-sided with confidence `level`.
/// @throws std::invalid_argument unless 0 <= count <= of, of >= 1 and 0 < level < 1.
Interval exactProportion(int count, int of, double level = 0.9);

/// Two-sided exact binomial test of a share of one half: the probability of a result at least as uneven.
double evenSplitProbability(int count, int of);

/// Whether the person's answers fit together. Each figure is shown with what would make it stand out; none of
/// them removes a trial.
struct Consistency {
    Share left = {}; ///< trials in which the left side was chosen, of main, held-out, repeat and catch trials
    double leftProbability = 1; ///< of an at least as uneven split if no side were preferred
    Share repeats = {};         ///< repeats in which the same motion was chosen as before
    Share catches = {};         ///< catch trials in which the expected motion was chosen
    Share identicalLeft = {};   ///< identical pairs in which the left side was chosen; not judged
    std::vector<int> confidence =
        {};               ///< how often each level was used, from least to most sure, in trials that count
    bool oneWord = false; ///< one level makes at least nine in ten of 15 or more answers
    int quick = 0;        ///< trials answered in less than `quickBelow` s after answering became possible
    double quickBelow =
        1; ///< s; our own figure, for want of a sourced one that does not need the clip's length
    std::optional<double> medianResponseTime = {}; ///< s
    /// Share of trials that count, in the last third less the first third, whose side the final estimate
    /// predicts; in points of 100. A drop of more than 20 stands out.
    std::optional<double> drift = {};
};

Consistency findConsistency(const SessionState& state, const Draws& draws);

/// How well the final estimate predicts pairs that taught it nothing.
struct Prediction {
    Share heldOut = {}; ///< held-out trials whose side it predicts
    std::optional<Interval> accuracy =
        {};                              ///< exact 90 % interval, median = the share; nothing without trials
    std::optional<double> logScore = {}; ///< mean natural logarithm of the probability it gave to the answer
    bool tooFew = true;                  ///< fewer than 10 held-out trials
    /// Between these the best reachable accuracy lies, given the agreement a of repeats: a to (1 + sqrt(2a -
    /// 1)) / 2.
    std::optional<Interval> reachable =
        {}; ///< nothing without repeats or with an agreement of one half or less
};

Prediction findPrediction(const SessionState& state, const ResponseModel& model, const Draws& draws,
                          const Share& repeats);

} // namespace whichway
