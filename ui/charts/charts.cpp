// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/charts/charts.h"

#include <QBuffer>
#include <QGraphicsLayout>
#include <QGraphicsScene>
#include <QPainter>
#include <QSvgGenerator>
#include <QtCharts/QAreaSeries>
#include <QtCharts/QLineSeries>
#include <QtCharts/QLogValueAxis>
#include <QtCharts/QScatterSeries>
#include <QtCharts/QValueAxis>
#include <algorithm>
#include <array>
#include <cmath>

namespace whichway {
namespace {

constexpr double kBandOpacity = 0.14;
constexpr double kTick = 4; // half the height of an end tick, px

/// Draws the dimension lines over a chart whose axes run over the values and over the rows. The chart library
/// has no error bars; mapping its coordinates keeps the intervals exact in every output.
class IntervalItem final : public QGraphicsItem {
public:
    IntervalItem(QChart* chart, QAbstractSeries* series, std::vector<IntervalRow> rows, IntervalAxis axis,
                 Colours colours)
        : QGraphicsItem(chart), chart_(chart), series_(series), rows_(std::move(rows)),
          axis_(std::move(axis)), colours_(std::move(colours)) {
        setZValue(10);
    }

    QRectF boundingRect() const override { return chart_->rect(); }

    void paint(QPainter* painter, const QStyleOptionGraphicsItem*, QWidget*) override {
        painter->setRenderHint(QPainter::Antialiasing);
        const QRectF area = chart_->plotArea();
        painter->setFont(fontOf(TextRole::Label));
        if (!axis_.logarithmic) {
            const double x = at(axis_.reference, 0).x();
            painter->setPen(QPen(colours_.edge, 1.2));
            painter->drawLine(QPointF(x, area.top()), QPointF(x, area.bottom()));
            painter->setPen(colours_.ink3);
            const double top = area.top() - 18;
            painter->drawText(QRectF(x - 150, top, 144, 16), Qt::AlignRight | Qt::AlignVCenter,
                              axis_.lessWord);
            painter->drawText(QRectF(x + 6, top, 144, 16), Qt::AlignLeft | Qt::AlignVCenter, axis_.moreWord);
        }
        for (std::size_t i = 0; i < rows_.size(); ++i)
            paintRow(*painter, area, rows_[i], static_cast<double>(rows_.size() - i));
    }

private:
    QPointF at(double value, double row) const {
        const double inside = std::clamp(value, axis_.least, axis_.greatest);
        return chart_->mapToPosition(QPointF(inside, row), series_);
    }

    void paintRow(QPainter& painter, const QRectF& area, const IntervalRow& row, double y) const {
        const QPointF low = at(row.low, y), median = at(row.median, y), high = at(row.high, y);
        painter.setPen(colours_.ink);
        painter.drawText(QRectF(0, low.y() - 10, area.left() - 10, 20), Qt::AlignRight | Qt::AlignVCenter,
                         row.label);
        const QColor colour = row.determined ? colours_.accent : colours_.ink3;
        painter.setPen(QPen(colour, 1.5, Qt::SolidLine, Qt::FlatCap));
        painter.drawLine(low, high);
        for (const QPointF& end : {low, high})
            painter.drawLine(end - QPointF(0, kTick), end + QPointF(0, kTick));
        painter.setBrush(row.determined ? QBrush(colour) : QBrush(colours_.sheet));
        painter.drawEllipse(median, 3.5, 3.5);
    }

    QChart* chart_;
    QAbstractSeries* series_;
    std::vector<IntervalRow> rows_;
    IntervalAxis axis_;
    Colours colours_;
};

std::unique_ptr<QChart> plainChart(const Colours& colours) {
    auto chart = std::make_unique<QChart>();
    chart->setBackgroundVisible(false);
    chart->setDropShadowEnabled(false);
    chart->legend()->hide();
    chart->setMargins({0, 0, 0, 0});
    chart->setPlotAreaBackgroundVisible(false);
    chart->setTitleBrush(colours.ink);
    return chart;
}

void dress(QAbstractAxis& axis, const Colours& colours, bool grid) {
    axis.setLabelsColor(colours.ink3);
    axis.setLabelsFont(fontOf(TextRole::Label));
    axis.setLinePen(QPen(colours.line, 1));
    axis.setGridLineVisible(grid);
    axis.setGridLinePen(QPen(colours.line, 1));
}

QPen penOf(std::size_t index, const Colours& colours) {
    const std::array<QColor, 4> shades = {colours.accent, colours.series2, colours.series3, colours.series4};
    QPen pen(shades[index % shades.size()], 2);
    pen.setCapStyle(Qt::FlatCap);
    const std::array<QVector<qreal>, 4> dashes = {QVector<qreal>{}, {7, 4}, {2, 3}, {9, 3, 2, 3}};
    if (!dashes[index % 4].isEmpty())
        pen.setDashPattern(dashes[index % 4]);
    return pen;
}

} // namespace

std::unique_ptr<QChart> intervalsChart(const std::vector<IntervalRow>& rows, const IntervalAxis& axis,
                                       const Colours& colours) {
    auto chart = plainChart(colours);
    chart->setMargins({190, 18, 12, 0});
    // An empty series carries the axes; the lines themselves are drawn over it.
    auto* series = new QScatterSeries;
    chart->addSeries(series);
    QAbstractAxis* across = nullptr;
    if (axis.logarithmic) {
        auto* log = new QLogValueAxis;
        log->setBase(2);
        log->setRange(axis.least, axis.greatest);
        log->setLabelFormat(QStringLiteral("%g"));
        across = log;
    } else {
        auto* value = new QValueAxis;
        value->setRange(axis.least, axis.greatest);
        value->setTickCount(5);
        value->setLabelFormat(QStringLiteral("%+.2g"));
        across = value;
    }
    dress(*across, colours, true);
    auto* down = new QValueAxis;
    down->setRange(0.4, static_cast<double>(rows.size()) + 0.6);
    down->setVisible(false);
    chart->addAxis(across, Qt::AlignBottom);
    chart->addAxis(down, Qt::AlignLeft);
    series->attachAxis(across);
    series->attachAxis(down);
    auto* item = new IntervalItem(chart.get(), series, rows, axis, colours);
    QObject::connect(chart.get(), &QChart::plotAreaChanged, chart.get(), [item] { item->update(); });
    return chart;
}

std::unique_ptr<QChart> curvesChart(const std::vector<Curve>& curves, double least, double greatest,
                                    const QString& acrossLabel, const Colours& colours) {
    auto chart = plainChart(colours);
    auto* across = new QValueAxis;
    auto* up = new QValueAxis;
    double first = 1e300, last = -1e300;
    for (const Curve& curve : curves)
        for (const CurvePoint& point : curve.points) {
            first = std::min(first, point.at);
            last = std::max(last, point.at);
        }
    across->setRange(std::min(first, last), std::max(last, first + 1));
    across->setLabelFormat(QStringLiteral("%.0f"));
    across->setTitleText(acrossLabel);
    across->setTitleBrush(colours.ink3);
    across->setTitleFont(fontOf(TextRole::Label));
    up->setRange(least, greatest);
    up->setLabelFormat(QStringLiteral("%.2g"));
    up->setTickCount(5);
    dress(*across, colours, false);
    dress(*up, colours, true);
    chart->addAxis(across, Qt::AlignBottom);
    chart->addAxis(up, Qt::AlignLeft);
    for (std::size_t i = 0; i < curves.size(); ++i) {
        auto* low = new QLineSeries;
        auto* high = new QLineSeries;
        auto* middle = new QLineSeries;
        for (const CurvePoint& point : curves[i].points) {
            low->append(point.at, std::clamp(point.low, least, greatest));
            high->append(point.at, std::clamp(point.high, least, greatest));
            middle->append(point.at, std::clamp(point.median, least, greatest));
        }
        auto* band = new QAreaSeries(high, low);
        low->setParent(band);
        high->setParent(band);
        const QPen pen = penOf(i, colours);
        QColor fill = pen.color();
        fill.setAlphaF(static_cast<float>(kBandOpacity));
        band->setBrush(fill);
        band->setPen(Qt::NoPen);
        middle->setPen(pen);
        for (QAbstractSeries* series : std::initializer_list<QAbstractSeries*>{band, middle}) {
            chart->addSeries(series);
            series->attachAxis(across);
            series->attachAxis(up);
        }
    }
    return chart;
}

QByteArray chartSvg(std::unique_ptr<QChart> chart, const QSizeF& size, const QString& description) {
    QByteArray svg;
    QBuffer buffer(&svg);
    buffer.open(QIODevice::WriteOnly);
    QSvgGenerator generator;
    generator.setOutputDevice(&buffer);
    generator.setSize(size.toSize());
    generator.setViewBox(QRectF(QPointF(0, 0), size));
    generator.setResolution(96);
    QGraphicsScene scene;
    QChart* const drawn = chart.release(); // the scene takes it over
    scene.addItem(drawn);
    drawn->setGeometry(QRectF(QPointF(0, 0), size));
    drawn->layout()->activate();
    scene.setSceneRect(QRectF(QPointF(0, 0), size));
    {
        QPainter painter(&generator);
        scene.render(&painter, QRectF(QPointF(0, 0), size), QRectF(QPointF(0, 0), size));
    }
    const qsizetype start = svg.indexOf("<svg");
    QByteArray element = start > 0 ? svg.mid(start) : svg;
    const QByteArray label = "<svg role=\"img\" aria-label=\"" + description.toHtmlEscaped().toUtf8() + "\"";
    element.replace(0, 4, label);
    return element;
}

} // namespace whichway
