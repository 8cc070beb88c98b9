// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/session_state.h"
#include "core/preference/posterior.h"
#include "core/result.h"

#include <stop_token>
#include <string>
#include <vector>

namespace whichway {

/// z_left - z_right; empty if one of the motions is not of the main library.
std::vector<double> standardisedDifference(const Protocol& protocol, const std::string& left,
                                           const std::string& right);

/// The standing answers that teach the weights, in order: main trials and no others.
std::vector<Response> mainResponses(const SessionState& state);

/// The settings that a session is reported with; the seed is the session's own, so that whoever reads the
/// journal gets the same draws.
SamplerSettings reportSettings(const SessionState& state);

/// The posterior that a session is reported with. @return "session.no-answers" without a main answer;
/// kCancelled.
Result<Posterior> sessionPosterior(const SessionState& state, std::stop_token stop = {});

/// What the journal keeps of that posterior.
EstimateMade estimateOf(const Posterior& posterior, int answers, const SamplerSettings& settings);

} // namespace whichway
