// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/charts/course_chart.h"

#include "ui/charts/vector_image.h"

#include <QAreaSeries>
#include <QChart>
#include <QGraphicsItem>
#include <QLineSeries>
#include <QLogValueAxis>
#include <QPainter>
#include <QValueAxis>
#include <algorithm>

namespace whichway {
namespace {

constexpr double kHead = 26, kFoot = 18, kLeft = 26, kRight = 8;
constexpr int kBandAlpha = 36;

/// Heading, grid and tick texts; the curves are the chart's own.
class CourseGround final : public QGraphicsItem {
public:
    CourseGround(QChart* chart, QAbstractSeries* series, CoursePlot plot, ChartStyle style)
        : QGraphicsItem(chart), chart_(chart), series_(series), plot_(std::move(plot)),
          style_(std::move(style)) {
        setZValue(-1);
    }

    QRectF boundingRect() const override { return chart_->rect(); }

    void paint(QPainter* painter, const QStyleOptionGraphicsItem*, QWidget*) override {
        const QRectF area = chart_->plotArea();
        const QFontMetricsF metrics(style_.label);
        painter->setFont(style_.label);
        painter->setPen(style_.colours.ink);
        painter->drawText(
            QPointF(0, 12),
            QFontMetricsF(style_.label).elidedText(plot_.heading, Qt::ElideRight, chart_->rect().width()));
        painter->setFont(style_.label);
        for (std::size_t i = 0; i < plot_.ticks.size(); ++i) {
            const double y = chart_->mapToPosition({0, plot_.ticks[i]}, series_).y();
            const bool isZero = plot_.zeroLine && plot_.ticks[i] == 0;
            painter->setPen(QPen(isZero ? style_.colours.edge : style_.colours.line, isZero ? 1.2 : 1));
            painter->drawLine(QPointF(area.left(), y), QPointF(area.right(), y));
            const QString text = plot_.tickTexts.value(static_cast<qsizetype>(i));
            painter->setPen(style_.colours.ink3);
            painter->drawText(QPointF(area.left() - 5 - metrics.horizontalAdvance(text), y + 4), text);
        }
        for (const double answers : {0.0, plot_.lastAnswer}) {
            const QString text = QString::number(answers);
            const double x = chart_->mapToPosition({answers, plot_.from}, series_).x();
            painter->drawText(QPointF(x - metrics.horizontalAdvance(text) / 2, area.bottom() + 14), text);
        }
    }

private:
    QChart* chart_;
    QAbstractSeries* series_;
    CoursePlot plot_;
    ChartStyle style_;
};

} // namespace

std::unique_ptr<QChart> makeCourseChart(const CoursePlot& plot, const ChartStyle& style, const QSizeF& size) {
    auto chart = std::make_unique<QChart>();
    chart->setBackgroundVisible(false);
    chart->legend()->hide();
    chart->resize(size);
    chart->setPlotArea({kLeft, kHead, size.width() - kLeft - kRight, size.height() - kHead - kFoot});

    auto* medians = new QLineSeries(chart.get());
    auto* lows = new QLineSeries(chart.get());
    auto* highs = new QLineSeries(chart.get());
    for (const CoursePlot::Point& point : plot.points) {
        medians->append(point.answers, std::clamp(point.median, plot.from, plot.to));
        lows->append(point.answers, std::clamp(point.low, plot.from, plot.to));
        highs->append(point.answers, std::clamp(point.high, plot.from, plot.to));
    }
    auto* band = new QAreaSeries(highs, lows);
    QColor soft = style.colours.accent;
    soft.setAlpha(kBandAlpha);
    band->setBrush(soft);
    band->setPen(Qt::NoPen);
    medians->setPen(QPen(style.colours.accent, 1.6));
    chart->addSeries(band);
    chart->addSeries(medians);

    QAbstractAxis* values = nullptr;
    if (plot.logarithmic) {
        values = new QLogValueAxis(chart.get());
    } else {
        values = new QValueAxis(chart.get());
    }
    auto* answers = new QValueAxis(chart.get());
    values->setRange(plot.from, plot.to);
    answers->setRange(0, plot.lastAnswer);
    chart->addAxis(answers, Qt::AlignBottom);
    chart->addAxis(values, Qt::AlignLeft);
    for (QAbstractSeries* series :
         {static_cast<QAbstractSeries*>(band), static_cast<QAbstractSeries*>(medians)}) {
        series->attachAxis(answers);
        series->attachAxis(values);
    }
    answers->setVisible(false);
    values->setVisible(false);
    new CourseGround(chart.get(), medians, plot, style); // the chart owns its child
    return chart;
}

QString courseImage(const CoursePlot& plot, const ChartStyle& style, const QSizeF& size,
                    const QString& name) {
    const auto chart = makeCourseChart(plot, style, size);
    return vectorImage(*chart, size, name);
}

} // namespace whichway
