// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/session_state.h"

#include "tests/support/small_study.h"

#include <gtest/gtest.h>
#include <limits>

using namespace whichway;

namespace {

/// Trials: 1 practice, 2 and 3 main (the second turned), 4 held-out, 5 repeat of 4, 6 main.
SessionBegan shortSession() {
    SessionBegan began{.session = std::string(32, '0'), .language = "en"};
    began.protocol = smallStudy(6, 2).protocol; // two instruction pages, three levels, no "cannot tell"
    began.schedule = {{.kind = TrialKind::Practice, .left = "extra1", .right = "extra2"},
                      {.kind = TrialKind::Main, .lowerLeft = true},
                      {.kind = TrialKind::Main, .lowerLeft = false},
                      {.kind = TrialKind::HeldOut, .left = "m004", .right = "m005"},
                      {.kind = TrialKind::Repeat, .left = "m005", .right = "m004", .repeatOf = 4},
                      {.kind = TrialKind::Main, .lowerLeft = true}};
    return began;
}

TrialShown shownPractice() {
    return {.trial = 1, .kind = TrialKind::Practice, .left = "extra1", .right = "extra2"};
}
TrialShown shownMain(int trial, const std::string& left, const std::string& right) {
    return {.trial = trial, .kind = TrialKind::Main, .left = left, .right = right};
}
TrialShown shownHeldOut() {
    return {.trial = 4, .kind = TrialKind::HeldOut, .left = "m004", .right = "m005"};
}
PlanAdopted plan(std::vector<NamedPair> pairs) {
    PlanAdopted made{.request = 1, .pairs = std::move(pairs)};
    for (std::size_t i = 0; i < made.pairs.size(); ++i)
        made.information.push_back(0.5 + 0.125 * static_cast<double>(i));
    return made;
}
AnswerGiven answer(int trial, int value = 2) {
    return {.trial = trial, .answer = value};
}

/// A session that events are told to, each of which must be possible unless it is asked otherwise.
class Told {
public:
    explicit Told(const std::vector<Event>& events = {}) {
        for (const Event& event : events)
            tell(event);
    }
    void tell(const Event& event) {
        const auto applied = apply(state, next(event));
        EXPECT_TRUE(applied.ok()) << (applied ? "" : describe(applied.error()));
    }
    /// Whether the event is refused with its number and the state left as it was.
    bool refuses(const Event& event) {
        const SessionState before = state;
        const auto applied = apply(state, next(event));
        if (applied) {
            state = before;
            return false;
        }
        EXPECT_EQ(applied.error().code, "journal.order");
        EXPECT_EQ(applied.error().place.line, static_cast<int>(before.events) + 1);
        EXPECT_EQ(state.events, before.events);
        EXPECT_EQ(state.answers.size(), before.answers.size());
        EXPECT_EQ(state.queue.size(), before.queue.size());
        EXPECT_EQ(state.shown.size(), before.shown.size());
        EXPECT_EQ(state.plans.size(), before.plans.size());
        EXPECT_TRUE(state.onStage == before.onStage);
        EXPECT_TRUE(state.paused == before.paused);
        EXPECT_EQ(state.undoOpen, before.undoOpen);
        EXPECT_EQ(state.inBreak, before.inBreak);
        EXPECT_EQ(state.instructionPage, before.instructionPage);
        EXPECT_EQ(state.lastTime, before.lastTime);
        return true;
    }
    SessionState state = {};

private:
    Record next(const Event& event) const {
        return {.number = state.events + 1,
                .run = 1,
                .time = "t" + std::to_string(state.events + 1),
                .event = event};
    }
};

const std::vector<Event> kToFirstMain = {shortSession(),
                                         plan({{"m000", "m001"}, {"m002", "m003"}}),
                                         InstructionShown{.page = 1},
                                         InstructionShown{.page = 2},
                                         shownPractice(),
                                         answer(1),
                                         InstructionShown{.page = 3}, // between practice and what counts
                                         shownMain(2, "m000", "m001")};

} // namespace

TEST(SessionState, FollowsASessionToItsEnd) {
    Told told(kToFirstMain);
    EXPECT_EQ(told.state.instructionPage, 3);
    EXPECT_EQ(told.state.onStage->trial, 2);
    ASSERT_EQ(told.state.queue.size(), 1u);
    told.tell(answer(2, -3));
    told.tell(shownMain(3, "m003", "m002")); // turned, as the schedule says
    told.tell(AnswerGiven{.trial = 3, .answer = 1, .responseTime = 2.5, .replays = 1, .startSkew = 0.01});
    told.tell(BreakShown{.afterTrial = 3});
    EXPECT_TRUE(told.state.inBreak);
    told.tell(shownHeldOut());
    EXPECT_FALSE(told.state.inBreak);
    told.tell(answer(4));
    told.tell(TrialShown{.trial = 5, .kind = TrialKind::Repeat, .left = "m005", .right = "m004"});
    told.tell(answer(5));
    PlanAdopted last = plan({{"m001", "m002"}});
    last.known = {2, 3};
    told.tell(last);
    told.tell(TrialShown{.trial = 6, .kind = TrialKind::Main, .left = "m001", .right = "m002", .wait = 1.5});
    told.tell(answer(6));
    told.tell(SessionEnded{});
    told.tell(EstimateMade{.answers = 3});
    told.tell(NoteTaken{.trial = 0, .text = "came late"});

    const SessionState& state = told.state;
    ASSERT_EQ(state.answers.size(), 6u);
    EXPECT_EQ(state.answered(TrialKind::Main), 3);
    const AnsweredTrial& turned = state.answers[2];
    EXPECT_EQ(turned.left, "m003");
    EXPECT_EQ(turned.answer, 1);
    EXPECT_EQ(turned.responseTime, 2.5);
    EXPECT_EQ(turned.replays, 1);
    EXPECT_EQ(turned.startSkew, 0.01);
    EXPECT_EQ(turned.planRecord, 2u);
    EXPECT_EQ(turned.information, 0.625);
    EXPECT_EQ(turned.record, 11u);
    EXPECT_EQ(turned.time, "t11");
    EXPECT_EQ(state.answers[3].planRecord, 0u);
    EXPECT_EQ(state.answers[5].wait, 1.5);
    EXPECT_EQ(state.longestWait, 1.5);
    EXPECT_EQ(state.plans.size(), 2u);
    EXPECT_EQ(state.firstTime, "t1");
    EXPECT_EQ(state.lastTime, "t" + std::to_string(state.events));
    EXPECT_EQ(state.estimate->answers, 3);
    EXPECT_EQ(state.notes.front().text, "came late");
}

TEST(SessionState, BeginsOnceAndFirst) {
    Told told;
    for (const Event& event :
         std::vector<Event>{InstructionShown{.page = 1}, plan({}), shownPractice(), answer(1),
                            AnswerUndone{.trial = 1}, BreakShown{}, Paused{}, WentOn{}, NoteTaken{},
                            SessionResumed{}, EstimateShown{}, SessionEnded{}, EstimateMade{}})
        EXPECT_TRUE(told.refuses(event)) << "type " << event.index();
    SessionBegan lost = shortSession();
    lost.schedule[4].repeatOf = 7;
    EXPECT_TRUE(told.refuses(lost));
    told.tell(shortSession());
    EXPECT_TRUE(told.refuses(shortSession()));
}

TEST(SessionState, ShowsPagesInOrder) {
    Told told({shortSession()});
    EXPECT_TRUE(told.refuses(InstructionShown{.page = 0}));
    EXPECT_TRUE(told.refuses(InstructionShown{.page = 2}));
    told.tell(InstructionShown{.page = 1});
    EXPECT_TRUE(told.refuses(InstructionShown{.page = 1}));
    told.tell(InstructionShown{.page = 2});
    told.tell(shownPractice());
    EXPECT_TRUE(told.refuses(InstructionShown{.page = 3})) << "a pair is on the stage";
    told.tell(answer(1));
    told.tell(InstructionShown{.page = 3});
    EXPECT_TRUE(told.refuses(InstructionShown{.page = 4})) << "there are two and the one after practice";
}

TEST(SessionState, ShowsTrialsInTurnAndAsScheduled) {
    Told told({shortSession(), plan({{"m000", "m001"}, {"m002", "m003"}})});
    EXPECT_TRUE(told.refuses(shownMain(2, "m000", "m001"))) << "practice comes first";
    EXPECT_TRUE(told.refuses(shownHeldOut())) << "and waits for no plan";
    for (const int nowhere : {0, -1, 7})
        EXPECT_TRUE(told.refuses(
            TrialShown{.trial = nowhere, .kind = TrialKind::Practice, .left = "extra1", .right = "extra2"}));
    EXPECT_TRUE(
        told.refuses(TrialShown{.trial = 1, .kind = TrialKind::Catch, .left = "extra1", .right = "extra2"}));
    EXPECT_TRUE(told.refuses(
        TrialShown{.trial = 1, .kind = TrialKind::Practice, .left = "extra2", .right = "extra1"}));
    told.tell(shownPractice());
    EXPECT_TRUE(told.refuses(shownMain(2, "m000", "m001"))) << "another pair is on the stage";
    told.tell(answer(1));
    EXPECT_TRUE(told.refuses(shownPractice())) << "it is answered";
    EXPECT_TRUE(told.refuses(shownMain(2, "m001", "m000"))) << "sides swapped";
    EXPECT_TRUE(told.refuses(shownMain(2, "m002", "m003"))) << "the second of the queue";
    EXPECT_TRUE(told.refuses(shownMain(3, "m001", "m000"))) << "trial 2 comes first";
    told.tell(shownMain(2, "m000", "m001"));
}

TEST(SessionState, LetsAHeldOutTrialComeEarlyWhileNoMainPairIsReady) {
    Told told({shortSession(), shownPractice(), answer(1)});
    EXPECT_TRUE(told.refuses(shownMain(2, "m000", "m001"))) << "no pair was planned";
    EXPECT_TRUE(
        told.refuses(TrialShown{.trial = 5, .kind = TrialKind::Repeat, .left = "m005", .right = "m004"}))
        << "the trial that it repeats was not shown";
    told.tell(shownHeldOut());
    told.tell(answer(4));
    told.tell(plan({{"m000", "m001"}, {"m002", "m003"}}));
    told.tell(shownMain(2, "m000", "m001"));
    told.tell(answer(2));
    told.tell(shownMain(3, "m003", "m002"));
    told.tell(answer(3));
    told.tell(TrialShown{.trial = 5, .kind = TrialKind::Repeat, .left = "m005", .right = "m004"});
}

TEST(SessionState, TakesAnswersOnlyToThePairOnTheStage) {
    Told told(kToFirstMain);
    EXPECT_TRUE(told.refuses(answer(1)));
    EXPECT_TRUE(told.refuses(answer(3)));
    EXPECT_TRUE(told.refuses(answer(2, 4))) << "there are three levels";
    EXPECT_TRUE(told.refuses(answer(2, -4)));
    EXPECT_TRUE(told.refuses(answer(2, 0))) << "the study does not allow it";
    EXPECT_TRUE(told.refuses(answer(2, std::numeric_limits<int>::min())));
    told.tell(answer(2, -3));
    EXPECT_TRUE(told.refuses(answer(2)));

    SessionBegan withZero = shortSession();
    withZero.protocol.cannotTell = true;
    Told other({withZero, shownPractice()});
    other.tell(answer(1, 0));
}

TEST(SessionState, UndoesTheLastAnswerAndShowsItsPairAgain) {
    Told told(kToFirstMain);
    EXPECT_TRUE(told.refuses(AnswerUndone{.trial = 1})) << "another pair is on the stage";
    EXPECT_TRUE(told.refuses(AnswerUndone{.trial = 2})) << "it has no answer yet";
    told.tell(answer(2, 3));
    EXPECT_TRUE(told.state.undoOpen);
    EXPECT_TRUE(told.refuses(AnswerUndone{.trial = 1}));
    told.tell(AnswerUndone{.trial = 2});
    EXPECT_EQ(told.state.undone, 1);
    EXPECT_EQ(told.state.answers.size(), 1u);
    EXPECT_EQ(told.state.onStage->trial, 2);
    EXPECT_TRUE(told.refuses(AnswerUndone{.trial = 1})) << "only the last can be undone";
    EXPECT_TRUE(told.refuses(shownMain(3, "m003", "m002")));
    told.tell(shownMain(2, "m000", "m001"));
    EXPECT_EQ(told.state.queue.size(), 1u) << "no other pair was taken";
    told.tell(answer(2, -1));
    EXPECT_EQ(told.state.answers.back().answer, -1);
    EXPECT_EQ(told.state.answers.back().planRecord, 2u);
    told.tell(NoteTaken{.text = "yawns"});
    EXPECT_TRUE(told.state.undoOpen) << "a note shows nothing";
    told.tell(shownMain(3, "m003", "m002"));
    EXPECT_TRUE(told.refuses(AnswerUndone{.trial = 2}));
}

TEST(SessionState, ClosesUndoWhenAnythingIsShown) {
    for (const Event& shown : std::vector<Event>{InstructionShown{.page = 1}, BreakShown{.afterTrial = 1}}) {
        Told told({shortSession(), shownPractice(), answer(1)});
        told.tell(shown);
        EXPECT_FALSE(told.state.undoOpen);
        EXPECT_TRUE(told.refuses(AnswerUndone{.trial = 1}));
    }
}

TEST(SessionState, ShowsThePairAgainAfterAPauseWithoutTakingAnother) {
    Told told(kToFirstMain);
    EXPECT_TRUE(told.refuses(WentOn{}));
    told.tell(Paused{.reason = "participant"});
    EXPECT_TRUE(told.refuses(Paused{}));
    EXPECT_TRUE(told.refuses(answer(2)));
    EXPECT_TRUE(told.refuses(shownMain(2, "m000", "m001")));
    told.tell(plan({{"m001", "m003"}})); // planning goes on meanwhile
    told.tell(NoteTaken{.trial = 2, .text = "telephone"});
    told.tell(WentOn{});
    EXPECT_TRUE(told.refuses(shownMain(2, "m001", "m003"))) << "other motions than before";
    EXPECT_TRUE(
        told.refuses(TrialShown{.trial = 2, .kind = TrialKind::Catch, .left = "m000", .right = "m001"}));
    told.tell(shownMain(2, "m000", "m001"));
    EXPECT_EQ(told.state.queue.size(), 1u);
    told.tell(answer(2));
    EXPECT_EQ(told.state.answers.back().planRecord, 2u) << "of the plan that it came from";
    EXPECT_EQ(told.state.pauses, 1);

    told.tell(Paused{});
    EXPECT_TRUE(told.refuses(BreakShown{.afterTrial = 2}));
    EXPECT_TRUE(told.refuses(AnswerUndone{.trial = 2}));
}

TEST(SessionState, ShowsThePairAgainAfterAResumption) {
    Told told(kToFirstMain);
    told.tell(SessionResumed{.program = "test", .droppedBytes = 12});
    EXPECT_EQ(told.state.resumed, 1);
    told.tell(shownMain(2, "m000", "m001"));
    EXPECT_EQ(told.state.queue.size(), 1u);
    told.tell(answer(2));
    told.tell(SessionResumed{});
    EXPECT_TRUE(told.state.undoOpen) << "nothing was shown since the answer";
}

TEST(SessionState, LetsANewPlanReplaceTheQueue) {
    Told told(kToFirstMain);
    told.tell(plan({{"m004", "m005"}, {"m000", "m005"}, {"m001", "m002"}}));
    ASSERT_EQ(told.state.queue.size(), 3u);
    EXPECT_EQ(told.state.queue.front().pair, (NamedPair{"m004", "m005"}));
    EXPECT_EQ(told.state.queue.front().planRecord, 9u);
    told.tell(answer(2));
    EXPECT_TRUE(told.refuses(shownMain(3, "m003", "m002"))) << "of the plan before";
    told.tell(shownMain(3, "m005", "m004"));
    EXPECT_EQ(told.state.onStage->left, "m005");
}

TEST(SessionState, RefusesPlansThatCannotBe) {
    Told told(kToFirstMain);
    PlanAdopted bad = plan({{"m000", "m001"}});
    bad.information.push_back(0.5);
    EXPECT_TRUE(told.refuses(bad));
    bad = plan({{"m000", "m001"}});
    bad.known = {2};
    EXPECT_TRUE(told.refuses(bad)) << "not answered yet";
    bad.known = {1};
    EXPECT_TRUE(told.refuses(bad)) << "practice teaches nothing";
    bad.known = {99};
    EXPECT_TRUE(told.refuses(bad));
    EXPECT_TRUE(told.refuses(plan({{"m000", "m999"}})));
    EXPECT_TRUE(told.refuses(plan({{"m001", "m000"}}))) << "the lower row comes first";
    EXPECT_TRUE(told.refuses(plan({{"m001", "m001"}})));
    bad = plan({{"m002", "m003"}});
    bad.pending = {{"extra1", "m001"}};
    EXPECT_TRUE(told.refuses(bad)) << "a practice motion is not in the feature table";
    bad.pending = {{"m001", "m000"}}; // as presented
    told.tell(bad);
}

TEST(SessionState, BreaksOnlyAfterTheLastAnswer) {
    Told told({shortSession()});
    EXPECT_TRUE(told.refuses(BreakShown{.afterTrial = 0}));
    told.tell(shownPractice());
    EXPECT_TRUE(told.refuses(BreakShown{.afterTrial = 1}));
    told.tell(answer(1));
    EXPECT_TRUE(told.refuses(BreakShown{.afterTrial = 2}));
    told.tell(BreakShown{.afterTrial = 1});
    EXPECT_EQ(told.state.breakAfter, 1);
}

TEST(SessionState, NothingButNotesAndOneEstimateFollowTheEnd) {
    Told told(kToFirstMain);
    told.tell(Paused{});
    EXPECT_TRUE(told.refuses(EstimateMade{}));
    told.tell(SessionEnded{.how = SessionEnd::Stopped, .by = "participant"});
    EXPECT_FALSE(told.state.onStage || told.state.paused || told.state.undoOpen);
    EXPECT_TRUE(told.state.queue.empty());
    for (const Event& event :
         std::vector<Event>{InstructionShown{.page = 3}, plan({}), shownMain(2, "m000", "m001"), answer(2),
                            AnswerUndone{.trial = 1}, BreakShown{.afterTrial = 1}, Paused{}, WentOn{},
                            SessionResumed{}, SessionEnded{}})
        EXPECT_TRUE(told.refuses(event)) << "type " << event.index();
    told.tell(EstimateMade{});
    EXPECT_TRUE(told.refuses(EstimateMade{}));
    told.tell(EstimateShown{});
    EXPECT_TRUE(told.state.estimateShown);
}

TEST(SessionState, ReplaysRecordsAndNamesTheOneThatCannotFollow) {
    std::vector<Record> records;
    for (const Event& event : kToFirstMain)
        records.push_back({.number = records.size() + 1, .event = event});
    const auto state = replayRecords(records);
    ASSERT_TRUE(state.ok());
    EXPECT_EQ(state->events, records.size());
    std::swap(records[4], records[5]);
    const auto refused = replayRecords(records);
    ASSERT_FALSE(refused.ok());
    EXPECT_EQ(refused.error().code, "journal.order");
    EXPECT_EQ(replayRecords({}).error().code, "journal.empty");
}
