// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/findings/session_findings.h"
#include "core/journal/session_state.h"
#include "ui/report/markup.h"

#include <QStringList>
#include <vector>

namespace whichway {

/// A table: a heading a column, and rows of as many cells.
struct ReportTable {
    QString name = {}; ///< what it shows, for readers that do not see it
    QString cssClass = {};
    QStringList headings = {};
    std::vector<QStringList> rows = {};
};

void write(Markup& out, const ReportTable& table);

/// Every check with what was found and what would make it stand out.
ReportTable consistencyTable(const SessionState& state, const SessionFindings& findings);
/// Weights in numbers: direction, per unit, sign.
ReportTable weightsTable(const SessionState& state, const WeightFindings& weights);
/// Diagnostics of every parameter.
ReportTable diagnosticsTable(const Protocol& protocol, const Posterior& posterior);
/// Every answer: when, what, how long.
ReportTable logTable(const SessionState& state);

} // namespace whichway
