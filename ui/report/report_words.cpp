// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/report_words.h"

#include "ui/look/icons.h"
#include "ui/look/numbers.h"

#include <QCoreApplication>
#include <QDateTime>
#include <algorithm>
#include <cmath>
#include <limits>

namespace whichway {
namespace {

struct Words {
    Q_DECLARE_TR_FUNCTIONS(ReportWords)
};

constexpr TrialKind kKinds[] = {TrialKind::Practice, TrialKind::Main,  TrialKind::HeldOut,
                                TrialKind::Repeat,   TrialKind::Catch, TrialKind::Identical};

QString listText(const QStringList& parts) {
    if (parts.size() < 2)
        return parts.join(QString());
    return Words::tr("%1 and %2")
        .arg(parts.mid(0, parts.size() - 1).join(QStringLiteral(", ")), parts.last());
}

QString whoText(const SessionState& state) {
    switch (state.began.kind) {
    case SessionKind::Pilot:
        return Words::tr("One pilot participant");
    case SessionKind::Simulated:
        return Words::tr("One simulated participant");
    case SessionKind::Participant:
        break;
    }
    return Words::tr("One participant");
}

QString planningText(const SessionState& state) {
    const PlanningSettings& planning = state.began.protocol.planning;
    if (planning.choose == "at random")
        return Words::tr("Main pairs were drawn at random.");
    const QString pairs = Words::tr("Main pairs were planned %1 at a time to be %2 (worth: %3), while the "
                                    "participant watched;")
                              .arg(QString::number(planning.batch), QString::fromStdString(planning.choose),
                                   QString::fromStdString(planning.worth));
    const QString schedule = planning.schedule == PlanSchedule::Rolling
                                 ? Words::tr("pairs not yet shown were planned anew after every answer.")
                                 : Words::tr("each batch stood until its last answer.");
    return pairs + QLatin1Char(' ') + schedule;
}

QString modelText(const ResponseModel& model) {
    QString text = model.levels > 1
                       ? Words::tr("Weights come from a symmetric cumulative logit model with %1 levels of "
                                   "confidence")
                             .arg(model.levels)
                       : Words::tr("Weights come from a logit model of the choices");
    if (model.sideBiasDeviation > 0)
        text += Words::tr(", a side bias");
    if (model.lapse > 0)
        text += Words::tr(" and a lapse of %1\u00a0%").arg(QString::number(100 * model.lapse));
    return text + Words::tr("; intervals hold with a posterior probability of 90\u00a0%.");
}

} // namespace

QString kindsText(const SessionState& state) {
    QStringList parts;
    for (const TrialKind kind : kKinds)
        if (const int count = state.answered(kind); count > 0 && kind != TrialKind::Practice)
            parts << QString::number(count) + QLatin1Char(' ') + trialKindText(kind);
    return listText(parts);
}

QString methodsText(const SessionState& state, const SessionFindings& findings) {
    const Protocol& protocol = state.began.protocol;
    const int practice = state.answered(TrialKind::Practice);
    const int counted = static_cast<int>(state.answers.size()) - practice;
    QString text = Words::tr("%1 compared %2 of motions from a library of %3, side by side")
                       .arg(whoText(state), countText(counted, Words::tr("pair"), Words::tr("pairs")),
                            QString::number(protocol.table.motions.size()));
    if (practice > 0)
        text += Words::tr(", after %1")
                    .arg(countText(practice, Words::tr("practice pair"), Words::tr("practice pairs")));
    text += QStringLiteral(": ") + kindsText(state) + QStringLiteral(". ");
    text += Words::tr("Only main pairs taught the weights. Sides were balanced by seed %1. ")
                .arg(state.began.seed);
    text += planningText(state) + QLatin1Char(' ') + modelText(findings.model) + QLatin1Char(' ');
    text += state.estimateShown ? Words::tr("The estimate was looked at before the session had ended.")
                                : Words::tr("The experimenter did not see the estimate during the session.");
    return text;
}

QStringList modelTexts(const SessionFindings& findings) {
    const ResponseModel& model = findings.model;
    QStringList lines;
    lines << Words::tr("Utility: u = w · z, where z are the features standardised over the library; "
                       "η = w · (z left − z right) + δ, positive for left.");
    lines << Words::tr("Answer: P(y ≥ k) = σ(η − c[k−1]) and P(y ≤ −k) = σ(−η − c[k−1]) for confidence "
                       "levels k = 1 … %1, with cut points 0 %2 c[0] < c[1] < … (Agresti 1992)%3.")
                 .arg(QString::number(model.levels),
                      model.cannotTell ? QStringLiteral("<") : QStringLiteral("="),
                      model.lapse > 0 ? Words::tr("; mixed with a lapse of %1\u00a0% that answers at random")
                                            .arg(QString::number(100 * model.lapse))
                                      : QString());
    lines << (model.scaleDeviation > 0
                  ? Words::tr("Prior of the weights: each w ~ N(0, s.d. s·eʰ), s = %1, h ~ N(0, s.d. %2).")
                        .arg(numberText(model.weightScale(), 3), QString::number(model.scaleDeviation))
                  : Words::tr("Prior of the weights: each w ~ N(0, s.d. s), s = %1.")
                        .arg(numberText(model.weightScale(), 3)));
    if (model.sideBiasDeviation > 0)
        lines << Words::tr("Prior of the side bias: δ ~ N(0, s.d. %1).")
                     .arg(QString::number(model.sideBiasDeviation));
    if (model.levels > 1 || model.cannotTell) {
        QStringList cuts;
        if (model.cannotTell)
            cuts << Words::tr("ln c[0] ~ N(ln %1, s.d. %2)")
                        .arg(QString::number(model.zeroCutMedian), QString::number(model.gapDeviation));
        if (model.levels > 1)
            cuts << Words::tr("ln of the first gap ~ N(ln %1, s.d. %2)")
                        .arg(QString::number(model.firstGapMedian), QString::number(model.gapDeviation));
        if (model.levels > 2)
            cuts << Words::tr("of later gaps ~ N(ln %1, s.d. %2)")
                        .arg(QString::number(model.laterGapMedian), QString::number(model.gapDeviation));
        lines << Words::tr("Priors of the cut points: %1.").arg(cuts.join(QStringLiteral(", ")));
    }
    return lines;
}

QString endText(const SessionState& state) {
    if (!state.ended)
        return Words::tr("The session has not ended.");
    // Whatever a person typed stays out of the report; a rule of the protocol may be named.
    const QString reason =
        state.ended->by == "schedule" ? QString::fromStdString(state.ended->reason) : QString();
    QString text;
    switch (state.ended->how) {
    case SessionEnd::Finished:
        text = Words::tr("The session was finished");
        break;
    case SessionEnd::Stopped:
        text = Words::tr("The session was stopped by the %1").arg(QString::fromStdString(state.ended->by));
        break;
    case SessionEnd::ClosedAsPartial:
        text = Words::tr("The session was closed as a part session");
        break;
    }
    return reason.isEmpty() ? text + QLatin1Char('.')
                            : text + QStringLiteral(" (") + reason + QStringLiteral(").");
}

double secondsInto(const SessionState& state, const std::string& time) {
    const auto begin = QDateTime::fromString(QString::fromStdString(state.firstTime), Qt::ISODateWithMs);
    const auto then = QDateTime::fromString(QString::fromStdString(time), Qt::ISODateWithMs);
    if (!begin.isValid() || !then.isValid())
        return -1;
    return static_cast<double>(begin.msecsTo(then)) / 1000;
}

QString labelOf(const Protocol& protocol, const std::string& feature) {
    for (const FeatureDefinition& one : protocol.features)
        if (one.name == feature)
            return QString::fromStdString(one.label.empty() ? one.name : one.label);
    return QString::fromStdString(feature);
}

double largestRHat(const Posterior& posterior) {
    double largest = 0;
    for (const ScalarSummary& summary : posterior.summaries) {
        if (std::isnan(summary.rHat))
            return std::numeric_limits<double>::quiet_NaN();
        largest = std::max(largest, summary.rHat);
    }
    return largest;
}

double leastEffectiveDraws(const Posterior& posterior) {
    double least = std::numeric_limits<double>::infinity();
    for (const ScalarSummary& summary : posterior.summaries) {
        if (std::isnan(summary.bulkEss) || std::isnan(summary.tailEss))
            return std::numeric_limits<double>::quiet_NaN();
        least = std::min({least, summary.bulkEss, summary.tailEss});
    }
    return least;
}

} // namespace whichway
