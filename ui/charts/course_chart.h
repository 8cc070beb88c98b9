// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "ui/charts/chart_style.h"

#include <QString>
#include <memory>
#include <vector>

class QChart;

namespace whichway {

/// How one estimate came to be over the answers: a line of medians with the band of its 90 % intervals.
struct CoursePlot {
    struct Point {
        double answers = 0;
        double median = 0, low = 0, high = 0;
    };
    QString heading = {};
    std::vector<Point> points = {};
    double lastAnswer = 0; ///< end of the axis, which begins at 0
    double from = -1, to = 1;
    bool logarithmic = false;
    std::vector<double> ticks = {};
    QStringList tickTexts = {}; ///< one a tick
    bool zeroLine = true;
};

std::unique_ptr<QChart> makeCourseChart(const CoursePlot& plot, const ChartStyle& style, const QSizeF& size);

/// The chart as an <svg> element.
QString courseImage(const CoursePlot& plot, const ChartStyle& style, const QSizeF& size, const QString& name);

} // namespace whichway
