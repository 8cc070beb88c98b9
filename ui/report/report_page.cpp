// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/report_page.h"

#include "core/findings/words.h"
#include "core/handover/cautions.h"
#include "ui/charts/vector_image.h"
#include "ui/look/numbers.h"
#include "ui/motion/motion_painter.h"
#include "ui/report/report_plots.h"
#include "ui/report/report_style.h"
#include "ui/report/report_tables.h"
#include "ui/report/report_words.h"

#include <QDateTime>
#include <QPainter>
#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

// px at 96 dpi of an A4 page with margins of 18 mm, and of its two and four columns.
constexpr double kWide = 658, kHalf = 318, kQuarter = 155;
constexpr int kFewestAnswers = 5; // for a chart

} // namespace

ReportPage::ReportPage(const SessionState& state, const SessionFindings& findings, const ReportExtras& extras)
    : state_(state), findings_(findings), extras_(extras) {}

QString ReportPage::page() {
    const QString language = QStringLiteral("en");
    out_.open("html", {{"xmlns", QStringLiteral("http://www.w3.org/1999/xhtml")},
                       {"lang", language},
                       {"xml:lang", language}});
    out_.open("head");
    out_.drawing(QStringLiteral("<meta charset=\"utf-8\"/>"));
    out_.drawing(QStringLiteral("<meta name=\"viewport\" content=\"width=device-width\"/>"));
    out_.line("title", tr("Session report: %1").arg(QString::fromStdString(state_.began.protocol.title)));
    out_.open("style").text(reportStyle()).close().close();
    out_.open("body");
    head();
    marks();
    out_.open("section").line("p", methodsText(state_, findings_)).close();
    out_.open("section", QStringLiteral("pair"));
    weights();
    tradeOffs();
    out_.close();
    session();
    out_.open("section", QStringLiteral("pair"));
    consistency();
    prediction();
    out_.close();
    motions();
    course();
    model();
    diagnostics();
    log();
    cautionsAndFoot();
    out_.close().close();
    return QStringLiteral("<!DOCTYPE html>\n") + out_.content();
}

void ReportPage::head() {
    const Protocol& protocol = state_.began.protocol;
    const QString title = QString::fromStdString(protocol.title);
    const bool named = !extras_.code.empty();
    out_.open("header").open("div");
    out_.line("h1", named ? tr("Person %1").arg(QString::fromStdString(extras_.code)) : title);
    out_.line("p", named ? title : tr("Report of one session"));
    out_.close().open("div", QStringLiteral("aside"));
    if (named) {
        const auto begin = QDateTime::fromString(QString::fromStdString(state_.firstTime), Qt::ISODateWithMs);
        const auto end = QDateTime::fromString(QString::fromStdString(state_.lastTime), Qt::ISODateWithMs);
        const QLocale plain = QLocale::c();
        if (begin.isValid() && end.isValid())
            out_.line("p", tr("Session of %1, %2 to %3")
                               .arg(plain.toString(begin, QStringLiteral("d MMMM yyyy")),
                                    plain.toString(begin, QStringLiteral("HH:mm")),
                                    plain.toString(end, QStringLiteral("HH:mm"))));
    }
    out_.line("p", tr("Study %1, version %2")
                       .arg(QString::fromStdString(protocol.name), QString::fromStdString(protocol.version)));
    out_.line("p", tr("Protocol %1").arg(QString::fromStdString(protocol.hash.substr(0, 12))));
    out_.close().close();
}

void ReportPage::marks() {
    const auto mark = [&](const QString& text, const char* kind) {
        out_.line("span", text, QStringLiteral("chip ") + QLatin1String(kind));
    };
    out_.open("div", QStringLiteral("marks"));
    if (state_.began.protocol.invented)
        mark(tr("Invented motions: a demonstration, not data"), "warn");
    if (state_.began.kind == SessionKind::Pilot)
        mark(tr("Pilot session: not to be pooled"), "warn");
    if (state_.began.kind == SessionKind::Simulated)
        mark(tr("Simulated participant: nobody answered"), "warn");
    if (!state_.ended)
        mark(tr("The session has not ended"), "warn");
    if (state_.estimateShown)
        mark(tr("The estimate was looked at before the session had ended"), "warn");
    if (findings_.consistency.oneWord)
        mark(tr("One word of confidence for nearly all answers: the confidence says little"), "warn");
    if (!findings_.posterior.converged)
        mark(tr("Not converged: R-hat %1, effective draws %2")
                 .arg(numberText(largestRHat(findings_.posterior), 3),
                      numberText(leastEffectiveDraws(findings_.posterior), 0)),
             "bad");
    out_.close();
}

void ReportPage::weights() {
    out_.open("div");
    out_.open("h2").text(tr("Weights")).line("small", tr("direction, 90\u00a0% intervals")).close();
    if (findings_.mainAnswers < kFewestAnswers) {
        out_.line("p", tr("Fewer than %1 main answers: too few to draw.").arg(kFewestAnswers));
    } else {
        IntervalPlot directions = weightsPlot(state_.began.protocol, findings_.weights);
        IntervalPlot sensitivity = sensitivityPlot(findings_.weights);
        for (IntervalPlot* plot : {&directions, &sensitivity})
            for (IntervalPlot::Row& row : plot->rows)
                row.determined = row.determined && findings_.posterior.converged;
        out_.drawing(intervalImage(directions, style_, kHalf, tr("Direction of the weights")));
        out_.drawing(intervalImage(sensitivity, style_, kHalf, tr("Sensitivity")));
        out_.line("p",
                  tr("A hollow dot: it is not determined whether more or less is liked. Sensitivity is the "
                     "length of the weights: how reliably answers follow the utility."),
                  QStringLiteral("side"));
    }
    out_.close();
}

void ReportPage::tradeOffs() {
    const Protocol& protocol = state_.began.protocol;
    const QString numeraire = labelOf(protocol, protocol.numeraire);
    out_.open("div").line("h2", tr("%1 this person would give").arg(numeraire));
    const auto& found = findings_.tradeOffs;
    if (!found.empty() && found.front().determined) {
        out_.open("table", {{"class", QStringLiteral("trades")}, {"aria-label", tr("Trade-offs")}})
            .open("tbody");
        for (const TradeOff& tradeOff : found) {
            out_.open("tr",
                      tradeOff.featureSignProbability < kSignDetermined ? QStringLiteral("open") : QString());
            out_.line("td", QString::fromStdString(tradeOff.give));
            out_.line("td", tr("for %1").arg(QString::fromStdString(tradeOff.forWhat)));
            out_.line("td", QString::fromStdString(tradeOff.range));
            out_.close();
        }
        out_.close().close();
        out_.line(
            "p",
            tr("Medians with 90\u00a0% intervals; grey where it is open which way it goes. Weights hold "
               "within this library and its scaling and are not comparable with other studies."),
            QStringLiteral("side"));
    } else {
        out_.line("p",
                  found.empty()
                      ? tr("There is no second feature to trade.")
                      : tr("Not determined: whether more or less of it is liked is certain only to %1, and "
                           "0.99 is asked for. More answers would mend it.")
                            .arg(numberText(std::floor(100 * found.front().signProbability) / 100, 2)));
    }
    out_.close();
}

void ReportPage::session() {
    out_.open("section").line("h2", tr("The session"));
    SessionPlot plot = sessionPlot(state_, findings_.consistency);
    out_.drawing(sessionImage(plot, style_, kWide, tr("Trials and response times")));
    const double length = secondsInto(state_, state_.lastTime);
    QString text = endText(state_);
    if (length >= 0)
        text += tr(" It took %1 from the first event to the last.").arg(spanText(length));
    text +=
        tr(" Longest wait for a pair: %1. Plans adopted: %2. Answers undone: %3, pauses: %4, taken up again: "
           "%5.")
            .arg(withUnit(state_.longestWait, 1, QStringLiteral("s")), QString::number(state_.plans.size()),
                 QString::number(state_.undone), QString::number(state_.pauses),
                 QString::number(state_.resumed));
    out_.line("p", text, QStringLiteral("side")).close();
}

void ReportPage::consistency() {
    out_.open("div").line("h2", tr("Consistency"));
    write(out_, consistencyTable(state_, findings_));
    out_.close();
}

void ReportPage::prediction() {
    const Prediction& found = findings_.prediction;
    out_.open("div").line("h2", tr("Prediction"));
    const IntervalPlot plot = predictionPlot(findings_);
    if (!plot.rows.empty())
        out_.drawing(intervalImage(plot, style_, kHalf, tr("Held-out accuracy and repeat agreement")));
    if (found.heldOut.of == 0)
        out_.line("p", tr("No held-out pair was answered with a side."));
    else if (found.tooFew)
        out_.line("p", tr("%1 of %2 held-out pairs foretold: too few to judge.")
                           .arg(found.heldOut.count)
                           .arg(found.heldOut.of));
    else
        out_.line("p", tr("The estimate foretold %1 of %2 held-out pairs, which taught it nothing.")
                           .arg(found.heldOut.count)
                           .arg(found.heldOut.of));
    QString side = tr("Exact 90\u00a0% intervals (Clopper and Pearson).");
    if (found.logScore)
        side += tr(" Mean log score of the held-out answers %1; guessing scores %2.")
                    .arg(numberText(*found.logScore, 2),
                         numberText(-std::log(static_cast<double>(findings_.model.categories())), 2));
    if (found.heldOut.cannotTell > 0)
        side += tr(" %1 answered “cannot tell” and are in no share.").arg(found.heldOut.cannotTell);
    if (found.reachable)
        side +=
            tr(" If %1 of %2 repeats answered alike were the person's true agreement, the best reachable "
               "accuracy would lie between %3\u00a0% and %4\u00a0%.")
                .arg(QString::number(findings_.consistency.repeats.count),
                     QString::number(findings_.consistency.repeats.of),
                     numberText(100 * found.reachable->low, 0), numberText(100 * found.reachable->high, 0));
    else if (findings_.consistency.repeats.of > 0)
        side += tr(" Repeats agreed no more often than by chance, so no reachable range follows from them.");
    out_.line("p", side, QStringLiteral("side")).close();
}

void ReportPage::course() {
    if (findings_.mainAnswers < kFewestAnswers)
        return;
    out_.open("section");
    out_.open("h2").text(tr("Course over the session"));
    out_.line("small", tr("direction after so many main answers: median and 90\u00a0% band, one axis for all "
                          "features"))
        .close();
    out_.open("div", QStringLiteral("courses"));
    for (const CoursePlot& plot : coursePlots(state_.began.protocol, findings_))
        out_.drawing(courseImage(plot, style_, {kQuarter, 116}, tr("Course of %1").arg(plot.heading)));
    out_.close().close();
}

void ReportPage::motions() {
    out_.open("section").open("h2").text(tr("Predicted best and worst motion of the library"));
    if (extras_.study != nullptr)
        out_.line("small", tr("trail dots every 0.5 s: their spacing is the speed"));
    out_.close().open("div", QStringLiteral("pair"));
    motion(tr("Best"), findings_.motions.best, tr("The motion with the highest expected utility"));
    motion(tr("Worst"), findings_.motions.worst, tr("The motion with the lowest expected utility"));
    out_.close();
    out_.line("p",
              tr("Acting on this estimate is expected to cost %1 of what choosing at random would cost.")
                  .arg(numberText(100 * findings_.motions.expectedRegret, 1) + tr("\u00a0%")),
              QStringLiteral("side"));
    out_.close();
}

void ReportPage::motion(const QString& heading, const MotionFinding& finding, const QString& role) {
    const Protocol& protocol = state_.began.protocol;
    out_.open("figure");
    const Trajectory* drawn = extras_.study == nullptr ? nullptr : extras_.study->motion(finding.motion);
    if (drawn != nullptr) {
        const MotionPainter painter(*extras_.study);
        const QSizeF size(kHalf, std::round(kHalf / painter.aspect()));
        const double scale = painter.pixelsPerMeter(size, {drawn});
        out_.drawing(vectorImage(size, role, [&](QPainter& canvas) {
            painter.paint(canvas, QRectF(QPointF(0, 0), size), *drawn, drawn->duration(), scale,
                          MotionPainter::Scenery::Drawn);
        }));
    }
    out_.open("figcaption")
        .line("strong",
              tr("%1, %2 (probability %3)")
                  .arg(heading, QString::fromStdString(finding.motion), numberText(finding.probability, 2)));
    const auto& names = protocol.table.motions;
    const auto row = std::find(names.begin(), names.end(), finding.motion);
    QStringList values;
    for (std::size_t j = 0; row != names.end() && j < protocol.features.size(); ++j) {
        const double value = protocol.table.raw(static_cast<std::size_t>(row - names.begin()), j);
        const QString unit = QString::fromStdString(readableUnit(protocol.features[j].unit));
        values << QString::fromStdString(
                      inSentence(labelOf(protocol, protocol.features[j].name).toStdString())) +
                      QLatin1Char(' ') + shortNumber(value) +
                      (unit.isEmpty() ? QString() : QChar(0x00a0) + unit);
    }
    out_.line("span", values.join(QStringLiteral(", ")) + QLatin1Char('.')).close().close();
}

void ReportPage::model() {
    out_.open("section").line("h2", tr("Weights in numbers"));
    write(out_, weightsTable(state_, findings_.weights));
    out_.close();
    out_.open("section").line("h2", tr("Model and priors")).open("ul");
    for (const QString& line : modelTexts(findings_))
        out_.line("li", line);
    out_.close().close();
}

void ReportPage::diagnostics() {
    const Posterior& posterior = findings_.posterior;
    out_.open("section").line("h2", tr("Diagnostics"));
    write(out_, diagnosticsTable(state_.began.protocol, posterior));
    out_.line("p",
              tr("Hamiltonian Monte Carlo, %1 chains, %2 draws, seed %3. Asked for: R-hat below 1.01 and at "
                 "least 400 effective draws, bulk and tail, for every parameter (Vehtari et al. 2021). %4")
                  .arg(QString::number(posterior.chains), QString::number(posterior.draws.count()),
                       QString::number(findings_.sampler.seed),
                       posterior.converged ? tr("All hold.")
                                           : tr("Not all hold: do not rely on the "
                                                "estimate.")),
              QStringLiteral("side"));
    out_.close();
}

void ReportPage::log() {
    out_.open("section", QStringLiteral("long"));
    out_.open("h2").text(tr("Session log"));
    out_.line("small", tr("times from the session's first event; answers with their level of confidence"))
        .close();
    write(out_, logTable(state_));
    out_.close();
}

void ReportPage::cautionsAndFoot() {
    out_.open("footer").line("h2", tr("Cautions")).open("ul");
    for (const std::string& caution : cautions())
        out_.line("li", QString::fromStdString(caution));
    out_.close();
    out_.line("p",
              tr("Program %1; journal of %2 events, whose chain of hashes shows accidental damage and "
                 "careless edits, not malice; session %3; protocol %4.")
                  .arg(QString::fromStdString(state_.began.program), QString::number(state_.events),
                       QString::fromStdString(state_.began.session),
                       QString::fromStdString(state_.began.protocol.hash)),
              QStringLiteral("origin"));
    out_.close();
}

} // namespace whichway
