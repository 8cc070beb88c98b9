// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/events.h"
#include "ui/charts/chart_style.h"

#include <QString>
#include <vector>

class QPainter;

namespace whichway {

/// A whole session on one line: the kinds of its trials by their marks, and under each the response time on a
/// logarithmic axis.
struct SessionPlot {
    struct Trial {
        TrialKind kind = TrialKind::Main;
        double seconds = -1;  ///< response time; negative: not known
        bool flagged = false; ///< ringed
    };
    std::vector<Trial> trials = {};    ///< in the order they were answered
    std::vector<int> breaksAfter = {}; ///< counts of trials
    QString timeLabel = {}, trialLabel = {};
    double labelWidth = 92; ///< px
    double height() const;
};

/// @param width px
void paintSession(QPainter& painter, const SessionPlot& plot, const ChartStyle& style, double width);

/// The same as an <svg> element.
QString sessionImage(const SessionPlot& plot, const ChartStyle& style, double width, const QString& name);

} // namespace whichway
