// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/session_report.h"

#include "core/handover/cautions.h"
#include "core/handover/trial_table.h"
#include "core/handover/weights_file.h"
#include "ui/charts/charts.h"
#include "ui/look/numbers.h"
#include "ui/report/report_page.h"

#include <QStringList>
#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

QString text(const std::string& value) {
    return QString::fromStdString(value);
}

QString percent(double share) {
    return QStringLiteral("%1 %").arg(std::lround(100 * share));
}

QString of(const Share& share) {
    return QStringLiteral("%1 of %2").arg(share.count).arg(share.of);
}

/// "2026-03-03T14:02:11.250+01:00" as "3 March 2026, 14:02" would need a locale; the report keeps the ISO
/// form, shortened.
QString minuteOf(const std::string& time) {
    return text(time.substr(0, 10)) + QLatin1Char(' ') +
           text(time.size() >= 16 ? time.substr(11, 5) : std::string());
}

class Report {
public:
    Report(const SessionState& state, const SessionFindings& findings, const std::string& code)
        : state_(state), protocol_(state.began.protocol), found_(findings), code_(code) {}

    QByteArray make() {
        head();
        methods();
        page_.openColumns();
        page_.openColumn();
        weights();
        page_.nextColumn();
        tradeOffs();
        page_.closeColumns();
        course();
        page_.openColumns();
        page_.openColumn();
        consistency();
        page_.nextColumn();
        prediction();
        page_.closeColumns();
        motions();
        log();
        model();
        cautionLines();
        return page_.html(title(), text(state_.began.language));
    }

private:
    QString title() const {
        return code_.empty() ? QStringLiteral("One person's weights")
                             : QStringLiteral("Person %1").arg(text(code_));
    }

    void head() {
        page_.raw(QStringLiteral(
                      "<header><div><h1>%1</h1><p>%2</p></div><p class=\"side note\">%3<br/>Protocol %4, "
                      "version %5</p></header>")
                      .arg(title().toHtmlEscaped(), text(protocol_.title).toHtmlEscaped(),
                           (code_.empty() ? QString()
                                          : QStringLiteral("Session of %1 to %2")
                                                .arg(minuteOf(state_.firstTime), minuteOf(state_.lastTime)))
                               .toHtmlEscaped(),
                           text(protocol_.hash.substr(0, 8)).toHtmlEscaped(),
                           text(protocol_.version).toHtmlEscaped()));
        if (protocol_.invented)
            page_.paragraph(
                QStringLiteral("Invented data: this study demonstrates the program and shows nobody's "
                               "preferences."),
                QStringLiteral("mark"));
        if (state_.began.kind == SessionKind::Simulated)
            page_.paragraph(QStringLiteral("A simulated participant. Not for pooling or publication."),
                            QStringLiteral("mark"));
        if (state_.began.kind == SessionKind::Pilot)
            page_.paragraph(QStringLiteral("A pilot session. Not for pooling or publication."),
                            QStringLiteral("mark"));
        if (!found_.posterior.converged)
            page_.paragraph(
                QStringLiteral("Not converged: largest R-hat %1, least effective sample size %2. The "
                               "estimates below are not to be relied on.")
                    .arg(largestRHat(), 0, 'f', 3)
                    .arg(std::lround(leastEss())),
                QStringLiteral("mark"));
    }

    void methods() {
        const auto count = [&](TrialKind kind) { return state_.answered(kind); };
        page_.paragraph(
            QStringLiteral(
                "One participant compared pairs of motions from a library of %1, side by side: %2 main "
                "pairs, %3 held-out pairs, %4 repeats, %5 catch pairs and %6 identical pairs, after %7 "
                "practice pairs. Only the main pairs taught the weights. They were planned %8 while the "
                "participant watched; the longest wait was %9 s.")
                .arg(protocol_.table.motions.size())
                .arg(count(TrialKind::Main))
                .arg(count(TrialKind::HeldOut))
                .arg(count(TrialKind::Repeat))
                .arg(count(TrialKind::Catch))
                .arg(count(TrialKind::Identical))
                .arg(count(TrialKind::Practice))
                .arg(protocol_.planning.schedule == PlanSchedule::Rolling
                         ? QStringLiteral("anew after every answer")
                         : QStringLiteral("in fixed batches"))
                .arg(state_.longestWait, 0, 'f', 1));
        page_.paragraph(
            state_.estimateShown
                ? QStringLiteral("The experimenter asked to see the estimate during the session.")
                : QStringLiteral("The experimenter did not see the estimate during the session."));
    }

    void weights() {
        page_.heading(QStringLiteral("Weights"));
        std::vector<IntervalRow> rows;
        double reach = 0.5;
        for (std::size_t j = 0; j < protocol_.features.size(); ++j) {
            const WeightFinding& weight = found_.weights.features[j];
            rows.push_back({.label = text(protocol_.features[j].label),
                            .low = weight.direction.low,
                            .median = weight.direction.median,
                            .high = weight.direction.high,
                            .determined = std::max(weight.positive, 1 - weight.positive) >= 0.95});
            reach = std::max({reach, std::abs(weight.direction.low), std::abs(weight.direction.high)});
        }
        reach = std::ceil(reach * 10) / 10;
        const Colours& colours = coloursOf(Theme::Light);
        page_.raw(
            QString::fromUtf8(chartSvg(intervalsChart(rows,
                                                      {.least = -reach,
                                                       .greatest = reach,
                                                       .lessWord = QStringLiteral("rather less"),
                                                       .moreWord = QStringLiteral("rather more")},
                                                      colours),
                                       {470, 60 + 30.0 * static_cast<double>(rows.size())},
                                       QStringLiteral("Direction of the weights with 90 % intervals"))));
        page_.openTable(
            {QStringLiteral("Direction"), QStringLiteral("median"), QStringLiteral("90 % interval")});
        for (std::size_t j = 0; j < protocol_.features.size(); ++j) {
            const Interval& direction = found_.weights.features[j].direction;
            page_.row(
                {text(protocol_.features[j].label), numberText(direction.median, 2), range(direction, 2)});
        }
        page_.row({QStringLiteral("Sensitivity"), numberText(found_.weights.sensitivity.median, 2),
                   range(found_.weights.sensitivity, 2)});
        page_.closeTable();
        page_.paragraph(
            QStringLiteral("Per standard deviation of each feature, as a unit vector; the sensitivity is "
                           "its length and says how reliably the answers follow it. Hollow: the sign is "
                           "less than 95 % certain."),
            QStringLiteral("note"));
    }

    static QString range(const Interval& interval, int decimals) {
        return QStringLiteral("%1 to %2")
            .arg(numberText(interval.low, decimals), numberText(interval.high, decimals));
    }

    void tradeOffs() {
        page_.heading(QStringLiteral("Trade-offs, paid in %1").arg(labelOf(protocol_.numeraire).toLower()));
        for (const TradeOff& tradeOff : found_.tradeOffs)
            page_.paragraph(text(tradeOff.sentence));
        page_.paragraph(
            QStringLiteral("Balanced means that the person is indifferent between the two changes. Weights "
                           "hold within this library and its scaling and are not comparable with other "
                           "studies."),
            QStringLiteral("note"));
    }

    QString labelOf(const std::string& feature) const {
        for (const FeatureDefinition& definition : protocol_.features)
            if (definition.name == feature)
                return text(definition.label);
        return text(feature);
    }

    void course() {
        page_.heading(QStringLiteral("Course over the session"));
        if (found_.mainAnswers < 5) {
            page_.paragraph(QStringLiteral("Fewer than five main answers: there is no course to draw."));
            return;
        }
        page_.raw(QStringLiteral("<div class=\"columns\">"));
        for (std::size_t j = 0; j < protocol_.features.size(); ++j) {
            Curve curve{.label = text(protocol_.features[j].label)};
            for (const CoursePoint& point : found_.course)
                curve.points.push_back({.at = static_cast<double>(point.answers),
                                        .low = point.direction[j].low,
                                        .median = point.direction[j].median,
                                        .high = point.direction[j].high});
            page_.raw(QStringLiteral("<div>"));
            page_.paragraph(curve.label, QStringLiteral("note"));
            page_.raw(QString::fromUtf8(chartSvg(
                curvesChart({curve}, -1, 1, QStringLiteral("main answers"), coloursOf(Theme::Light)),
                {420, 150},
                QStringLiteral("Direction of the weight over the main answers, with its 90 % band"))));
            page_.raw(QStringLiteral("</div>"));
        }
        page_.raw(QStringLiteral("</div>"));
    }

    void consistency() {
        const Consistency& c = found_.consistency;
        page_.heading(QStringLiteral("Consistency"));
        page_.openTable(
            {QStringLiteral("Check"), QStringLiteral("Found"), QStringLiteral("Look at it when")});
        page_.row({QStringLiteral("Left side chosen"),
                   QStringLiteral("%1, p = %2").arg(of(c.left), numberText(c.leftProbability, 2)),
                   QStringLiteral("p below 0.05")});
        page_.row({QStringLiteral("Side bias"), range(found_.sideBias, 2),
                   QStringLiteral("0 outside the interval")});
        if (c.repeats.of > 0)
            page_.row(
                {QStringLiteral("Repeats answered alike"), of(c.repeats), QStringLiteral("half or fewer")});
        if (c.catches.of > 0)
            page_.row(
                {QStringLiteral("Catch pairs as expected"), of(c.catches), QStringLiteral("any unexpected")});
        if (c.identicalLeft.of > 0)
            page_.row(
                {QStringLiteral("Identical pairs, left"), of(c.identicalLeft), QStringLiteral("not judged")});
        QStringList used;
        for (std::size_t k = 0; k < c.confidence.size(); ++k)
            used << QString::number(c.confidence[k]);
        page_.row({QStringLiteral("Confidence levels used"), used.join(QStringLiteral(" / ")),
                   QStringLiteral("one in nine of ten")});
        if (c.medianResponseTime)
            page_.row({QStringLiteral("Median response time"),
                       withUnit(*c.medianResponseTime, 1, QStringLiteral("s")), QString()});
        page_.row({QStringLiteral("Quick answers"), QString::number(c.quick),
                   QStringLiteral("below %1 s").arg(c.quickBelow)});
        if (c.drift)
            page_.row({QStringLiteral("Drift, last less first third"),
                       QStringLiteral("%1 points").arg(numberText(*c.drift, 0)),
                       QStringLiteral("below −20 points")});
        page_.closeTable();
        page_.paragraph(
            QStringLiteral("Checks mark and never remove a trial. Most people choose a side even between "
                           "identical motions."),
            QStringLiteral("note"));
        if (c.oneWord)
            page_.paragraph(
                QStringLiteral("One confidence word makes nearly all answers: the sensitivity and the "
                               "predictions are likely too sure."),
                QStringLiteral("mark"));
    }

    void prediction() {
        const Prediction& p = found_.prediction;
        page_.heading(QStringLiteral("Prediction of held-out pairs"));
        if (!p.accuracy) {
            page_.paragraph(QStringLiteral("No held-out pair was answered."));
            return;
        }
        page_.openTable({});
        page_.row({QStringLiteral("Predicted sides right"),
                   p.tooFew ? QStringLiteral("%1: too few to judge").arg(of(p.heldOut))
                            : QStringLiteral("%1 (%2)").arg(of(p.heldOut), percent(p.accuracy->median))});
        page_.row({QStringLiteral("Exact 90 % interval"),
                   QStringLiteral("%1 to %2").arg(percent(p.accuracy->low), percent(p.accuracy->high))});
        page_.row({QStringLiteral("Guessing"), QStringLiteral("50 %")});
        if (p.reachable)
            page_.row(
                {QStringLiteral("Best reachable, given the repeats"),
                 QStringLiteral("%1 to %2").arg(percent(p.reachable->low), percent(p.reachable->high))});
        if (p.logScore)
            page_.row({QStringLiteral("Mean log score"), numberText(*p.logScore, 2)});
        if (p.heldOut.cannotTell > 0)
            page_.row({QStringLiteral("“Cannot tell”, left out"), QString::number(p.heldOut.cannotTell)});
        page_.closeTable();
    }

    void motions() {
        page_.heading(QStringLiteral("Predicted best and worst motion of the library"));
        page_.openTable(
            {QString(), QStringLiteral("Motion"), QStringLiteral("Probability"), QStringLiteral("Features")});
        const auto line = [&](const QString& name, const MotionFinding& motion) {
            const auto& names = protocol_.table.motions;
            const auto row = static_cast<std::size_t>(std::find(names.begin(), names.end(), motion.motion) -
                                                      names.begin());
            QStringList features;
            for (std::size_t j = 0; j < protocol_.features.size(); ++j)
                features << QStringLiteral("%1 %2").arg(
                    text(protocol_.features[j].label).toLower(),
                    withUnit(protocol_.table.raw(row, j), 2, unitText(protocol_.features[j].unit)));
            page_.row({name, text(motion.motion), numberText(motion.probability, 2),
                       features.join(QStringLiteral(", "))});
        };
        line(QStringLiteral("Best"), found_.motions.best);
        line(QStringLiteral("Worst"), found_.motions.worst);
        page_.closeTable();
        page_.paragraph(
            QStringLiteral("Acting on this estimate is expected to lose %1 of what choosing well matters.")
                .arg(percent(found_.motions.expectedRegret)));
    }

    void log() {
        page_.heading(QStringLiteral("Session log"));
        page_.openTable({});
        page_.row({QStringLiteral("Ended"),
                   state_.ended ? (state_.ended->how == SessionEnd::Finished
                                       ? QStringLiteral("after every trial")
                                       : QStringLiteral("stopped by the %1").arg(text(state_.ended->by)))
                                : QStringLiteral("not yet: a part session")});
        page_.row({QStringLiteral("Trials answered"),
                   QStringLiteral("%1 of %2").arg(state_.answers.size()).arg(state_.began.schedule.size())});
        page_.row({QStringLiteral("Pauses"), QString::number(state_.pauses)});
        page_.row({QStringLiteral("Answers taken back"), QString::number(state_.undone)});
        page_.row({QStringLiteral("Taken up again after an interruption"), QString::number(state_.resumed)});
        page_.row({QStringLiteral("Plans"), QString::number(state_.plans.size())});
        page_.row({QStringLiteral("Journal"),
                   QStringLiteral("%1 events, chain intact when read").arg(state_.events)});
        page_.closeTable();
        const auto relaxed = std::find_if(state_.plans.begin(), state_.plans.end(),
                                          [](const PlanAdopted& plan) { return !plan.relaxed.empty(); });
        if (relaxed != state_.plans.end())
            page_.paragraph(
                QStringLiteral("A rule of the planner gave way: %1.").arg(text(relaxed->relaxed.front())));
    }

    double largestRHat() const {
        double largest = 0;
        for (const ScalarSummary& summary : found_.posterior.summaries)
            largest = std::max(largest, summary.rHat);
        return largest;
    }
    double leastEss() const {
        double least = 1e300;
        for (const ScalarSummary& summary : found_.posterior.summaries)
            least = std::min({least, summary.bulkEss, summary.tailEss});
        return least;
    }

    void model() {
        page_.heading(QStringLiteral("Model"));
        const ResponseModel& m = found_.model;
        page_.paragraph(
            QStringLiteral(
                "Symmetric cumulative logit with %1 levels of confidence%2, a lapse of %3 and %4. Priors: "
                "weights normal with deviation %5 per feature%6; side bias normal with deviation %7; gaps "
                "between cut points lognormal with medians %8 and %9 and log-deviation %10. %11 draws of "
                "Hamiltonian Monte Carlo in %12 chains; largest R-hat %13, least effective sample size %14.")
                .arg(m.levels)
                .arg(m.cannotTell ? QStringLiteral(" and “cannot tell”") : QString())
                .arg(m.lapse)
                .arg(m.sideBiasDeviation > 0 ? QStringLiteral("a side bias") : QStringLiteral("no side bias"))
                .arg(numberText(m.weightScale(), 2))
                .arg(m.scaleDeviation > 0
                         ? QStringLiteral(", their common scale lognormal with log-deviation %1")
                               .arg(m.scaleDeviation)
                         : QString())
                .arg(m.sideBiasDeviation)
                .arg(m.firstGapMedian)
                .arg(m.laterGapMedian)
                .arg(m.gapDeviation)
                .arg(found_.posterior.draws.count())
                .arg(found_.posterior.chains)
                .arg(largestRHat(), 0, 'f', 3)
                .arg(std::lround(leastEss())));
        page_.paragraph(QStringLiteral("Protocol hash %1").arg(text(protocol_.hash)),
                        QStringLiteral("note hash"));
        page_.paragraph(
            QStringLiteral("Conducted with Whichway %1. The journal's hash chain shows accidental damage "
                           "and careless edits, not malice.")
                .arg(text(state_.began.program)),
            QStringLiteral("note"));
    }

    void cautionLines() {
        page_.raw(QStringLiteral("<div class=\"caution\">"));
        for (const std::string& caution : cautions())
            page_.paragraph(text(caution));
        page_.raw(QStringLiteral("</div>"));
    }

    const SessionState& state_;
    const Protocol& protocol_;
    const SessionFindings& found_;
    const std::string& code_;
    ReportPage page_;
};

} // namespace

QByteArray sessionReport(const SessionState& state, const SessionFindings& findings,
                         const std::string& code) {
    return Report(state, findings, code).make();
}

Result<void> writeSessionReport(FileSystem& files, const SessionState& state, const SessionFindings& findings,
                                const std::string& code, const std::string& folder) {
    if (auto made = files.createDirectory(folder); !made)
        return made;
    const QByteArray report = sessionReport(state, findings, code);
    const std::pair<const char*, std::string> parts[] = {
        {"report.html", report.toStdString()},
        {"trials.csv", trialTable(state)},
        {"codebook.csv", codebook(state.began.protocol)},
        {"weights.json", weightsFile(state, findings)},
    };
    for (const auto& [name, content] : parts)
        if (auto written = files.replace(folder + "/" + name, content); !written)
            return written;
    return {};
}

} // namespace whichway
