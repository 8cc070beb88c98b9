// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/charts/interval_chart.h"

#include "ui/charts/vector_image.h"

#include <QChart>
#include <QGraphicsItem>
#include <QLineSeries>
#include <QLogValueAxis>
#include <QPainter>
#include <QValueAxis>
#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

constexpr double kHead = 22, kFoot = 22, kSide = 14;
constexpr double kTick = 4.5, kDot = 4.2;

bool hasHead(const IntervalPlot& plot) {
    return !plot.below.isEmpty() || !plot.above.isEmpty() || !plot.referenceText.isEmpty() ||
           !plot.bandText.isEmpty();
}

/// Draws rows, ticks and headings by the chart's own mapping, so that ends are exact in any format. Lives as
/// a child of the chart.
class IntervalItem final : public QGraphicsItem {
public:
    IntervalItem(QChart* chart, QAbstractSeries* series, IntervalPlot plot, ChartStyle style)
        : QGraphicsItem(chart), chart_(chart), series_(series), plot_(std::move(plot)),
          style_(std::move(style)) {
        setZValue(20);
    }

    QRectF boundingRect() const override { return chart_->rect(); }

    void paint(QPainter* painter, const QStyleOptionGraphicsItem*, QWidget*) override {
        paintGround(*painter);
        for (std::size_t i = 0; i < plot_.rows.size(); ++i)
            paintRow(*painter, plot_.rows[i], rowCentre(i));
    }

private:
    double across(double value) const {
        return chart_->mapToPosition({std::clamp(value, plot_.from, plot_.to), 0.5}, series_).x();
    }
    QRectF area() const { return chart_->plotArea(); }
    double rowCentre(std::size_t row) const {
        return area().top() + (static_cast<double>(row) + 0.5) * plot_.rowHeight;
    }

    void paintGround(QPainter& painter) const {
        const Colours& colours = style_.colours;
        painter.setFont(style_.label);
        if (plot_.band) {
            QColor soft = colours.ref;
            soft.setAlpha(50);
            const double left = across(plot_.band->first), right = across(plot_.band->second);
            const QRectF band(left, area().top(), std::max(right - left, 2.0), area().height());
            painter.fillRect(band, soft);
            centred(painter, band.center().x(), area().top() - 8, plot_.bandText);
        }
        for (const IntervalPlot::Tick& tick : plot_.ticks) {
            const double x = across(tick.at);
            painter.setPen(QPen(colours.line, 1));
            painter.drawLine(QPointF(x, area().top()), QPointF(x, area().bottom()));
            centred(painter, x, area().bottom() + 15, tick.text);
        }
        if (!plot_.reference)
            return;
        const double x = across(*plot_.reference);
        QPen pen(colours.edge, 1.2);
        if (plot_.dashedReference)
            pen.setDashPattern({4, 3});
        painter.setPen(pen);
        painter.drawLine(QPointF(x, area().top()), QPointF(x, area().bottom()));
        centred(painter, x, area().top() - 8, plot_.referenceText);
        painter.setPen(colours.ink3);
        painter.drawText(QPointF(x + 8, area().top() - 8), plot_.above);
        const double width = QFontMetricsF(style_.label).horizontalAdvance(plot_.below);
        painter.drawText(QPointF(x - 8 - width, area().top() - 8), plot_.below);
    }

    void centred(QPainter& painter, double x, double baseline, const QString& text) const {
        if (text.isEmpty())
            return;
        painter.setPen(style_.colours.ink3);
        const double width = QFontMetricsF(style_.label).horizontalAdvance(text);
        const double left = std::clamp(x - width / 2, 0.0, std::max(0.0, chart_->rect().width() - width));
        painter.drawText(QPointF(left, baseline), text);
    }

    void paintRow(QPainter& painter, const IntervalPlot::Row& row, double y) const {
        const Colours& colours = style_.colours;
        const QColor colour = !row.determined ? colours.ref : (row.isSecond ? colours.ink2 : colours.accent);
        const double low = across(row.low), high = across(row.high);
        painter.setPen(QPen(colour, 1.5));
        painter.drawLine(QPointF(low, y), QPointF(high, y));
        // An end that the axis cuts off has no tick.
        if (row.low >= plot_.from)
            painter.drawLine(QPointF(low, y - kTick), QPointF(low, y + kTick));
        if (row.high <= plot_.to)
            painter.drawLine(QPointF(high, y - kTick), QPointF(high, y + kTick));
        painter.setBrush(row.determined ? QBrush(colour) : QBrush(colours.raised));
        painter.drawEllipse(QPointF(across(row.median), y), kDot, kDot);

        painter.setFont(style_.text);
        painter.setPen(colours.ink);
        const QStringList lines = linesOf(row.label);
        for (qsizetype i = 0; i < lines.size(); ++i)
            painter.drawText(QPointF(0, y + 4 + (static_cast<double>(i) - 0.5 * (lines.size() - 1)) * 13),
                             lines[i]);
        if (row.value.isEmpty())
            return;
        painter.setFont(style_.label);
        painter.setPen(colours.ink2);
        painter.drawText(QPointF(chart_->rect().right() - plot_.valueWidth + 10, y + 4), row.value);
    }

    /// A name that is too long for its room takes two lines; what is longer still is cut short.
    QStringList linesOf(const QString& label) const {
        const QFontMetricsF metrics(style_.text);
        if (metrics.horizontalAdvance(label) <= plot_.labelWidth)
            return {label};
        const QStringList words = label.split(QLatin1Char(' '));
        QString first = words.front();
        qsizetype used = 1;
        while (used < words.size() &&
               metrics.horizontalAdvance(first + QLatin1Char(' ') + words[used]) <= plot_.labelWidth)
            first += QLatin1Char(' ') + words[used++];
        const auto cut = [&](const QString& line) {
            return metrics.elidedText(line, Qt::ElideRight, plot_.labelWidth);
        };
        if (used == words.size())
            return {cut(first)};
        return {cut(first), cut(words.mid(used).join(QLatin1Char(' ')))};
    }

    QChart* chart_;
    QAbstractSeries* series_;
    IntervalPlot plot_;
    ChartStyle style_;
};

} // namespace

double IntervalPlot::height() const {
    return (hasHead(*this) ? kHead : 4) + static_cast<double>(rows.size()) * rowHeight +
           (ticks.empty() ? 4 : kFoot);
}

std::unique_ptr<QChart> makeIntervalChart(const IntervalPlot& plot, const ChartStyle& style, double width) {
    auto chart = std::make_unique<QChart>();
    chart->setBackgroundVisible(false);
    chart->legend()->hide();
    chart->resize(width, plot.height());
    const double head = hasHead(plot) ? kHead : 4;
    chart->setPlotArea({plot.labelWidth + kSide, head, width - plot.labelWidth - plot.valueWidth - 2 * kSide,
                        static_cast<double>(plot.rows.size()) * plot.rowHeight});

    auto* series = new QLineSeries(chart.get()); // gives the mapping; nothing of it is drawn
    chart->addSeries(series);
    QAbstractAxis* along = nullptr;
    if (plot.logarithmic) {
        along = new QLogValueAxis(chart.get());
    } else {
        along = new QValueAxis(chart.get());
    }
    auto* rows = new QValueAxis(chart.get());
    along->setRange(plot.from, plot.to);
    rows->setRange(0, 1);
    chart->addAxis(along, Qt::AlignBottom);
    chart->addAxis(rows, Qt::AlignLeft);
    series->attachAxis(along);
    series->attachAxis(rows);
    along->setVisible(false);
    rows->setVisible(false);
    new IntervalItem(chart.get(), series, plot, style); // the chart owns its child
    return chart;
}

QString intervalImage(const IntervalPlot& plot, const ChartStyle& style, double width, const QString& name) {
    const auto chart = makeIntervalChart(plot, style, width);
    return vectorImage(*chart, {width, plot.height()}, name);
}

} // namespace whichway
