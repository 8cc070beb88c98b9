// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/pages/session_list.h"

#include <QWidget>
#include <functional>

class QLabel;
class QVBoxLayout;

namespace whichway {

/// One person at a time: for now the sessions that have ended, and their reports.
class ReviewPage final : public QWidget {
    Q_OBJECT
public:
    /// Writes a session's report. @return the folder that it is in.
    using ReportWriter = std::function<Result<std::string>(const SessionFolder&)>;

    explicit ReviewPage(QWidget* parent = nullptr);
    void setReportWriter(ReportWriter writer) { write_ = std::move(writer); }
    void showSessions(const std::vector<SessionRow>& sessions);

Q_SIGNALS:
    void studyAsked();

private:
    void writeReport(const SessionFolder& folder);

    ReportWriter write_;
    QLabel* outcome_;
    QVBoxLayout* list_;
};

} // namespace whichway
