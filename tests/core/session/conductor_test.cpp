// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/conductor.h"

#include "tests/support/manual_clock.h"
#include "tests/support/memory_file_system.h"
#include "tests/support/queue_planner.h"
#include "tests/support/small_study.h"

#include <gtest/gtest.h>
#include <map>
#include <set>

using namespace whichway;

namespace {

const std::string kId = "0123456789abcdef0123456789abcdef";

class Conducting : public ::testing::Test {
protected:
    Study study = smallStudy();
    MemoryFileSystem files;
    ManualClock clock;
    QueuePlanner planner{30};
    std::unique_ptr<Conductor> conductor;

    Surroundings surroundings() {
        return {.files = files, .clock = clock, .planner = planner, .program = "test"};
    }

    void begin() {
        auto begun = Conductor::begin(
            study, {.kind = SessionKind::Pilot, .code = "K7", .language = "", .seed = 5, .id = kId},
            surroundings());
        ASSERT_TRUE(begun.ok()) << describe(begun.error());
        conductor = std::move(*begun);
        conductor->setPatience(0);
    }

    void resume() {
        conductor.reset();
        auto folder = openSessionFolder(files, "study/pilots/" + kId);
        ASSERT_TRUE(folder.ok()) << describe(folder.error());
        auto resumed = Conductor::resume(study, *folder, surroundings());
        ASSERT_TRUE(resumed.ok()) << describe(resumed.error());
        conductor = std::move(*resumed);
        conductor->setPatience(0);
    }

    PromptKind kind() const { return conductor->prompt().kind; }

    /// Goes on until a pair is on the stage.
    void toTrial() {
        for (int i = 0; i < 10 && kind() != PromptKind::Trial; ++i)
            ASSERT_TRUE(conductor->next().ok());
        ASSERT_EQ(kind(), PromptKind::Trial);
    }

    void answerAll() {
        while (kind() != PromptKind::Ended) {
            if (kind() == PromptKind::Trial)
                ASSERT_TRUE(conductor->answer({.answer = conductor->prompt().trial % 2 ? 2 : -1}).ok());
            else
                ASSERT_TRUE(conductor->next().ok());
        }
    }
};

} // namespace

TEST_F(Conducting, ShowsInstructionsPracticeAndEveryScheduledTrialOnceInOrder) {
    begin();
    EXPECT_EQ(kind(), PromptKind::Instruction);
    EXPECT_EQ(conductor->prompt().text, "Welcome.");
    ASSERT_TRUE(conductor->next().ok());
    EXPECT_EQ(conductor->prompt().text, "You will see two motions.");
    bool practiceEnded = false;
    int breaks = 0;
    std::vector<int> order;
    while (kind() != PromptKind::Ended) {
        if (kind() == PromptKind::PracticeEnds) {
            practiceEnded = true;
            EXPECT_EQ(order.size(), 3u);
        }
        breaks += kind() == PromptKind::Break;
        if (kind() == PromptKind::Trial) {
            order.push_back(conductor->prompt().trial);
            ASSERT_TRUE(conductor->answer({.answer = 1}).ok());
        } else {
            ASSERT_TRUE(conductor->next().ok());
        }
    }
    EXPECT_TRUE(practiceEnded);
    EXPECT_EQ(breaks, 2); // 57 trials that count, a break after each 20
    ASSERT_EQ(order.size(), conductor->state().began.schedule.size());
    for (std::size_t i = 0; i < order.size(); ++i)
        EXPECT_EQ(order[i], static_cast<int>(i) + 1);
    EXPECT_EQ(conductor->state().ended->how, SessionEnd::Finished);
    EXPECT_TRUE(conductor->state().estimate.has_value());
}

TEST_F(Conducting, NeverAsksAMainPairTwiceNorOneOfAnotherKind) {
    begin();
    answerAll();
    std::set<std::pair<std::string, std::string>> main, other;
    for (const AnsweredTrial& answer : conductor->state().answers) {
        if (answer.kind == TrialKind::Main)
            EXPECT_TRUE(main.insert(std::minmax(answer.left, answer.right)).second);
        else
            other.insert(std::minmax(answer.left, answer.right));
    }
    EXPECT_EQ(main.size(), 40u);
    for (const auto& pair : other)
        EXPECT_FALSE(main.contains(pair));
}

TEST_F(Conducting, NeverRepeatsAPairWhenThePlannerIsAlwaysLate) {
    planner = QueuePlanner(30, true);
    begin();
    std::set<std::pair<std::string, std::string>> main;
    while (kind() != PromptKind::Ended) {
        if (kind() == PromptKind::Trial)
            ASSERT_TRUE(conductor->answer({.answer = 1}).ok());
        else
            ASSERT_TRUE(conductor->next().ok());
    }
    for (const AnsweredTrial& answer : conductor->state().answers)
        if (answer.kind == TrialKind::Main)
            EXPECT_TRUE(main.insert(std::minmax(answer.left, answer.right)).second);
    EXPECT_EQ(main.size(), 40u);
}

TEST_F(Conducting, KeepsAFixedBatchToItsLastAnswerAndPlansTheNextWithTheRestAsPending) {
    study.protocol.planning.schedule = PlanSchedule::Fixed;
    study.protocol.planning.batch = 10;
    begin();
    answerAll();
    const auto& plans = conductor->state().plans;
    ASSERT_EQ(plans.size(), 4u);
    std::set<std::pair<std::string, std::string>> pairs;
    for (const PlanAdopted& plan : plans) {
        EXPECT_EQ(plan.pairs.size(), 10u);
        for (const NamedPair& pair : plan.pairs)
            EXPECT_TRUE(pairs.insert({pair.left, pair.right}).second);
    }
    EXPECT_TRUE(plans[0].known.empty());
    for (std::size_t i = 1; i < plans.size(); ++i)
        EXPECT_EQ(plans[i].known.size() + plans[i].pending.size(), 10 * i);
}

TEST_F(Conducting, PlansEveryRollingPairFromAllAnswersWhenThePlannerIsInTime) {
    begin();
    answerAll();
    const auto& plans = conductor->state().plans;
    ASSERT_EQ(plans.size(), 40u);
    for (std::size_t i = 0; i < plans.size(); ++i) {
        EXPECT_EQ(plans[i].known.size(), i);
        EXPECT_TRUE(plans[i].pending.empty());
        EXPECT_FALSE(plans[i].fallback);
    }
}

TEST_F(Conducting, ShowsAHeldOutPairWhileNoMainPairIsReadyAndWaitsOnlyWhenNoneIsLeft) {
    study.protocol.trials.practice = 0;
    planner.silent = true;
    begin();
    std::vector<TrialKind> kinds;
    for (int i = 0; i < 200 && kind() != PromptKind::WaitingForPlan; ++i) {
        if (kind() == PromptKind::Trial) {
            kinds.push_back(conductor->prompt().trialKind);
            ASSERT_TRUE(conductor->answer({.answer = -2}).ok());
        } else {
            ASSERT_TRUE(conductor->next().ok());
        }
    }
    ASSERT_EQ(kind(), PromptKind::WaitingForPlan);
    EXPECT_EQ(std::count(kinds.begin(), kinds.end(), TrialKind::HeldOut), 10);
    EXPECT_EQ(std::count(kinds.begin(), kinds.end(), TrialKind::Main), 0);
    clock.advance(std::chrono::milliseconds(1500));
    planner.silent = false;
    ASSERT_TRUE(conductor->next().ok());
    ASSERT_EQ(kind(), PromptKind::Trial);
    EXPECT_NEAR(conductor->state().longestWait, 1.5, 1e-9);
    answerAll();
    EXPECT_EQ(conductor->state().answers.size(), conductor->state().began.schedule.size());
}

TEST_F(Conducting, UndoesTheLastAnswerUntilTheNextPairIsShown) {
    begin();
    toTrial();
    const Prompt shown = conductor->prompt();
    EXPECT_EQ(conductor->undo().error().code, "session.not-now");
    ASSERT_TRUE(conductor->answer({.answer = 3}).ok());
    ASSERT_TRUE(conductor->undo().ok());
    EXPECT_EQ(conductor->prompt().trial, shown.trial);
    EXPECT_EQ(conductor->prompt().left, shown.left);
    ASSERT_TRUE(conductor->answer({.answer = -1}).ok());
    EXPECT_EQ(conductor->state().answers.back().answer, -1);
    EXPECT_EQ(conductor->state().undone, 1);
    ASSERT_TRUE(conductor->next().ok());
    EXPECT_EQ(conductor->undo().error().code, "session.not-now");
}

TEST_F(Conducting, AnUndoneMainAnswerTeachesNoPlan) {
    begin();
    while (conductor->state().answered(TrialKind::Main) < 3) {
        if (kind() == PromptKind::Trial)
            ASSERT_TRUE(conductor->answer({.answer = 2}).ok());
        else
            ASSERT_TRUE(conductor->next().ok());
    }
    const int trial = conductor->state().answers.back().trial;
    ASSERT_TRUE(conductor->undo().ok());
    ASSERT_TRUE(conductor->answer({.answer = -3}).ok());
    answerAll();
    int standing = 0;
    for (const AnsweredTrial& answer : conductor->state().answers)
        if (answer.trial == trial) {
            ++standing;
            EXPECT_EQ(answer.answer, -3);
        }
    EXPECT_EQ(standing, 1);
    EXPECT_EQ(conductor->state().answered(TrialKind::Main), 40);
}

TEST_F(Conducting, RefusesAnswersThatTheStudyDoesNotHave) {
    begin();
    EXPECT_EQ(conductor->answer({.answer = 1}).error().code, "session.not-now");
    toTrial();
    EXPECT_EQ(conductor->answer({.answer = 4}).error().code, "session.answer");
    EXPECT_EQ(conductor->answer({.answer = -4}).error().code, "session.answer");
    EXPECT_EQ(conductor->answer({.answer = 0}).error().code, "session.answer");
    EXPECT_EQ(conductor->next().error().code, "session.not-now");
    EXPECT_TRUE(conductor->answer({.answer = -3}).ok());
}

TEST_F(Conducting, PausesAndShowsThePairAgain) {
    begin();
    toTrial();
    const Prompt shown = conductor->prompt();
    ASSERT_TRUE(conductor->pause("participant").ok());
    EXPECT_EQ(kind(), PromptKind::Paused);
    EXPECT_EQ(conductor->answer({.answer = 1}).error().code, "session.not-now");
    EXPECT_EQ(conductor->next().error().code, "session.not-now");
    ASSERT_TRUE(conductor->goOn().ok());
    EXPECT_EQ(conductor->prompt().trial, shown.trial);
    EXPECT_EQ(conductor->goOn().error().code, "session.not-now");
    ASSERT_TRUE(conductor->answer({.answer = 1}).ok());
}

TEST_F(Conducting, StopsAtAnyMomentAndKeepsEveryAnswer) {
    begin();
    toTrial();
    ASSERT_TRUE(conductor->answer({.answer = 1}).ok());
    ASSERT_TRUE(conductor->next().ok());
    ASSERT_TRUE(conductor->note("The door slammed.").ok());
    ASSERT_TRUE(conductor->stop("participant").ok());
    EXPECT_EQ(kind(), PromptKind::Ended);
    EXPECT_EQ(conductor->stop("participant").error().code, "session.not-now");
    conductor.reset();
    const auto reading = readJournal(files, "study/pilots/" + kId + "/journal.jsonl");
    ASSERT_TRUE(reading.ok());
    const auto state = replayRecords(reading->records);
    ASSERT_TRUE(state.ok());
    EXPECT_EQ(state->answers.size(), 1u);
    EXPECT_EQ(state->notes.at(0).text, "The door slammed.");
    EXPECT_EQ(state->ended->how, SessionEnd::Stopped);
}

TEST_F(Conducting, ResumesAtThePairThatHadNoAnswer) {
    begin();
    toTrial();
    ASSERT_TRUE(conductor->answer({.answer = 1}).ok());
    ASSERT_TRUE(conductor->next().ok());
    const Prompt shown = conductor->prompt();
    resume();
    EXPECT_EQ(conductor->prompt().trial, shown.trial);
    EXPECT_EQ(conductor->prompt().left, shown.left);
    EXPECT_EQ(conductor->state().resumed, 1);
    answerAll();
    EXPECT_EQ(conductor->state().answers.size(), conductor->state().began.schedule.size());
}

TEST_F(Conducting, ResumesAfterEveryStepOfAShortSession) {
    study.protocol.trials = {.practice = 1,
                             .main = 6,
                             .heldOut = 2,
                             .repeat = 1,
                             .catchTrials = 1,
                             .identical = 1,
                             .breakAfter = 4};
    begin();
    for (int step = 0; step < 200 && kind() != PromptKind::Ended; ++step) {
        resume();
        if (kind() == PromptKind::Trial)
            ASSERT_TRUE(conductor->answer({.answer = 1 + step % 3}).ok());
        else if (kind() != PromptKind::Ended)
            ASSERT_TRUE(conductor->next().ok());
    }
    ASSERT_EQ(kind(), PromptKind::Ended);
    EXPECT_EQ(conductor->state().answers.size(), conductor->state().began.schedule.size());
}

TEST_F(Conducting, RefusesToResumeUnderAChangedProtocolOrBesideAnotherProgram) {
    begin();
    auto folder = openSessionFolder(files, "study/pilots/" + kId);
    ASSERT_TRUE(folder.ok());
    EXPECT_EQ(Conductor::resume(study, *folder, surroundings()).error().code, "file.locked");
    conductor.reset();
    study.protocol.hash[0] = 'f';
    EXPECT_EQ(Conductor::resume(study, *folder, surroundings()).error().code, "session.other-protocol");
}

TEST_F(Conducting, SaysWhenAPlanFails) {
    begin();
    toTrial();
    while (conductor->prompt().trialKind == TrialKind::Practice) {
        ASSERT_TRUE(conductor->answer({.answer = 1}).ok());
        toTrial();
    }
    planner.failing = true;
    while (kind() != PromptKind::WaitingForPlan) {
        if (kind() == PromptKind::Trial)
            ASSERT_TRUE(conductor->answer({.answer = 1}).ok());
        else
            ASSERT_TRUE(conductor->next().ok());
    }
    EXPECT_EQ(conductor->plannerStatus().lastProblem, "No pair.");
}
