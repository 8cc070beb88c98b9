// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/support/window_session.h"

#include <QAbstractButton>
#include <QLabel>
#include <QLineEdit>

using namespace whichway;

namespace {

class Bench : public WindowSession {
protected:
    std::string textOf(const char* name) { return part<QLabel>(*bench, name)->text().toStdString(); }
    void benchKey(Qt::Key key) { QTest::keyClick(bench.get(), key, Qt::ControlModifier); }
};

} // namespace

TEST_F(Bench, IsBlindToWhatWasChosen) {
    // The first practice pair is the same in both sessions, and practice teaches the planner nothing.
    std::vector<QImage> seen;
    std::vector<std::string> descriptions;
    for (const int answer : {3, -1}) {
        begin();
        toTrial();
        answerByKeys(answer);
        goOn();
        QCoreApplication::processEvents();
        seen.push_back(bench->grab().toImage());
        descriptions.push_back(part(*bench, "bench.sessionLine")->accessibleDescription().toStdString());
    }
    EXPECT_EQ(seen[0], seen[1]);
    EXPECT_EQ(descriptions[0], "1 of 60 trials answered");
    answerByKeys(2);
    QCoreApplication::processEvents();
    EXPECT_NE(bench->grab().toImage(), seen[1]); // it does show that something was answered
}

TEST_F(Bench, KeepsNotesWithTheirTrial) {
    begin();
    toTrial();
    benchKey(Qt::Key_N);
    auto* text = part<QLineEdit>(*bench, "bench.noteText");
    EXPECT_EQ(bench->focusWidget(), text);
    QTest::keyClicks(text, "Door slammed.");
    QTest::keyClick(text, Qt::Key_Return);
    const SessionState state = onDisk();
    ASSERT_EQ(state.notes.size(), 1u);
    EXPECT_EQ(state.notes[0].text, "Door slammed.");
    EXPECT_EQ(state.notes[0].trial, controller->prompt().trial);
    EXPECT_TRUE(text->text().isEmpty());
    EXPECT_EQ(textOf("bench.note1"), "Door slammed.");
}

TEST_F(Bench, LeavesANoteInItsFieldWhenItCouldNotBeWritten) {
    begin();
    toTrial();
    auto* text = part<QLineEdit>(*bench, "bench.noteText");
    QTest::keyClicks(text, "Phone rang.");
    files.failStep(1);
    QTest::keyClick(text, Qt::Key_Return);
    EXPECT_EQ(text->text().toStdString(), "Phone rang.");
    EXPECT_TRUE(part(*bench, "bench.trouble")->isVisible());
    benchClick("bench.tryAgain");
    EXPECT_FALSE(part(*bench, "bench.trouble")->isVisible());
    ASSERT_EQ(onDisk().notes.size(), 1u);
}

TEST_F(Bench, PausesAndGoesOnByKey) {
    begin();
    toTrial();
    benchKey(Qt::Key_P);
    ASSERT_TRUE(onDisk().paused.has_value());
    EXPECT_EQ(onDisk().paused->reason, "experimenter");
    EXPECT_TRUE(part(*bench, "bench.paused")->isVisible());
    EXPECT_EQ(part<QAbstractButton>(*bench, "bench.pause")->text().toStdString(), "Go on");
    benchKey(Qt::Key_P);
    EXPECT_FALSE(onDisk().paused.has_value());
    EXPECT_FALSE(part(*bench, "bench.paused")->isVisible());
}

TEST_F(Bench, AsksBeforeItStops) {
    begin();
    toTrial();
    benchKey(Qt::Key_Period);
    EXPECT_TRUE(part(*bench, "bench.stopQuestion")->isVisible());
    EXPECT_FALSE(onDisk().ended.has_value());
    benchClick("bench.stopNo");
    EXPECT_FALSE(part(*bench, "bench.stopQuestion")->isVisible());
    benchKey(Qt::Key_Period);
    benchClick("bench.stopYes");
    ASSERT_TRUE(onDisk().ended.has_value());
    EXPECT_EQ(onDisk().ended->by, "experimenter");
    EXPECT_TRUE(part(*bench, "bench.close")->isVisible());
    EXPECT_FALSE(part(*bench, "bench.pause")->isEnabled());
}

TEST_F(Bench, ShowsWhatTheStageShowsAndHowThePlannerDoes) {
    begin();
    EXPECT_EQ(textOf("bench.stageFacts.4"), "no pair on the stage");
    toTrial();
    stage->grab();
    run(0.5);
    EXPECT_EQ(textOf("bench.stageFacts.1"), controller->prompt().left + ",  2.0\u00a0s");
    EXPECT_EQ(textOf("bench.stageFacts.4"), "opens when both were seen to the end");
    while (controller->state().plans.empty()) {
        answerByKeys(2);
        goOn();
        toTrial();
    }
    EXPECT_EQ(textOf("bench.plan"), "Next pairs ready");
    EXPECT_EQ(textOf("bench.plannerFacts.1"), std::to_string(controller->state().queue.size()) + " pairs");
    EXPECT_EQ(textOf("bench.plannerFacts.2"), "0 answers");
    EXPECT_EQ(textOf("bench.plannerFacts.4"), "0.00\u00a0s");
}

TEST_F(Bench, NamesEveryControl) {
    begin();
    for (const auto* button : bench->findChildren<QAbstractButton*>()) {
        EXPECT_FALSE(button->objectName().isEmpty());
        EXPECT_FALSE(button->accessibleName().isEmpty()) << button->objectName().toStdString();
    }
}
