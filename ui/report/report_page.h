// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/charts/chart_style.h"
#include "ui/report/markup.h"
#include "ui/report/session_report.h"

#include <QCoreApplication>

namespace whichway {

/// Puts the page of one session together, section by section. The arguments must outlive it.
class ReportPage {
    Q_DECLARE_TR_FUNCTIONS(ReportPage)
public:
    ReportPage(const SessionState& state, const SessionFindings& findings, const ReportExtras& extras);

    QString page();

private:
    void head();
    void marks();
    void weights();
    void tradeOffs();
    void session();
    void consistency();
    void prediction();
    void course();
    void motions();
    void motion(const QString& heading, const MotionFinding& finding, const QString& role);
    void model();
    void diagnostics();
    void log();
    void cautionsAndFoot();

    const SessionState& state_;
    const SessionFindings& findings_;
    const ReportExtras& extras_;
    ChartStyle style_ = paperStyle();
    Markup out_;
};

} // namespace whichway
