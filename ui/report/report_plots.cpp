// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/report_plots.h"

#include "ui/look/numbers.h"
#include "ui/report/report_words.h"

#include <QCoreApplication>
#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

struct Words {
    Q_DECLARE_TR_FUNCTIONS(ReportPlots)
};

constexpr double kNames = 128; // px, for the names of features

double certaintyOf(const WeightFinding& weight) {
    return std::max(weight.positive, 1 - weight.positive);
}

/// Powers of two that hold [low, high], at least two steps.
std::pair<double, double> doublingsAround(double low, double high) {
    double from = std::exp2(std::floor(std::log2(std::max(low, 1e-3))));
    double to = std::exp2(std::ceil(std::log2(std::max(high, 2e-3))));
    while (to < 4 * from) {
        to *= 2;
        from /= 2;
    }
    return {from, to};
}

/// At most 5 ticks, each a power of two.
std::vector<double> doublingTicks(std::pair<double, double> ends) {
    const int steps = static_cast<int>(std::lround(std::log2(ends.second / ends.first)));
    const int stride = (steps + 4) / 5;
    std::vector<double> ticks;
    for (int i = 0; i <= steps; i += stride)
        ticks.push_back(ends.first * std::exp2(i));
    return ticks;
}

QString signed1(double value) {
    return value > 0 ? QLatin1Char('+') + numberText(value, 1) : numberText(value, value == 0 ? 0 : 1);
}

} // namespace

IntervalPlot weightsPlot(const Protocol& protocol, const WeightFindings& weights) {
    double furthest = 0.5;
    for (const WeightFinding& weight : weights.features)
        furthest = std::max({furthest, -weight.direction.low, weight.direction.high});
    const double end = std::min(1.0, std::ceil(furthest * 10) / 10);
    IntervalPlot plot{.from = -end, .to = end, .reference = 0.0, .labelWidth = kNames, .rowHeight = 29};
    plot.below = Words::tr("rather less");
    plot.above = Words::tr("rather more");
    for (const double at : {-1.0, -0.5, 0.0, 0.5, 1.0})
        if (std::abs(at) <= end)
            plot.ticks.push_back({.at = at, .text = signed1(at)});
    for (const WeightFinding& weight : weights.features)
        plot.rows.push_back({.label = labelOf(protocol, weight.feature),
                             .median = weight.direction.median,
                             .low = weight.direction.low,
                             .high = weight.direction.high,
                             .determined = certaintyOf(weight) >= kSignDetermined});
    return plot;
}

IntervalPlot sensitivityPlot(const WeightFindings& weights) {
    const auto ends = doublingsAround(weights.sensitivity.low, weights.sensitivity.high);
    IntervalPlot plot{.from = ends.first, .to = ends.second, .logarithmic = true, .labelWidth = kNames};
    for (const double at : doublingTicks(ends))
        plot.ticks.push_back({.at = at, .text = QString::number(at)});
    plot.rows.push_back({.label = Words::tr("Sensitivity"),
                         .median = weights.sensitivity.median,
                         .low = weights.sensitivity.low,
                         .high = weights.sensitivity.high});
    return plot;
}

IntervalPlot predictionPlot(const SessionFindings& findings) {
    IntervalPlot plot{.from = 0, .to = 1, .reference = 0.5, .dashedReference = true, .labelWidth = 118};
    plot.referenceText = Words::tr("guessing");
    for (const double at : {0.0, 0.5, 1.0})
        plot.ticks.push_back({.at = at, .text = QString::number(100 * at) + Words::tr("\u00a0%")});
    const Prediction& prediction = findings.prediction;
    if (prediction.reachable) {
        plot.band = {prediction.reachable->low, prediction.reachable->high};
        plot.bandText = Words::tr("reachable");
    }
    const auto add = [&](const QString& label, const Share& share, bool isSecond) {
        if (share.of == 0)
            return;
        const Interval interval = exactProportion(share.count, share.of);
        plot.rows.push_back(
            {.label = Words::tr("%1, %2 of %3")
                          .arg(label, QString::number(share.count), QString::number(share.of)),
             .median = interval.median,
             .low = interval.low,
             .high = interval.high,
             .isSecond = isSecond});
    };
    add(Words::tr("Held-out"), prediction.heldOut, false);
    add(Words::tr("Repeats"), findings.consistency.repeats, true);
    return plot;
}

SessionPlot sessionPlot(const SessionState& state, const Consistency& consistency) {
    SessionPlot plot{.timeLabel = Words::tr("Response\ntime, s"), .trialLabel = Words::tr("Trials")};
    for (const AnsweredTrial& answer : state.answers) {
        const bool quick = answer.kind != TrialKind::Practice && answer.responseTime >= 0 &&
                           answer.responseTime < consistency.quickBelow;
        plot.trials.push_back({.kind = answer.kind, .seconds = answer.responseTime, .flagged = quick});
    }
    return plot;
}

std::vector<CoursePlot> coursePlots(const Protocol& protocol, const SessionFindings& findings) {
    std::vector<CoursePlot> plots;
    const auto plotOf = [&](const QString& heading, auto intervalAt) {
        CoursePlot plot{.heading = heading, .lastAnswer = static_cast<double>(findings.mainAnswers)};
        for (const CoursePoint& point : findings.course) {
            const Interval& interval = intervalAt(point);
            plot.points.push_back({.answers = static_cast<double>(point.answers),
                                   .median = interval.median,
                                   .low = interval.low,
                                   .high = interval.high});
        }
        return plot;
    };
    for (std::size_t j = 0; j < protocol.features.size(); ++j) {
        CoursePlot plot =
            plotOf(labelOf(protocol, protocol.features[j].name),
                   [j](const CoursePoint& point) -> const Interval& { return point.direction[j]; });
        plot.ticks = {-1, 0, 1};
        plot.tickTexts = {numberText(-1, 0), QStringLiteral("0"), QStringLiteral("+1")};
        plots.push_back(std::move(plot));
    }
    CoursePlot sensitivity =
        plotOf(Words::tr("Sensitivity"),
               [](const CoursePoint& point) -> const Interval& { return point.sensitivity; });
    double low = 1e9, high = 0;
    for (const CoursePlot::Point& point : sensitivity.points) {
        low = std::min(low, point.low);
        high = std::max(high, point.high);
    }
    const auto ends = doublingsAround(low, high);
    sensitivity.from = ends.first;
    sensitivity.to = ends.second;
    sensitivity.logarithmic = true;
    sensitivity.zeroLine = false;
    const std::vector<double> ticks = doublingTicks(ends);
    sensitivity.ticks = {ticks.front(), ticks[ticks.size() / 2], ticks.back()};
    for (const double tick : sensitivity.ticks)
        sensitivity.tickTexts << QString::number(tick);
    plots.push_back(std::move(sensitivity));
    return plots;
}

} // namespace whichway
