// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/support/window_session.h"

#include <QAbstractButton>
#include <QLabel>

using namespace whichway;

namespace {

class Stage : public WindowSession {
protected:
    bool isEnabled(const char* name) { return part(*stage, name)->isEnabled(); }
    bool isVisible(const char* name) { return part(*stage, name)->isVisible(); }
    std::string textOf(const char* name) { return part<QLabel>(*stage, name)->text().toStdString(); }
    std::size_t answers() { return onDisk().answers.size(); }
};

} // namespace

TEST_F(Stage, ShowsThePagesOfTheInstructionsBeforePractice) {
    begin();
    EXPECT_EQ(textOf("stage.page"), "Welcome.");
    goOn();
    EXPECT_EQ(textOf("stage.page"), "You will see two motions.");
    EXPECT_EQ(textOf("stage.progress"), "Page 2 of 2");
    goOn();
    EXPECT_EQ(kind(), PromptKind::Trial);
    EXPECT_EQ(textOf("stage.question"), study.protocol.texts.front().question);
}

TEST_F(Stage, RefusesAnAnswerUntilBothMotionsWereSeenToTheEnd) {
    begin();
    toTrial();
    stage->grab();
    run(1.5); // of 2 s
    EXPECT_FALSE(isEnabled("stage.chooseLeft"));
    key(Qt::Key_Left);
    key(Qt::Key_2);
    click("stage.chooseLeft");
    EXPECT_FALSE(isVisible("stage.confidence"));
    EXPECT_FALSE(controller->answer(2));
    EXPECT_EQ(answers(), 0u);
    run(0.6);
    EXPECT_TRUE(isEnabled("stage.chooseLeft"));
    EXPECT_TRUE(isEnabled("stage.chooseRight"));
}

TEST_F(Stage, SuggestsNoConfidenceWordAndSavesNothingBeforeOneIsPressed) {
    begin();
    toTrial();
    playToEnd();
    key(Qt::Key_Right);
    EXPECT_TRUE(isVisible("stage.confidence"));
    EXPECT_EQ(stage->focusWidget(), part(*stage, "stage.confidence")); // the group, not one of its words
    for (const char* word : {"stage.confidence1", "stage.confidence2", "stage.confidence3"})
        EXPECT_FALSE(part(*stage, word)->hasFocus()) << word;
    key(Qt::Key_Return); // Enter alone is no answer
    EXPECT_EQ(answers(), 0u);
    key(Qt::Key_4); // not a level of this study
    EXPECT_EQ(answers(), 0u);
    key(Qt::Key_Left); // the side may still be changed
    key(Qt::Key_3);
    const SessionState state = onDisk();
    ASSERT_EQ(state.answers.size(), 1u);
    EXPECT_EQ(state.answers[0].answer, 3);
}

TEST_F(Stage, OpensTheAnswerAtOnceAndCountsTheSecondsAndReplaysUntilIt) {
    begin();
    toTrial();
    playToEnd();
    key(Qt::Key_Space);
    stage->grab();
    run(0.4);
    key(Qt::Key_R);
    stage->grab();
    EXPECT_TRUE(isEnabled("stage.chooseLeft")); // seen once is seen
    run(1.0);
    key(Qt::Key_Left);
    key(Qt::Key_1);
    const SessionState state = onDisk();
    ASSERT_EQ(state.answers.size(), 1u);
    EXPECT_EQ(state.answers[0].replays, 2);
    EXPECT_NEAR(state.answers[0].responseTime, 1.4, 0.11);
}

TEST_F(Stage, TakesTheLastAnswerBackUntilTheNextPairIsAskedFor) {
    begin();
    toTrial();
    EXPECT_FALSE(isEnabled("stage.undo"));
    answerByKeys(2);
    const int trial = controller->prompt().trial;
    EXPECT_TRUE(isEnabled("stage.undo"));
    key(Qt::Key_Backspace);
    EXPECT_EQ(kind(), PromptKind::Trial);
    EXPECT_EQ(controller->prompt().trial, trial);
    EXPECT_TRUE(isEnabled("stage.chooseRight")); // both were seen already
    EXPECT_FALSE(isVisible("stage.confidence")); // the old choice is gone
    key(Qt::Key_Right);
    key(Qt::Key_1);
    goOn();
    EXPECT_FALSE(isEnabled("stage.undo"));
    key(Qt::Key_Backspace);
    const SessionState state = onDisk();
    ASSERT_EQ(state.answers.size(), 1u);
    EXPECT_EQ(state.answers[0].answer, -1);
    EXPECT_EQ(state.undone, 1);
}

TEST_F(Stage, AsksBeforeItStopsAndHoldsTheMotionsMeanwhile) {
    begin();
    toTrial();
    stage->grab();
    run(0.5);
    key(Qt::Key_Escape);
    EXPECT_TRUE(isVisible("stage.stopQuestion"));
    const double at = controller->playback().seconds();
    run(3);
    EXPECT_DOUBLE_EQ(controller->playback().seconds(), at);
    key(Qt::Key_Left);
    key(Qt::Key_Escape);
    EXPECT_FALSE(isVisible("stage.stopQuestion"));
    EXPECT_FALSE(onDisk().ended.has_value());
    run(0.3);
    EXPECT_NEAR(controller->playback().seconds(), at + 0.3, 1e-6);

    key(Qt::Key_Escape);
    click("stage.stopYes");
    ASSERT_TRUE(onDisk().ended.has_value());
    EXPECT_EQ(onDisk().ended->by, "participant");
    EXPECT_EQ(onDisk().ended->how, SessionEnd::Stopped);
    EXPECT_EQ(textOf("stage.page"), study.protocol.texts.front().end);
}

TEST_F(Stage, DoesNotCloseWhileTheSessionRuns) {
    begin();
    EXPECT_FALSE(stage->close());
    EXPECT_TRUE(isVisible("stage.stopQuestion"));
    click("stage.stopYes");
    EXPECT_TRUE(stage->close());
}

TEST_F(Stage, ShowsAPauseAndThenThePairFromItsStart) {
    begin();
    toTrial();
    playToEnd();
    key(Qt::Key_Left);
    ASSERT_TRUE(controller->pause("experimenter"));
    EXPECT_FALSE(isVisible("stage.pair"));
    EXPECT_NE(textOf("stage.page").find("Paused"), std::string::npos);
    key(Qt::Key_2);
    EXPECT_EQ(answers(), 0u);
    key(Qt::Key_Space);
    EXPECT_EQ(kind(), PromptKind::Trial);
    EXPECT_FALSE(controller->playback().seen());
    EXPECT_FALSE(isVisible("stage.confidence"));
    EXPECT_EQ(onDisk().pauses, 1);
}

TEST_F(Stage, LetsTheParticipantPause) {
    begin();
    toTrial();
    stage->grab();
    run(0.5);
    key(Qt::Key_P);
    ASSERT_TRUE(onDisk().paused.has_value());
    EXPECT_EQ(onDisk().paused->reason, "participant");
    click("stage.goOn");
    EXPECT_FALSE(onDisk().paused.has_value());
    answerByKeys(2);
    click("stage.pause"); // between the answer and the next pair, too
    key(Qt::Key_Space);
    EXPECT_EQ(kind(), PromptKind::Saved);
    EXPECT_TRUE(isEnabled("stage.next"));
    goOn();
    EXPECT_EQ(kind(), PromptKind::Trial);
}

TEST_F(Stage, ShowsAnAnswerAsSavedOnlyWhenItIsAndTriesAgain) {
    begin();
    toTrial();
    playToEnd();
    key(Qt::Key_Left);
    files.failStep(1);
    key(Qt::Key_2);
    EXPECT_TRUE(isVisible("stage.trouble"));
    EXPECT_EQ(textOf("stage.troubleHeading"), "The answer to practice pair 1 could not be written.");
    EXPECT_NE(textOf("stage.troubleText").find("The disk is full."), std::string::npos);
    EXPECT_EQ(textOf("stage.progress").find("saved"), std::string::npos);
    EXPECT_FALSE(isEnabled("stage.next"));
    EXPECT_EQ(kind(), PromptKind::Trial);
    EXPECT_FALSE(controller->next());

    files.failStep(1); // still full
    click("stage.tryAgain");
    EXPECT_TRUE(isVisible("stage.trouble"));
    click("stage.tryAgain");
    EXPECT_FALSE(isVisible("stage.trouble"));
    EXPECT_NE(textOf("stage.progress").find("saved"), std::string::npos);
    const SessionState state = onDisk();
    ASSERT_EQ(state.answers.size(), 1u);
    EXPECT_EQ(state.answers[0].answer, 2);
}

TEST_F(Stage, TriesAgainToShowAPairThatCouldNotBeWritten) {
    begin();
    toTrial();
    answerByKeys(1);
    files.failStep(1);
    goOn();
    EXPECT_TRUE(isVisible("stage.trouble"));
    EXPECT_EQ(kind(), PromptKind::Saved);
    click("stage.tryAgain");
    EXPECT_FALSE(isVisible("stage.trouble"));
    EXPECT_EQ(kind(), PromptKind::Trial);
    EXPECT_FALSE(controller->isBetween());
    answerByKeys(-1);
    EXPECT_EQ(answers(), 2u);
}

TEST_F(Stage, OffersCannotTellOnlyWhereTheStudyAllowsIt) {
    begin();
    EXPECT_EQ(stage->findChild<QWidget*>("stage.cannotTell"), nullptr);
    toTrial();
    playToEnd();
    key(Qt::Key_0);
    EXPECT_EQ(answers(), 0u);

    close();
    study.protocol.cannotTell = true;
    begin();
    toTrial();
    EXPECT_FALSE(isEnabled("stage.cannotTell"));
    playToEnd();
    click("stage.cannotTell");
    const SessionState state = onDisk();
    ASSERT_EQ(state.answers.size(), 1u);
    EXPECT_EQ(state.answers[0].answer, 0);
    EXPECT_TRUE(isEnabled("stage.next"));
}

TEST_F(Stage, StandsGreyBetweenTwoPairs) {
    begin();
    toTrial();
    answerByKeys(1);
    key(Qt::Key_Return);
    EXPECT_TRUE(controller->isBetween());
    clock.advance(std::chrono::milliseconds(499));
    controller->poll();
    EXPECT_TRUE(controller->isBetween());
    EXPECT_EQ(kind(), PromptKind::Saved);
    key(Qt::Key_Left);
    key(Qt::Key_Backspace);
    EXPECT_EQ(answers(), 1u);
    clock.advance(std::chrono::milliseconds(1));
    controller->poll();
    EXPECT_FALSE(controller->isBetween());
    EXPECT_EQ(kind(), PromptKind::Trial);
}

// WCAG 2.2, 2.5.5 (enhanced): targets of at least 44 by 44 px; ISO 9241-3 by way of the character height at
// 0.6 m: 19 px.
TEST_F(Stage, HasLargeTargetsLargeTextAndNamesForEveryControl) {
    study.protocol.cannotTell = true;
    begin();
    toTrial();
    playToEnd();
    key(Qt::Key_Left);
    constexpr int kRing = 8; // transparent, around the outline
    int buttons = 0;
    for (const auto* button : stage->findChildren<QAbstractButton*>()) {
        EXPECT_FALSE(button->objectName().isEmpty());
        EXPECT_FALSE(button->accessibleName().isEmpty());
        EXPECT_GE(button->font().pixelSize(), 19) << button->objectName().toStdString();
        if (!button->isVisible())
            continue;
        ++buttons;
        EXPECT_GE(button->width() - 2 * kRing, 44) << button->objectName().toStdString();
        EXPECT_GE(button->height() - 2 * kRing, 44) << button->objectName().toStdString();
    }
    EXPECT_GE(buttons, 9);
    for (const auto* label : stage->findChildren<QLabel*>())
        EXPECT_GE(label->font().pixelSize(), 19) << label->objectName().toStdString();
}

TEST_F(Stage, OverlapsNothingAndMirrorsAboutItsMiddle) {
    study.protocol.cannotTell = true;
    begin();
    toTrial();
    playToEnd();
    key(Qt::Key_Left);
    for (const QSize size : {QSize(1280, 720), QSize(1920, 1080), QSize(1366, 768), QSize(1680, 1050)}) {
        stage->resize(size);
        QCoreApplication::processEvents();
        const QRect left = part(*stage, "stage.chooseLeft")->geometry();
        const QRect right = part(*stage, "stage.chooseRight")->geometry();
        EXPECT_EQ(left.size(), right.size());
        EXPECT_EQ(left.left(), size.width() - 1 - right.right());
        EXPECT_EQ(part(*stage, "stage.undo")->x(),
                  size.width() - part(*stage, "stage.stop")->geometry().right() - 1);
        std::vector<std::pair<QString, QRect>> outlines;
        for (const auto* child : stage->findChildren<QWidget*>(QString(), Qt::FindDirectChildrenOnly))
            if (child->isVisible() && !qobject_cast<const QLabel*>(child)) {
                const int ring = qobject_cast<const QAbstractButton*>(child) ||
                                         child->objectName() == "stage.confidence" ||
                                         child->objectName() == "stage.pair"
                                     ? 8
                                     : 0;
                outlines.emplace_back(child->objectName(),
                                      child->geometry().adjusted(ring, ring, -ring, -ring));
            }
        for (std::size_t i = 0; i < outlines.size(); ++i) {
            EXPECT_TRUE(stage->rect().contains(outlines[i].second)) << outlines[i].first.toStdString();
            for (std::size_t j = i + 1; j < outlines.size(); ++j)
                EXPECT_FALSE(outlines[i].second.intersects(outlines[j].second))
                    << size.width() << ": " << outlines[i].first.toStdString() << " over "
                    << outlines[j].first.toStdString();
        }
    }
}
