// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/charts/course_chart.h"
#include "ui/charts/interval_chart.h"
#include "ui/charts/session_chart.h"
#include "ui/charts/vector_image.h"

#include <QChart>
#include <QImage>
#include <QPainter>
#include <QRegularExpression>
#include <QSvgRenderer>
#include <QXmlStreamReader>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

IntervalPlot plotOf(double median, double low, double high, bool determined = true) {
    IntervalPlot plot{.from = 0, .to = 10, .reference = 5.0, .labelWidth = 100};
    plot.ticks = {{.at = 0, .text = QStringLiteral("0")}, {.at = 10, .text = QStringLiteral("10")}};
    plot.rows = {{.label = QStringLiteral("Row"),
                  .median = median,
                  .low = low,
                  .high = high,
                  .determined = determined}};
    return plot;
}

/// The element names of a well-formed document; empty if it is not well-formed.
QStringList elementsOf(const QString& xml) {
    QXmlStreamReader reader(xml);
    QStringList names;
    while (!reader.atEnd())
        if (reader.readNext() == QXmlStreamReader::StartElement)
            names << reader.name().toString();
    return reader.hasError() ? QStringList() : names;
}

constexpr int kScale = 4; // so that lines cover whole pixels

QImage pixelsOf(const QString& svg) {
    QSvgRenderer renderer(svg.toUtf8());
    QImage image(renderer.defaultSize() * kScale, QImage::Format_ARGB32);
    image.fill(Qt::white);
    QPainter painter(&image);
    renderer.render(&painter);
    return image;
}

/// Leftmost and rightmost place of about that colour at a height, in the chart's px; -1 if there is none.
std::pair<double, double> extentOf(const QImage& image, double y, const QColor& colour) {
    std::pair<double, double> extent{-1, -1};
    for (int x = 0; x < image.width(); ++x) {
        const QColor pixel = image.pixelColor(x, static_cast<int>(y * kScale));
        if (std::abs(pixel.red() - colour.red()) + std::abs(pixel.green() - colour.green()) +
                std::abs(pixel.blue() - colour.blue()) <
            60) {
            extent.first = extent.first < 0 ? static_cast<double>(x) / kScale : extent.first;
            extent.second = static_cast<double>(x) / kScale;
        }
    }
    return extent;
}

QColor colourAt(const QImage& image, double x, double y) {
    return image.pixelColor(static_cast<int>(x * kScale), static_cast<int>(y * kScale));
}

TEST(VectorImage, IsOneWellFormedElementWithAName) {
    const QString svg = vectorImage({100, 50}, QStringLiteral("a <b> & \"c\""), [](QPainter& painter) {
        painter.drawText(QPointF(10, 20), QStringLiteral("x < y & z"));
    });
    const QStringList elements = elementsOf(svg);
    ASSERT_FALSE(elements.isEmpty()) << svg.toStdString();
    EXPECT_EQ(elements.first(), QStringLiteral("svg"));
    EXPECT_EQ(elements.count(QStringLiteral("text")), 1);
    EXPECT_FALSE(elements.contains(QStringLiteral("title")));
    EXPECT_TRUE(svg.startsWith(QStringLiteral("<svg ")));
    EXPECT_FALSE(svg.contains(QStringLiteral("href")));
    EXPECT_FALSE(svg.contains(QStringLiteral("font-family")));
}

TEST(VectorImage, StaysWellFormedWhateverIsWritten) {
    const QString svg = vectorImage({100, 50}, QString(QChar(0x01)), [](QPainter& painter) {
        painter.drawText(QPointF(10, 20), QStringLiteral("a") + QChar(0x0b) + QStringLiteral("<b>"));
    });
    EXPECT_FALSE(elementsOf(svg).isEmpty()) << svg.toStdString();
}

TEST(VectorImage, KeepsAMinusWithItsDigits) {
    const QString svg = vectorImage({100, 50}, QStringLiteral("minus"), [](QPainter& painter) {
        painter.setFont(paperStyle().label);
        painter.drawText(QPointF(10, 20), QStringLiteral("\u22120.5"));
    });
    EXPECT_TRUE(svg.contains(QStringLiteral("\u22120.5</text>"))) << svg.toStdString();
}

TEST(IntervalChart, EndsWhereTheIntervalEndsInScreenAndPrint) {
    const IntervalPlot plot = plotOf(5, 2, 8);
    const auto chart = makeIntervalChart(plot, paperStyle(), 400);
    const QRectF area = chart->plotArea();
    const QImage image = pixelsOf(intervalImage(plot, paperStyle(), 400, QStringLiteral("Interval")));
    const double y = area.center().y();
    const auto [left, right] = extentOf(image, y, paperStyle().colours.accent);
    EXPECT_NEAR(left, area.left() + 0.2 * area.width(), 1.5);
    EXPECT_NEAR(right, area.left() + 0.8 * area.width(), 1.5);
}

TEST(IntervalChart, MapsLogarithmically) {
    IntervalPlot plot = plotOf(2, 1, 4);
    plot.from = 0.5;
    plot.to = 8;
    plot.logarithmic = true;
    plot.reference.reset();
    plot.ticks.clear();
    const QRectF area = makeIntervalChart(plot, paperStyle(), 400)->plotArea();
    const QImage image = pixelsOf(intervalImage(plot, paperStyle(), 400, QStringLiteral("Interval")));
    const auto [left, right] = extentOf(image, area.center().y(), paperStyle().colours.accent);
    EXPECT_NEAR(left, area.left() + 0.25 * area.width(), 1.5);
    EXPECT_NEAR(right, area.left() + 0.75 * area.width(), 1.5);
}

TEST(IntervalChart, DrawsAHollowGreyDotWhereTheSignIsNotDetermined) {
    const IntervalPlot plot = plotOf(6, 2, 8, false);
    const QRectF area = makeIntervalChart(plot, paperStyle(), 400)->plotArea();
    const QImage image = pixelsOf(intervalImage(plot, paperStyle(), 400, QStringLiteral("Interval")));
    const double y = area.center().y();
    EXPECT_EQ(extentOf(image, y, paperStyle().colours.accent).first, -1);
    const QColor middle = colourAt(image, area.left() + 0.6 * area.width(), y);
    EXPECT_GT(middle.lightness(), 230) << "hollow";
}

TEST(IntervalChart, CutsOffWhatLiesBeyondItsAxis) {
    const IntervalPlot plot = plotOf(5, -1000, 1000);
    const QRectF area = makeIntervalChart(plot, paperStyle(), 400)->plotArea();
    const QImage image = pixelsOf(intervalImage(plot, paperStyle(), 400, QStringLiteral("Interval")));
    const auto [left, right] = extentOf(image, area.center().y(), paperStyle().colours.accent);
    EXPECT_NEAR(left, area.left(), 1.5);
    EXPECT_NEAR(right, area.right(), 1.5);
}

TEST(IntervalChart, WritesALongNameInTwoLines) {
    IntervalPlot plot = plotOf(5, 2, 8);
    plot.rows[0].label = QStringLiteral("Closest distance to a person");
    const QString svg = intervalImage(plot, paperStyle(), 400, QStringLiteral("Interval"));
    EXPECT_FALSE(svg.contains(QStringLiteral("Closest distance to a person")));
    EXPECT_TRUE(svg.contains(QStringLiteral(">person<")) || svg.contains(QStringLiteral("a person<")))
        << svg.toStdString();
}

TEST(CourseChart, DrawsTheBandBehindTheLine) {
    CoursePlot plot{.heading = QStringLiteral("Travel time"), .lastAnswer = 40};
    plot.points = {{.answers = 5, .median = 0, .low = -0.5, .high = 0.5},
                   {.answers = 40, .median = 0, .low = -0.5, .high = 0.5}};
    plot.ticks = {-1, 0, 1};
    plot.zeroLine = false;
    const auto chart = makeCourseChart(plot, paperStyle(), {200, 120});
    const QRectF area = chart->plotArea();
    const QImage image = pixelsOf(courseImage(plot, paperStyle(), {200, 120}, QStringLiteral("Course")));
    const double x = area.center().x(), zero = area.center().y();
    const QColor line = colourAt(image, x, zero), band = colourAt(image, x, zero - 10),
                 beyond = colourAt(image, x, area.top() + 4);
    EXPECT_LT(line.lightness(), band.lightness());
    EXPECT_LT(band.lightness(), beyond.lightness());
}

TEST(CourseChart, OfNoPointsIsJustItsGround) {
    const CoursePlot plot{.heading = QStringLiteral("Nothing"), .lastAnswer = 5};
    EXPECT_FALSE(elementsOf(courseImage(plot, paperStyle(), {200, 120}, QStringLiteral("Course"))).isEmpty());
}

TEST(SessionChart, ShowsATimeOnlyWhereItIsKnown) {
    SessionPlot plot{.timeLabel = QStringLiteral("Response time, s"), .trialLabel = QStringLiteral("Trials")};
    for (const TrialKind kind : {TrialKind::Practice, TrialKind::Main, TrialKind::HeldOut, TrialKind::Repeat,
                                 TrialKind::Catch, TrialKind::Identical})
        plot.trials.push_back({.kind = kind});
    const double without = plot.height();
    const QString marks = sessionImage(plot, paperStyle(), 600, QStringLiteral("Session"));
    EXPECT_FALSE(marks.contains(QStringLiteral("Response")));
    EXPECT_TRUE(marks.contains(QStringLiteral("held-out")));
    plot.trials[1].seconds = 3;
    plot.trials[2] = {.kind = TrialKind::HeldOut, .seconds = 0.2, .flagged = true};
    EXPECT_GT(plot.height(), without);
    const QString times = sessionImage(plot, paperStyle(), 600, QStringLiteral("Session"));
    EXPECT_TRUE(times.contains(QStringLiteral("Response")));
    EXPECT_TRUE(times.contains(paperStyle().colours.warn.name())) << "the quick answer is ringed";
    EXPECT_FALSE(elementsOf(times).isEmpty());
}

TEST(SessionChart, OfNoTrialsIsEmpty) {
    EXPECT_FALSE(elementsOf(sessionImage({}, paperStyle(), 600, QStringLiteral("Session"))).isEmpty());
}

} // namespace
