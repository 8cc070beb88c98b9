// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/charts/chart_style.h"

#include <QString>
#include <QStringList>
#include <memory>
#include <optional>
#include <utility>
#include <vector>

class QChart;

namespace whichway {

/// Estimates as dimension lines, one a row: a thin line from one end of the 90 % interval to the other, with
/// end ticks, and a dot at the median.
struct IntervalPlot {
    struct Row {
        QString label = {};
        double median = 0, low = 0, high = 0;
        bool determined = true; ///< else the dot is hollow and grey
        bool isSecond = false;  ///< drawn in ink: another kind of figure than the rest
        QString value = {};     ///< written at the row's end, or nothing
    };
    struct Tick {
        double at = 0;
        QString text = {};
    };
    std::vector<Row> rows = {};
    double from = 0, to = 1; ///< of the axis; what lies beyond is cut off
    bool logarithmic = false;
    std::vector<Tick> ticks = {};
    std::optional<double> reference = {}; ///< an upright line in the edge's colour
    bool dashedReference = false;
    QString referenceText = {};
    QString below = {}, above = {};                     ///< headings to the left and right of the reference
    std::optional<std::pair<double, double>> band = {}; ///< shaded
    QString bandText = {};
    double labelWidth = 120, valueWidth = 0; ///< px
    double rowHeight = 26;                   ///< px
    /// Of the whole chart, in px.
    double height() const;
};

/// @param width px
std::unique_ptr<QChart> makeIntervalChart(const IntervalPlot& plot, const ChartStyle& style, double width);

/// The chart as an <svg> element.
QString intervalImage(const IntervalPlot& plot, const ChartStyle& style, double width, const QString& name);

} // namespace whichway
