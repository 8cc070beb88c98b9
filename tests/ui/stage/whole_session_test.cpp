// SPDX-License-Identifier: GPL-3.0-or-later
#include "tests/support/window_session.h"

#include <QLabel>
#include <map>

using namespace whichway;

namespace {

class WholeSession : public WindowSession {};

} // namespace

TEST_F(WholeSession, OfFortyMainAnswersByKeysAndClicksIsOnDiskAsItWasPressed) {
    begin();
    std::map<int, int> pressed;
    int breaks = 0, pages = 0;
    for (int steps = 0; kind() != PromptKind::Ended && steps < 1000; ++steps) {
        switch (kind()) {
        case PromptKind::Trial: {
            const int trial = controller->prompt().trial;
            const int answer = (trial % 3 + 1) * (trial * 7 % 5 < 2 ? 1 : -1);
            if (trial % 2)
                answerByKeys(answer);
            else
                answerByMouse(answer);
            pressed[trial] = answer;
            ASSERT_EQ(kind(), PromptKind::Saved);
            break;
        }
        case PromptKind::Saved:
            if (controller->prompt().trial % 2)
                goOn();
            else {
                click("stage.next");
                passGreyInterval();
            }
            break;
        default:
            breaks += kind() == PromptKind::Break;
            pages += kind() == PromptKind::Instruction;
            goOn();
        }
    }
    ASSERT_EQ(kind(), PromptKind::Ended);
    EXPECT_EQ(pages, 2);
    EXPECT_EQ(breaks, 2);

    const SessionState state = onDisk();
    const TrialSettings& planned = study.protocol.trials;
    EXPECT_EQ(planned.main, 40);
    EXPECT_EQ(state.answered(TrialKind::Practice), planned.practice);
    EXPECT_EQ(state.answered(TrialKind::Main), planned.main);
    EXPECT_EQ(state.answered(TrialKind::HeldOut), planned.heldOut);
    EXPECT_EQ(state.answered(TrialKind::Repeat), planned.repeat);
    EXPECT_EQ(state.answered(TrialKind::Catch), planned.catchTrials);
    EXPECT_EQ(state.answered(TrialKind::Identical), planned.identical);
    std::map<int, int> written;
    for (const AnsweredTrial& answer : state.answers) {
        EXPECT_TRUE(written.emplace(answer.trial, answer.answer).second) << "twice: " << answer.trial;
        EXPECT_GE(answer.responseTime, 0);
        EXPECT_EQ(answer.replays, 0);
        EXPECT_EQ(answer.wait, 0);
    }
    EXPECT_EQ(written, pressed);
    EXPECT_EQ(state.ended->how, SessionEnd::Finished);
    EXPECT_EQ(part<QLabel>(*stage, "stage.page")->text().toStdString(), study.protocol.texts.front().end);
}

TEST_F(WholeSession, GoesOnInNewWindowsWhereTheProgramEnded) {
    begin();
    toTrial();
    answerByKeys(2);
    goOn();
    ASSERT_EQ(kind(), PromptKind::Trial);
    const std::string left = controller->prompt().left;
    const SessionFolder folder = controller->folder();
    close();

    auto resumed = SessionController::resume(parts(), folder);
    ASSERT_TRUE(resumed.ok()) << describe(resumed.error());
    controller = std::move(*resumed);
    openWindows();
    ASSERT_EQ(kind(), PromptKind::Trial);
    EXPECT_EQ(controller->prompt().left, left);
    EXPECT_FALSE(controller->playback().seen());
    answerByKeys(-3);
    const SessionState state = onDisk();
    ASSERT_EQ(state.answers.size(), 2u);
    EXPECT_EQ(state.answers[0].answer, 2);
    EXPECT_EQ(state.answers[1].answer, -3);
}
