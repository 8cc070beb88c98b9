// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/session_report.h"

#include "core/handover/trial_table.h"
#include "core/handover/weights_file.h"
#include "ui/report/report_page.h"

#include <utility>
#include <vector>

namespace whichway {

QString sessionReportPage(const SessionState& state, const SessionFindings& findings,
                          const ReportExtras& extras) {
    return ReportPage(state, findings, extras).page();
}

Result<void> writeSessionReport(FileSystem& files, const SessionState& state, const SessionFindings& findings,
                                const ReportExtras& extras, const std::string& folder) {
    const std::vector<std::pair<std::string, std::string>> contents = {
        {"trials.csv", trialTable(state)},
        {"codebook.csv", codebook(state.began.protocol)},
        {"weights.json", weightsFile(state, findings)},
        {"report.html", sessionReportPage(state, findings, extras).toStdString()}};
    if (auto made = files.createDirectory(folder); !made)
        return made;
    for (const auto& [name, content] : contents)
        if (auto written = files.replace(folder + "/" + name, content); !written)
            return written;
    return {};
}

} // namespace whichway
