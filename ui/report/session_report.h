// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/findings/session_findings.h"
#include "core/journal/session_state.h"
#include "core/result.h"
#include "core/study/study.h"

#include <QString>
#include <string>

namespace whichway {

/// What a report may hold beyond the session itself.
struct ReportExtras {
    std::string code = {};        ///< printed, with the date, only where given: for the lab's own copy
    const Study* study = nullptr; ///< with it the best and worst motions are drawn; must outlive the call
};

/// The report as one page of HTML that is well-formed XML too, without script or any reference to another
/// file. Needs a QGuiApplication; a display is not needed.
QString sessionReportPage(const SessionState& state, const SessionFindings& findings,
                          const ReportExtras& extras);

/// Writes report.html, trials.csv, codebook.csv and weights.json into `folder`, which is made where it is
/// missing. The last three never hold code, date or free text. @return the first file that could not be
/// written, as an error of the file system.
Result<void> writeSessionReport(FileSystem& files, const SessionState& state, const SessionFindings& findings,
                                const ReportExtras& extras, const std::string& folder);

} // namespace whichway
