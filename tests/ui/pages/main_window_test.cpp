// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/pages/main_window.h"

#include "tests/support/manual_clock.h"
#include "tests/support/memory_file_system.h"
#include "tests/support/queue_planner.h"
#include "tests/support/small_study.h"

#include "core/session/conductor.h"

#include <QAbstractButton>
#include <QLabel>
#include <QSignalSpy>
#include <QStackedWidget>
#include <QTest>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

std::string visibleText(const QWidget& window) {
    std::string text;
    for (const auto* label : window.findChildren<QLabel*>())
        if (label->isVisible())
            text += label->text().toStdString() + "\n";
    return text;
}

SessionRow finished(const std::string& code, const std::string& id) {
    return {.folder = {.path = "study/sessions/" + id, .id = id, .code = code},
            .state = SessionRow::State::Finished,
            .answered = 60,
            .total = 60};
}

class Main : public ::testing::Test {
protected:
    Study study = smallStudy();
    MainWindow window;

    Main() {
        window.show();
        QCoreApplication::processEvents();
    }
};

} // namespace

TEST_F(Main, SaysOnEveryEmptyPageWhatToDoNext) {
    for (int i = 0; i < kStops; ++i) {
        window.goTo(static_cast<Stop>(i));
        int actions = 0;
        for (const auto* button : window.centralWidget()
                                      ->findChild<QStackedWidget*>()
                                      ->currentWidget()
                                      ->findChildren<QAbstractButton*>())
            actions += button->isVisible() && button->isEnabled();
        EXPECT_GE(actions, 1) << i;
    }
}

TEST_F(Main, GoesToEveryStopByKeyAndBack) {
    for (int i = kStops - 1; i >= 0; --i) {
        QTest::keyClick(&window, static_cast<Qt::Key>(Qt::Key_1 + i), Qt::ControlModifier);
        EXPECT_EQ(window.current(), static_cast<Stop>(i));
    }
    QTest::keyClick(&window, Qt::Key_Left, Qt::AltModifier);
    EXPECT_EQ(window.current(), Stop::Rehearsal);
    QTest::mouseClick(window.findChild<QWidget*>("route.review"), Qt::LeftButton);
    EXPECT_EQ(window.current(), Stop::Review);
}

TEST_F(Main, ShowsABenchPageAndTakesItAway) {
    auto* bench = new QLabel("the bench");
    window.setBenchPage(bench);
    window.goTo(Stop::Bench);
    EXPECT_TRUE(bench->isVisible());
    window.setBenchPage(nullptr);
    EXPECT_NE(visibleText(window).find("No session is running"), std::string::npos);
}

TEST_F(Main, DoesNotCloseWhileASessionRuns) {
    window.showStudy(study);
    window.showSessions({}, "aa");
    QSignalSpy asked(&window, &MainWindow::closeAskedWhileRunning);
    EXPECT_FALSE(window.close());
    EXPECT_EQ(asked.count(), 1);
    EXPECT_EQ(window.current(), Stop::Bench);
    window.showSessions({}, "");
    EXPECT_TRUE(window.close());
}

TEST_F(Main, CoversTheRunningPersonInReview) {
    window.showStudy(study);
    window.showSessions({finished("A2", "aa"), finished("B3", "bb")}, "bb");
    window.goTo(Stop::Review);
    EXPECT_NE(visibleText(window).find("A2"), std::string::npos);
    EXPECT_EQ(visibleText(window).find("B3"), std::string::npos);
}

TEST_F(Main, WritesTheReportThatIsAskedFor) {
    std::string asked;
    window.reviewPage().setReportWriter([&](const SessionFolder& folder) -> Result<std::string> {
        asked = folder.id;
        return std::string("study/reports/aa");
    });
    window.showSessions({finished("A2", "aa")}, "");
    window.goTo(Stop::Review);
    QTest::mouseClick(window.findChild<QWidget*>("review.report1"), Qt::LeftButton);
    auto* outcome = window.findChild<QLabel*>("review.outcome");
    QTRY_COMPARE(outcome->text(), QString("The report of A2 is in study/reports/aa"));
    EXPECT_EQ(asked, "aa");

    window.reviewPage().setReportWriter([](const SessionFolder&) -> Result<std::string> {
        return Error{.code = "file.disk-full",
                     .place = {},
                     .message = "The disk is full.",
                     .remedy = "Free some space."};
    });
    QTest::mouseClick(window.findChild<QWidget*>("review.report1"), Qt::LeftButton);
    QTRY_VERIFY(outcome->text().contains("The disk is full."));
}

TEST(Sessions, AreListedAsTheirJournalsTellThem) {
    const Study study = smallStudy();
    MemoryFileSystem files;
    ManualClock clock;
    QueuePlanner planner(30);
    const Surroundings surroundings{.files = files, .clock = clock, .planner = planner, .program = "test"};
    const auto begin = [&](const std::string& code, const std::string& id, SessionKind kind) {
        auto conductor = Conductor::begin(
            study, {.kind = kind, .code = code, .language = "", .seed = 1, .id = id}, surroundings);
        EXPECT_TRUE(conductor.ok());
        return std::move(*conductor);
    };
    begin("K7", std::string(32, 'a'), SessionKind::Participant);
    EXPECT_TRUE(begin("B2", std::string(32, 'b'), SessionKind::Pilot)->stop("experimenter").ok());
    const std::string broken =
        begin("C3", std::string(32, 'c'), SessionKind::Participant)->folder().journal();
    std::string content = *files.read(broken, 1 << 20);
    content[40] = content[40] == 'X' ? 'Y' : 'X'; // in the first line, with a whole one behind it
    files.place(broken, content);

    const auto rows = listSessions(files, study.folder);
    ASSERT_TRUE(rows.ok());
    std::map<std::string, SessionRow> byCode;
    for (const SessionRow& row : *rows)
        byCode[row.folder.code] = row;
    ASSERT_EQ(byCode.size(), 3u);
    EXPECT_EQ(byCode["K7"].state, SessionRow::State::Unfinished);
    EXPECT_EQ(byCode["K7"].total, 60);
    EXPECT_EQ(byCode["B2"].state, SessionRow::State::Stopped);
    EXPECT_EQ(byCode["B2"].kind, SessionKind::Pilot);
    EXPECT_EQ(byCode["C3"].state, SessionRow::State::Unreadable);
    EXPECT_EQ(byCode["C3"].problem.code, "journal.corrupt");
    EXPECT_TRUE(sessionStateText(byCode["C3"]).startsWith("cannot be read"));
}
