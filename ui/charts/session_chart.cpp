// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/charts/session_chart.h"

#include "ui/charts/vector_image.h"
#include "ui/look/icons.h"

#include <QPainter>
#include <algorithm>
#include <array>
#include <cmath>
#include <set>

namespace whichway {
namespace {

constexpr double kMarksAt = 10, kTop = 36, kBottom = 116, kKeyAt = 142;

bool hasTimes(const SessionPlot& plot) {
    return std::any_of(plot.trials.begin(), plot.trials.end(),
                       [](const SessionPlot::Trial& trial) { return trial.seconds >= 0; });
}

/// Response times between these ends, in s, that hold all of the session's.
struct TimeAxis {
    double from = 1, to = 30;
    double y(double seconds) const {
        const double part =
            (std::log(std::max(seconds, from)) - std::log(from)) / (std::log(to) - std::log(from));
        return kBottom - part * (kBottom - kTop);
    }
};

TimeAxis axisFor(const SessionPlot& plot) {
    TimeAxis axis;
    for (const SessionPlot::Trial& trial : plot.trials)
        if (trial.seconds >= 0) {
            while (trial.seconds < axis.from && axis.from > 0.1)
                axis.from /= std::sqrt(10);
            while (trial.seconds > axis.to)
                axis.to *= std::sqrt(10);
        }
    return axis;
}

void paintKey(QPainter& painter, const SessionPlot& plot, const ChartStyle& style) {
    std::set<TrialKind> kinds;
    for (const SessionPlot::Trial& trial : plot.trials)
        kinds.insert(trial.kind);
    const double y = hasTimes(plot) ? kKeyAt : kTop;
    double x = plot.labelWidth;
    painter.setFont(style.label);
    for (const TrialKind kind : kinds) {
        painter.setPen(Qt::NoPen);
        painter.setBrush(style.colours.ink2);
        painter.drawPath(trialMark(kind, 9).translated(x + 5, y));
        painter.setPen(style.colours.ink3);
        const QString text = trialKindText(kind);
        painter.drawText(QPointF(x + 15, y + 4), text);
        x += 15 + QFontMetricsF(style.label).horizontalAdvance(text) + 20;
    }
}

void paintTimes(QPainter& painter, const SessionPlot& plot, const ChartStyle& style, double width,
                const std::vector<double>& columns) {
    const Colours& colours = style.colours;
    const TimeAxis axis = axisFor(plot);
    const QFontMetricsF metrics(style.label);
    painter.setFont(style.label);
    for (const double seconds : {0.1, 0.3, 1.0, 3.0, 10.0, 30.0, 100.0, 300.0, 1000.0}) {
        if (seconds < axis.from * 0.99 || seconds > axis.to * 1.01)
            continue;
        const double y = axis.y(seconds);
        painter.setPen(QPen(colours.line, 1));
        painter.drawLine(QPointF(plot.labelWidth, y), QPointF(width, y));
        const QString text = QString::number(seconds);
        painter.setPen(colours.ink3);
        painter.drawText(QPointF(plot.labelWidth - 8 - metrics.horizontalAdvance(text), y + 4), text);
    }
    painter.setFont(style.text);
    painter.setPen(colours.ink);
    painter.drawText(QRectF(0, kTop + 18, plot.labelWidth - 24, 40), Qt::AlignLeft | Qt::TextWordWrap,
                     plot.timeLabel);
    QPointF before;
    bool joined = false;
    for (std::size_t i = 0; i < plot.trials.size(); ++i) {
        const SessionPlot::Trial& trial = plot.trials[i];
        if (trial.seconds < 0) {
            joined = false;
            continue;
        }
        const QPointF at(columns[i], axis.y(trial.seconds));
        painter.setPen(QPen(colours.ink3, 1));
        if (joined)
            painter.drawLine(before, at);
        before = at;
        joined = true;
    }
    for (std::size_t i = 0; i < plot.trials.size(); ++i) {
        const SessionPlot::Trial& trial = plot.trials[i];
        if (trial.seconds < 0)
            continue;
        const QPointF at(columns[i], axis.y(trial.seconds));
        painter.setPen(Qt::NoPen);
        painter.setBrush(colours.ink2);
        painter.drawEllipse(at, 2.1, 2.1);
        if (trial.flagged) {
            painter.setPen(QPen(colours.warn, 1.5));
            painter.setBrush(Qt::NoBrush);
            painter.drawEllipse(at, 6, 6);
        }
    }
}

} // namespace

double SessionPlot::height() const {
    return (hasTimes(*this) ? kKeyAt : kTop) + 10;
}

void paintSession(QPainter& painter, const SessionPlot& plot, const ChartStyle& style, double width) {
    const Colours& colours = style.colours;
    const auto count = static_cast<double>(std::max<std::size_t>(plot.trials.size(), 1));
    const double step = (width - plot.labelWidth) / count;
    std::vector<double> columns;
    for (std::size_t i = 0; i < plot.trials.size(); ++i)
        columns.push_back(plot.labelWidth + (static_cast<double>(i) + 0.5) * step);

    for (const int after : plot.breaksAfter) {
        const double x = plot.labelWidth + after * step;
        QPen pen(colours.ink3, 1);
        pen.setDashPattern({1, 3});
        painter.setPen(pen);
        painter.drawLine(QPointF(x, 0), QPointF(x, hasTimes(plot) ? kBottom : 2 * kMarksAt));
    }
    painter.setFont(style.text);
    painter.setPen(colours.ink);
    painter.drawText(QPointF(0, kMarksAt + 4), plot.trialLabel);
    const double mark = std::clamp(step * 0.72, 3.0, 9.0);
    for (std::size_t i = 0; i < plot.trials.size(); ++i) {
        painter.setPen(Qt::NoPen);
        painter.setBrush(colours.ink2);
        painter.drawPath(trialMark(plot.trials[i].kind, mark).translated(columns[i], kMarksAt));
    }
    if (hasTimes(plot))
        paintTimes(painter, plot, style, width, columns);
    paintKey(painter, plot, style);
}

QString sessionImage(const SessionPlot& plot, const ChartStyle& style, double width, const QString& name) {
    return vectorImage({width, plot.height()}, name,
                       [&](QPainter& painter) { paintSession(painter, plot, style, width); });
}

} // namespace whichway
