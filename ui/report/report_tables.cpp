// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/report_tables.h"

#include "core/findings/words.h"
#include "ui/look/icons.h"
#include "ui/look/numbers.h"
#include "ui/report/report_words.h"

#include <QCoreApplication>
#include <algorithm>
#include <cmath>
#include <cstdlib>

namespace whichway {
namespace {

struct Words {
    Q_DECLARE_TR_FUNCTIONS(ReportTables)
};

QString rangeText(double low, double high, int decimals) {
    return Words::tr("%1 to %2").arg(numberText(low, decimals), numberText(high, decimals));
}

QString ofText(const Share& share) {
    QString text = Words::tr("%1 of %2").arg(share.count).arg(share.of);
    if (share.cannotTell > 0)
        text += Words::tr(", %1 “cannot tell”").arg(share.cannotTell);
    return text;
}

/// "“A little” 12, “Fairly” 20, “Very” 8".
QString wordsUsed(const SessionState& state, const Consistency& consistency) {
    const auto& all = state.began.protocol.texts;
    const auto shown = std::find_if(
        all.begin(), all.end(), [&](const Texts& texts) { return texts.language == state.began.language; });
    QStringList parts;
    for (std::size_t level = 0; level < consistency.confidence.size(); ++level) {
        const bool hasWord = shown != all.end() && level < shown->confidence.size();
        const QString word =
            hasWord ? QString::fromStdString(shown->confidence[level]) : Words::tr("level %1").arg(level + 1);
        parts << Words::tr("“%1” %2").arg(word, QString::number(consistency.confidence[level]));
    }
    return parts.join(QStringLiteral(", "));
}

/// The least and the most of `of` choices at which an even split becomes as unlikely as 0.05.
QString unevenSplit(int of) {
    for (int fewer = of / 2; fewer >= 0; --fewer)
        if (evenSplitProbability(fewer, of) < 0.05)
            return Words::tr("≤ %1 or ≥ %2").arg(fewer).arg(of - fewer);
    return Words::tr("too few");
}

QString parameterText(const Protocol& protocol, const std::string& name) {
    static const std::string kWeight = "weight ";
    if (name.rfind(kWeight, 0) == 0) {
        const int number = std::atoi(name.c_str() + kWeight.size());
        if (number >= 1 && number <= static_cast<int>(protocol.features.size()))
            return labelOf(protocol, protocol.features[static_cast<std::size_t>(number - 1)].name);
    }
    QString text = QString::fromStdString(name);
    return text.isEmpty() ? text : text.left(1).toUpper() + text.mid(1);
}

QString answerText(const SessionState& state, const AnsweredTrial& answer) {
    if (answer.answer == 0)
        return Words::tr("cannot tell");
    const QString side = answer.answer > 0 ? Words::tr("left") : Words::tr("right");
    return state.began.protocol.levels > 1
               ? Words::tr("%1, %2").arg(side, QString::number(std::abs(answer.answer)))
               : side;
}

} // namespace

void write(Markup& out, const ReportTable& table) {
    out.open("table", {{"class", table.cssClass}, {"aria-label", table.name}});
    out.open("thead").open("tr");
    for (const QString& heading : table.headings)
        out.open("th", {{"scope", QStringLiteral("col")}}).text(heading).close();
    out.close().close().open("tbody");
    for (const QStringList& row : table.rows) {
        out.open("tr");
        for (const QString& cell : row)
            out.line("td", cell);
        out.close();
    }
    out.close().close();
}

ReportTable consistencyTable(const SessionState& state, const SessionFindings& findings) {
    const Consistency& found = findings.consistency;
    ReportTable table{.name = Words::tr("Consistency checks"),
                      .cssClass = QStringLiteral("checks"),
                      .headings = {Words::tr("Check"), Words::tr("Found"), Words::tr("Look again at")}};
    table.rows.push_back(
        {Words::tr("Left chosen"),
         Words::tr("%1 (p = %2)").arg(ofText(found.left), numberText(found.leftProbability, 2)),
         unevenSplit(found.left.of)});
    if (findings.model.sideBiasDeviation > 0)
        table.rows.push_back({Words::tr("Side bias δ"),
                              numberText(findings.sideBias.median, 2) + QStringLiteral(" (") +
                                  rangeText(findings.sideBias.low, findings.sideBias.high, 2) +
                                  QLatin1Char(')'),
                              Words::tr("0 outside")});
    table.rows.push_back(
        {Words::tr("Repeats alike"),
         found.repeats.of + found.repeats.cannotTell > 0 ? ofText(found.repeats) : Words::tr("none shown"),
         Words::tr("half or fewer")});
    table.rows.push_back(
        {Words::tr("Catch pairs"),
         found.catches.of + found.catches.cannotTell > 0 ? ofText(found.catches) : Words::tr("none shown"),
         Words::tr("any other")});
    table.rows.push_back({Words::tr("Identical, left"),
                          found.identicalLeft.of + found.identicalLeft.cannotTell > 0
                              ? ofText(found.identicalLeft)
                              : Words::tr("none shown"),
                          Words::tr("not judged")});
    if (found.confidence.size() > 1)
        table.rows.push_back({Words::tr("Words used"), wordsUsed(state, found), Words::tr("one in 9 of 10")});
    if (found.medianResponseTime)
        table.rows.push_back({Words::tr("Quick answers"),
                              Words::tr("%1 (median %2)")
                                  .arg(QString::number(found.quick),
                                       withUnit(*found.medianResponseTime, 1, QStringLiteral("s"))),
                              Words::tr("below %1").arg(withUnit(found.quickBelow, 1, QStringLiteral("s")))});
    if (found.drift)
        table.rows.push_back({Words::tr("Drift"), Words::tr("%1 points").arg(numberText(*found.drift, 0)),
                              Words::tr("below %1").arg(numberText(-20, 0))});
    return table;
}

ReportTable weightsTable(const SessionState& state, const WeightFindings& weights) {
    const Protocol& protocol = state.began.protocol;
    ReportTable table{.name = Words::tr("Weights in numbers"),
                      .cssClass = QStringLiteral("numbers"),
                      .headings = {Words::tr("Feature"), Words::tr("Direction"),
                                   Words::tr("90\u00a0% interval"), Words::tr("Weight per unit"),
                                   Words::tr("90\u00a0% interval"), Words::tr("Unit"),
                                   Words::tr("P(more is liked)")}};
    for (std::size_t j = 0; j < weights.features.size(); ++j) {
        const WeightFinding& weight = weights.features[j];
        const FeatureDefinition& feature = protocol.features[j];
        const int decimals = decimalsFor(weight.perUnit.high - weight.perUnit.low);
        QString unit = QString::fromStdString(readableUnit(feature.unit));
        if (feature.scale == FeatureScale::Log)
            unit = Words::tr("ln %1").arg(unit.isEmpty() ? Words::tr("value") : unit);
        table.rows.push_back({labelOf(protocol, weight.feature), numberText(weight.direction.median, 2),
                              rangeText(weight.direction.low, weight.direction.high, 2),
                              numberText(weight.perUnit.median, decimals),
                              rangeText(weight.perUnit.low, weight.perUnit.high, decimals),
                              unit.isEmpty() ? QStringLiteral("1") : unit, numberText(weight.positive, 2)});
    }
    return table;
}

ReportTable diagnosticsTable(const Protocol& protocol, const Posterior& posterior) {
    ReportTable table{.name = Words::tr("Diagnostics of the sampling"),
                      .cssClass = QStringLiteral("numbers"),
                      .headings = {Words::tr("Parameter"), Words::tr("Median"),
                                   Words::tr("90\u00a0% interval"), Words::tr("R-hat"), Words::tr("ESS bulk"),
                                   Words::tr("ESS tail")}};
    for (const ScalarSummary& summary : posterior.summaries)
        table.rows.push_back({parameterText(protocol, summary.name), numberText(summary.median, 2),
                              rangeText(summary.low, summary.high, 2), numberText(summary.rHat, 3),
                              numberText(summary.bulkEss, 0), numberText(summary.tailEss, 0)});
    return table;
}

ReportTable logTable(const SessionState& state) {
    ReportTable table{.name = Words::tr("Session log"),
                      .cssClass = QStringLiteral("log"),
                      .headings = {Words::tr("At"), Words::tr("Trial"), Words::tr("Kind"), Words::tr("Left"),
                                   Words::tr("Right"), Words::tr("Answer"), Words::tr("Time, s"),
                                   Words::tr("Replays"), Words::tr("Wait, s"), Words::tr("Worth, bit")}};
    const QString none = QStringLiteral("–");
    for (const AnsweredTrial& answer : state.answers) {
        const double at = secondsInto(state, answer.time);
        table.rows.push_back({at < 0 ? none : spanText(at), QString::number(answer.trial),
                              trialKindText(answer.kind), QString::fromStdString(answer.left),
                              QString::fromStdString(answer.right), answerText(state, answer),
                              answer.responseTime < 0 ? none : numberText(answer.responseTime, 1),
                              QString::number(answer.replays), numberText(answer.wait, 1),
                              answer.kind == TrialKind::Main ? numberText(answer.information, 2) : none});
    }
    return table;
}

} // namespace whichway
