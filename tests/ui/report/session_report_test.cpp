// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/report/session_report.h"

#include "tests/support/answered_session.h"
#include "tests/support/memory_file_system.h"
#include "tests/support/small_study.h"
#include "ui/report/markup.h"
#include "ui/report/report_style.h"

#include <QRegularExpression>
#include <QXmlStreamReader>
#include <gtest/gtest.h>
#include <stdexcept>

using namespace whichway;

namespace {

constexpr const char* kHostile = "<script>alert(1)</script> & \"both' <img src=http://example.org/x>";

struct Page {
    QStringList elements = {};
    QStringList references = {}; ///< values of attributes that make a reader fetch something
    QStringList handlers = {};   ///< attributes that hold script
    QString text = {};
    QString fault = {};
};

Page read(const QString& html) {
    Page page;
    QXmlStreamReader reader(html);
    while (!reader.atEnd()) {
        reader.readNext();
        if (reader.isStartElement()) {
            page.elements << reader.name().toString();
            for (const QXmlStreamAttribute& attribute : reader.attributes()) {
                const QString name = attribute.name().toString();
                if (QStringList{QStringLiteral("href"), QStringLiteral("src"), QStringLiteral("data"),
                                QStringLiteral("action"), QStringLiteral("poster")}
                        .contains(name))
                    page.references << attribute.value().toString();
                if (name.startsWith(QLatin1String("on")))
                    page.handlers << name;
            }
        } else if (reader.isCharacters()) {
            page.text += reader.text().toString();
        }
    }
    if (reader.hasError())
        page.fault = QStringLiteral("%1 in line %2").arg(reader.errorString()).arg(reader.lineNumber());
    return page;
}

class Report : public ::testing::Test {
protected:
    Study study = smallStudy();
    AnsweredSession session{study.protocol};
    SessionFindings findings;

    void answer(int mainTrials) {
        for (int i = 0; i < mainTrials; ++i)
            session.add(TrialKind::Main, "m00" + std::to_string(i % 9), "m01" + std::to_string(i % 7),
                        i % 3 == 0 ? -2 : 1);
        session.repeat(session.add(TrialKind::HeldOut, "m020", "m021", 2), -2);
        session.addCatch(Side::Left, 3);
        session.add(TrialKind::Practice, "extra1", "extra2", 1);
        session.add(TrialKind::Identical, "m003", "m003", -1, -1);
        auto found = findSession(session.state, 5);
        ASSERT_TRUE(found.ok()) << describe(found.error());
        findings = std::move(*found);
    }

    QString page(const ReportExtras& extras = {}) {
        return sessionReportPage(session.state, findings, extras);
    }
};

TEST_F(Report, IsWellFormedAndFetchesAndRunsNothing) {
    answer(12);
    const Page found = read(page({.code = "K7", .study = &study}));
    EXPECT_EQ(found.fault, QString());
    EXPECT_TRUE(found.references.isEmpty()) << found.references.join(' ').toStdString();
    EXPECT_TRUE(found.handlers.isEmpty());
    EXPECT_FALSE(found.elements.contains(QStringLiteral("script")));
    EXPECT_FALSE(found.elements.contains(QStringLiteral("link")));
    EXPECT_GE(found.elements.count(QStringLiteral("svg")), 8);
    EXPECT_FALSE(page().contains(QStringLiteral("url(")));
    EXPECT_FALSE(page().contains(QStringLiteral("@import")));
}

TEST_F(Report, EscapesEveryTextOfAHostileStudy) {
    Protocol& protocol = session.state.began.protocol;
    protocol.title = protocol.version = protocol.name = kHostile;
    for (FeatureDefinition& feature : protocol.features)
        feature.label = kHostile;
    for (std::string& word : protocol.texts[0].confidence)
        word = kHostile;
    session.state.began.program = kHostile;
    session.state.ended = SessionEnded{.how = SessionEnd::Finished, .by = "schedule", .reason = kHostile};
    answer(12);
    const Page found = read(page({.code = kHostile}));
    EXPECT_EQ(found.fault, QString());
    EXPECT_TRUE(found.text.contains(QString::fromUtf8(kHostile)));
    EXPECT_FALSE(found.elements.contains(QStringLiteral("script")));
    EXPECT_FALSE(found.elements.contains(QStringLiteral("img")));
    EXPECT_TRUE(found.references.isEmpty());
}

TEST_F(Report, SurvivesCharactersThatXmlDoesNotAllow) {
    session.state.began.protocol.title = std::string("a\x01\x0b z");
    session.state.began.protocol.features[0].label = std::string("b\x02 y");
    answer(6);
    EXPECT_EQ(read(page()).fault, QString());
}

TEST_F(Report, NamesThePersonAndTheDayOnlyInTheLabsOwnCopy) {
    answer(6);
    const Page own = read(page({.code = "K7-4821"})), other = read(page());
    EXPECT_TRUE(own.text.contains(QStringLiteral("K7-4821")));
    EXPECT_TRUE(own.text.contains(QStringLiteral("3 March 2026")));
    EXPECT_FALSE(other.text.contains(QStringLiteral("K7-4821")));
    EXPECT_FALSE(other.text.contains(QStringLiteral("March")));
}

TEST_F(Report, HoldsNoNotesAndNothingThatSomebodyTyped) {
    session.state.notes.push_back({.trial = 1, .text = "PLANTED-NOTE"});
    session.state.ended =
        SessionEnded{.how = SessionEnd::Stopped, .by = "experimenter", .reason = "PLANTED-REASON"};
    answer(6);
    EXPECT_FALSE(page({.code = "K7"}).contains(QStringLiteral("PLANTED")));
}

TEST_F(Report, SaysWhatWasDoneWithEachKindOfTrialApart) {
    answer(12);
    const QString text = read(page()).text;
    EXPECT_TRUE(text.contains(QStringLiteral("12 main, 1 held-out, 1 repeat, 1 catch and 1 identical")))
        << text.toStdString();
    EXPECT_TRUE(text.contains(QStringLiteral("after 1 practice pair")));
    EXPECT_TRUE(text.contains(QStringLiteral("too few to judge")));
}

TEST_F(Report, CarriesItsMarks) {
    answer(6);
    EXPECT_TRUE(page().contains(QStringLiteral("Invented motions")));
    EXPECT_FALSE(page().contains(QStringLiteral("Pilot session")));
    session.state.began.kind = SessionKind::Pilot;
    EXPECT_TRUE(page().contains(QStringLiteral("Pilot session")));
    session.state.began.kind = SessionKind::Simulated;
    EXPECT_TRUE(page().contains(QStringLiteral("Simulated participant")));
    session.state.began.protocol.invented = false;
    EXPECT_FALSE(page().contains(QStringLiteral("Invented motions")));
}

TEST_F(Report, NeverShowsAnEstimateThatFailedWithoutSayingSo) {
    answer(12);
    findings.posterior.converged = true;
    EXPECT_FALSE(page().contains(QStringLiteral("Not converged")));
    findings.posterior.converged = false;
    findings.posterior.summaries.at(0).rHat = 1.04;
    const QString failed = page();
    EXPECT_TRUE(failed.contains(QStringLiteral("Not converged: R-hat 1.040")));
    EXPECT_TRUE(failed.contains(QStringLiteral("do not rely on the estimate")));
}

TEST_F(Report, SaysWhyTradeOffsAreNotDetermined) {
    answer(12);
    for (TradeOff& tradeOff : findings.tradeOffs) {
        tradeOff.determined = false;
        tradeOff.signProbability = 0.9899;
    }
    const QString text = read(page()).text;
    EXPECT_TRUE(text.contains(QStringLiteral("certain only to 0.98")))
        << "never rounded up to what is asked for";
}

TEST_F(Report, DrawsNoChartOfFewerThanFiveAnswers) {
    answer(4);
    EXPECT_TRUE(page().contains(QStringLiteral("too few to draw")));
    EXPECT_FALSE(page().contains(QStringLiteral("Course over the session")));
}

TEST_F(Report, ListsEveryAnswerWithTimesFromTheStart) {
    answer(6);
    const Page found = read(page());
    EXPECT_GE(found.elements.count(QStringLiteral("tr")), static_cast<int>(session.state.answers.size()));
    EXPECT_TRUE(found.text.contains(QStringLiteral("8 min 48 s"))); // 14:11:00 after 14:02:11.25
}

TEST_F(Report, CarriesTheCautionsAndTheProtocolsHash) {
    answer(6);
    const QString text = read(page()).text;
    EXPECT_TRUE(text.contains(QStringLiteral("Preferences are not a safety case")));
    EXPECT_TRUE(text.contains(QString::fromStdString(session.state.began.protocol.hash)));
}

TEST_F(Report, IsWrittenBesideItsTables) {
    answer(6);
    MemoryFileSystem files;
    const auto written = writeSessionReport(files, session.state, findings, {.code = "K7-4821"}, "out/deep");
    ASSERT_TRUE(written.ok()) << describe(written.error());
    for (const char* name : {"report.html", "trials.csv", "codebook.csv", "weights.json"}) {
        const auto content = files.read(std::string("out/deep/") + name, 10'000'000);
        ASSERT_TRUE(content.ok()) << name;
        EXPECT_GT(content->size(), 200u) << name;
        EXPECT_EQ(content->find("K7-4821") != std::string::npos, std::string(name) == "report.html") << name;
    }
}

TEST_F(Report, ThatCannotBeWrittenSaysSo) {
    answer(6);
    MemoryFileSystem files;
    files.cutPowerAfter(6);
    EXPECT_FALSE(writeSessionReport(files, session.state, findings, {}, "out").ok());
}

TEST(ReportStyle, ReadsTheSameInHtmlAndXml) {
    EXPECT_FALSE(reportStyle().contains(QRegularExpression(QStringLiteral("[<>&\"']"))));
    EXPECT_FALSE(reportStyle().contains(QRegularExpression(QStringLiteral("%[1-9]"))));
}

TEST(MarkupWriter, KnowsWhatIsOpen) {
    Markup markup;
    markup.open("p").text(QStringLiteral("a < b"));
    EXPECT_THROW(static_cast<void>(markup.content()), std::logic_error);
    markup.close();
    EXPECT_EQ(markup.content(), QStringLiteral("<p>a &lt; b</p>\n"));
    EXPECT_THROW(markup.close(), std::logic_error);
}

} // namespace
