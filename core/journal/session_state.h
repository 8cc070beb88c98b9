// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/events.h"
#include "core/result.h"

#include <map>
#include <optional>
#include <span>
#include <vector>

namespace whichway {

/// An answer that stands (was not undone).
struct AnsweredTrial {
    int trial = 0;
    TrialKind kind = TrialKind::Main;
    std::string left = {}, right = {};
    int answer = 0;
    double responseTime = 0;
    int replays = 0;
    double wait = 0;
    double startSkew = 0;
    std::string time = {};        ///< of the answer
    std::uint64_t record = 0;     ///< number of the answer's record
    std::uint64_t planRecord = 0; ///< record of the plan that the pair came from, 0 if none
    double information = 0;       ///< bits the planner expected, 0 if none
};

struct QueuedPair {
    NamedPair pair = {}; ///< lower row first
    double information = 0;
    std::uint64_t planRecord = 0;
};

/// A trial that was shown at least once.
struct ShownTrial {
    TrialShown shown = {};        ///< as it was shown first
    std::uint64_t planRecord = 0; ///< record of the plan that its pair came from, 0 if none
    double information = 0;
};

struct Note {
    int trial = 0;
    std::string text = {};
    std::string time = {};
};

/// What the events so far amount to. Every field follows from the journal alone. A value.
struct SessionState {
    SessionBegan began = {};
    std::uint64_t events = 0;
    std::vector<AnsweredTrial> answers = {}; ///< in the order they were given
    std::optional<TrialShown> onStage = {};  ///< shown and not yet answered, or undone and to be shown again
    std::map<int, ShownTrial> shown = {};    ///< every trial that was shown, by number
    bool undoOpen = false;                   ///< the last thing that happened to a trial was its answer
    int instructionPage = 0;                 ///< last page shown
    int breakAfter = 0;                      ///< trial after which the last break was shown
    bool inBreak = false;
    std::optional<Paused> paused = {};
    std::vector<QueuedPair> queue = {}; ///< planned main pairs that were not shown yet
    std::vector<PlanAdopted> plans = {};
    std::vector<Note> notes = {};
    int undone = 0;
    int resumed = 0;
    int pauses = 0;
    bool estimateShown = false;
    double longestWait = 0;
    std::optional<SessionEnded> ended = {};
    std::optional<EstimateMade> estimate = {};
    std::string firstTime = {}, lastTime = {};

    bool isAnswered(int trial) const;
    int answered(TrialKind kind) const;
};

/// Applies one more record.
///
/// - Trials are shown in the schedule's order, except that a held-out one may come early while the next is a
/// main
///   one. A main trial, when first shown, takes the front of the queue, turned as the schedule says; any
///   other shows what is scheduled.
/// - Showing a trial again (after a pause, an undo or a resumption) names the same motions and takes nothing
/// from
///   the queue.
/// - Only the pair on the stage can be answered, with an answer that the study has, while not paused.
/// - Only the answer just given can be undone, until something else is shown; its pair is on the stage again.
/// - A plan replaces the queue. It knows only answers of main trials that stand, and pairs of the feature
/// table.
/// - After the end only notes and one estimate follow.
///
/// @return "journal.order" if the event cannot follow: then `state` is unchanged.
Result<void> apply(SessionState& state, const Record& record);

/// The state after all records, the first of which must be SessionBegan.
Result<SessionState> replayRecords(std::span<const Record> records);

} // namespace whichway
