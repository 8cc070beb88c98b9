// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/conductor.h"

#include "tests/support/manual_clock.h"
#include "tests/support/memory_file_system.h"
#include "tests/support/queue_planner.h"
#include "tests/support/small_study.h"

#include <gtest/gtest.h>
#include <map>

using namespace whichway;

namespace {

const std::string kId = "0123456789abcdef0123456789abcdef";
const std::string kFolder = "study/pilots/" + kId;

/// One program's life with a session: every answer that was confirmed, by trial.
struct Life {
    std::map<int, int> confirmed = {};
    bool ended = false;
    Result<void> died = {}; ///< the error that ended it, if it did not end by itself
};

int answerFor(int trial) {
    const int sizes[] = {1, 2, 3};
    return (trial % 2 ? 1 : -1) * sizes[trial % 3];
}

/// Conducts until the end, `answers` answers, or the first error. `undoAt`: the trial whose first answer is
/// undone.
Life live(Conductor& conductor, int answers, int undoAt) {
    Life life;
    bool undone = false;
    conductor.setPatience(0);
    while (answers > 0) {
        const Prompt prompt = conductor.prompt();
        Result<void> done;
        if (prompt.kind == PromptKind::Ended) {
            life.ended = true;
            return life;
        }
        if (prompt.kind == PromptKind::Trial) {
            const bool first = prompt.trial == undoAt && !undone;
            done = conductor.answer({.answer = first ? 3 : answerFor(prompt.trial)});
            if (done && first) {
                life.confirmed[prompt.trial] = 3;
                undone = true;
                done = conductor.undo();
                if (done || conductor.state().undone > 0)
                    life.confirmed.erase(prompt.trial); // taken back, whether it was shown again or not
            } else if (done) {
                life.confirmed[prompt.trial] = answerFor(prompt.trial);
                --answers;
            }
        } else {
            done = conductor.next();
        }
        if (!done) {
            life.died = done;
            return life;
        }
    }
    return life;
}

Study shortStudy() {
    Study study = smallStudy(24, 2);
    study.protocol.trials = {.practice = 2,
                             .main = 28,
                             .heldOut = 5,
                             .repeat = 2,
                             .catchTrials = 2,
                             .identical = 1,
                             .breakAfter = 15};
    return study; // 40 answers in all
}

} // namespace

class PowerCut : public ::testing::TestWithParam<MemoryFileSystem::Loss> {};

// The power goes after every single step that the file system takes in a session of 40 answers.
TEST_P(PowerCut, KeepsEveryConfirmedAnswerExactlyOnceAndTheSessionCanGoOn) {
    const Study study = shortStudy();
    const ManualClock clock;
    const SessionSetup setup{.kind = SessionKind::Pilot, .code = "K7", .language = "", .seed = 9, .id = kId};
    int sessionsThatWentOn = 0;
    for (std::uint64_t cut = 0;; ++cut) {
        SCOPED_TRACE("power cut after step " + std::to_string(cut));
        MemoryFileSystem files;
        files.cutPowerAfter(cut);
        Life before;
        {
            QueuePlanner planner(24);
            auto begun = Conductor::begin(study, setup, {files, clock, planner, "test"});
            if (begun)
                before = live(**begun, 1000, 6);
        }
        if (!files.powerIsOff()) {
            ASSERT_TRUE(before.ended);
            ASSERT_GT(cut, 150u);
            break;
        }

        MemoryFileSystem disk = files.afterReboot(GetParam(), cut);
        const auto folder = openSessionFolder(disk, kFolder);
        if (!folder) {
            ASSERT_TRUE(before.confirmed.empty()) << describe(folder.error());
            continue;
        }
        const auto reading = readJournal(disk, folder->journal());
        ASSERT_TRUE(reading.ok()) << describe(reading.error());
        const auto state = replayRecords(reading->records);
        if (!state) {
            ASSERT_EQ(state.error().code, "journal.empty") << describe(state.error());
            ASSERT_TRUE(before.confirmed.empty());
            continue;
        }
        // The answer being given when the power went may be there or not; every confirmed one is, once,
        // unchanged.
        std::map<int, int> found;
        for (const AnsweredTrial& answer : state->answers)
            ASSERT_TRUE(found.emplace(answer.trial, answer.answer).second);
        for (const auto& [trial, answer] : before.confirmed) {
            ASSERT_TRUE(found.contains(trial)) << "trial " << trial;
            ASSERT_EQ(found.at(trial), answer);
        }
        ASSERT_LE(found.size(), before.confirmed.size() + 1);
        if (state->ended)
            continue;

        QueuePlanner planner(24);
        auto resumed = Conductor::resume(study, *folder, {disk, clock, planner, "test"});
        ASSERT_TRUE(resumed.ok()) << describe(resumed.error());
        const bool toTheEnd = cut % 10 == 0; // each estimate at the end takes its time
        const Life after = live(**resumed, toTheEnd ? 1000 : 2, 0);
        ASSERT_TRUE(after.died.ok()) << describe(after.died.error());
        ++sessionsThatWentOn;
        if (toTheEnd) {
            ASSERT_TRUE(after.ended);
            ASSERT_EQ((*resumed)->state().answers.size(), 40u);
        }
    }
    EXPECT_GT(sessionsThatWentOn, 150);
}

INSTANTIATE_TEST_SUITE_P(Losses, PowerCut,
                         ::testing::Values(MemoryFileSystem::Loss::Forget, MemoryFileSystem::Loss::Garble),
                         [](const auto& tested) {
                             return tested.param == MemoryFileSystem::Loss::Forget ? "Forget" : "Garble";
                         });

// A full disk at any one step: the step reports it, changes nothing, and works when it is tried again.
TEST(DiskFull, LosesNothingAtAnyStepAndTheStepCanBeTriedAgain) {
    const Study study = shortStudy();
    const ManualClock clock;
    for (std::uint64_t failing = 12; failing < 140; ++failing) {
        SCOPED_TRACE("step " + std::to_string(failing) + " fails");
        MemoryFileSystem files;
        QueuePlanner planner(24);
        auto begun = Conductor::begin(
            study, {.kind = SessionKind::Pilot, .code = "K7", .language = "", .seed = 9, .id = kId},
            {files, clock, planner, "test"});
        ASSERT_TRUE(begun.ok());
        files.failStep(failing);
        std::map<int, int> confirmed = live(**begun, 25, 6).confirmed;
        const Life rest = live(**begun, 10, 0);
        ASSERT_TRUE(rest.died.ok()) << describe(rest.died.error());
        confirmed.insert(rest.confirmed.begin(), rest.confirmed.end());
        begun->reset();
        const auto reading = readJournal(files, kFolder + "/journal.jsonl");
        ASSERT_TRUE(reading.ok()) << describe(reading.error());
        EXPECT_EQ(reading->tornBytes, 0u);
        const auto state = replayRecords(reading->records);
        ASSERT_TRUE(state.ok()) << describe(state.error());
        ASSERT_EQ(state->answers.size(), confirmed.size());
        for (const AnsweredTrial& answer : state->answers)
            ASSERT_EQ(confirmed.at(answer.trial), answer.answer);
    }
}
