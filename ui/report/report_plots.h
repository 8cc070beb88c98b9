// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/findings/session_findings.h"
#include "core/journal/session_state.h"
#include "ui/charts/course_chart.h"
#include "ui/charts/interval_chart.h"
#include "ui/charts/session_chart.h"

#include <vector>

namespace whichway {

// What the report's charts show, from values alone.

/// A weight's sign counts as determined from this probability on; below it the dot is hollow.
inline constexpr double kSignDetermined = 0.95;

IntervalPlot weightsPlot(const Protocol& protocol, const WeightFindings& weights);
IntervalPlot sensitivityPlot(const WeightFindings& weights);
IntervalPlot predictionPlot(const SessionFindings& findings);
SessionPlot sessionPlot(const SessionState& state, const Consistency& consistency);
/// One a feature, and the sensitivity last.
std::vector<CoursePlot> coursePlots(const Protocol& protocol, const SessionFindings& findings);

} // namespace whichway
