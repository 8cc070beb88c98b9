// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/findings/consistency.h"
#include "core/findings/estimates.h"
#include "core/journal/session_state.h"
#include "core/preference/posterior.h"
#include "core/result.h"

#include <stop_token>
#include <vector>

namespace whichway {

/// The estimate as it stood after a number of main answers.
struct CoursePoint {
    int answers = 0;
    std::vector<Interval> direction = {}; ///< one a feature
    Interval sensitivity = {};
    double directionPrecision = 0;
};

/// Everything that is said about one session. A value.
struct SessionFindings {
    ResponseModel model = {};
    SamplerSettings sampler = {};
    Posterior posterior = {};
    int mainAnswers = 0;
    WeightFindings weights = {};
    std::vector<TradeOff> tradeOffs = {};
    BestMotions motions = {};
    Consistency consistency = {};
    Prediction prediction = {};
    Interval sideBias = {};
    std::vector<CoursePoint> course = {}; ///< every `step` main answers and at the end
};

/// Fits the session (with the session's own seed: the same draws for everyone) and draws every conclusion.
/// @return "session.no-answers" without a main answer; kCancelled.
Result<SessionFindings> findSession(const SessionState& state, int courseStep = 5, std::stop_token stop = {});

} // namespace whichway
