// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/findings/session_findings.h"
#include "core/journal/session_state.h"

#include <QString>
#include <QStringList>

namespace whichway {

// The report's sentences, from values alone.

/// "40 pairs", counted by kind: "40 main, 10 held-out, …".
QString kindsText(const SessionState& state);
/// What was done, as a paper's methods section would say it.
QString methodsText(const SessionState& state, const SessionFindings& findings);
/// The response model and its priors, one line each.
QStringList modelTexts(const SessionFindings& findings);
/// How the session ended, or that it has not.
QString endText(const SessionState& state);
/// s from the session's first event to `time` (both as the journal writes them); negative if one cannot be
/// read.
double secondsInto(const SessionState& state, const std::string& time);
/// The feature's label, or its name where it has none.
QString labelOf(const Protocol& protocol, const std::string& feature);
/// The largest R-hat and the least effective sample size of the fit.
double largestRHat(const Posterior& posterior);
double leastEffectiveDraws(const Posterior& posterior);

} // namespace whichway
