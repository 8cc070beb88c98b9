// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/findings/session_findings.h"
#include "core/journal/session_state.h"
#include "core/result.h"

#include <QByteArray>
#include <string>

namespace whichway {

/// One session's report as one self-contained HTML page (well-formed XML): no script, no remote address,
/// every text of the study escaped. Needs a QApplication, on any platform.
/// @param code the person's code, or empty for a report that leaves the lab
QByteArray sessionReport(const SessionState& state, const SessionFindings& findings, const std::string& code);

/// Writes report.html, trials.csv, codebook.csv and weights.json into `folder`, which is made where it is
/// missing.
Result<void> writeSessionReport(FileSystem& files, const SessionState& state, const SessionFindings& findings,
                                const std::string& code, const std::string& folder);

} // namespace whichway
