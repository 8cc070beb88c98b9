// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/clock.h"
#include "core/files/file_system.h"
#include "core/journal/journal.h"
#include "core/journal/session_folder.h"
#include "core/journal/session_state.h"
#include "core/planning/planning_worker.h"
#include "core/result.h"
#include "core/study/study.h"

#include <chrono>
#include <memory>
#include <optional>
#include <string>

namespace whichway {

enum class PromptKind {
    Instruction,    ///< a page of the instructions; `next` goes on
    PracticeEnds,   ///< the text between practice and the trials that count; `next` goes on
    Trial,          ///< a pair is on the stage; `answer` goes on
    Saved,          ///< the answer is on disk; `undo` takes it back, `next` shows the next pair
    Break,          ///< `next` goes on
    Paused,         ///< `goOn` goes on
    WaitingForPlan, ///< no pair is ready; `next` tries again
    Ended
};

/// What must be shown now.
struct Prompt {
    PromptKind kind = PromptKind::Instruction;
    std::string text = {};   ///< of an instruction, the practice's end, a break, the end
    int page = 0, pages = 0; ///< of the instructions, from 1
    int trial = 0;           ///< number in the schedule, from 1: on the stage, or just saved
    TrialKind trialKind = TrialKind::Main;
    std::string left = {}, right = {}; ///< motion names
    int done = 0, total = 0;           ///< answered trials and all trials of the schedule
};

struct GivenAnswer {
    int answer = 0;           ///< -K … K; positive: left; 0 only where the study allows it
    double responseTime = -1; ///< s, negative: not known
    int replays = 0;
    double startSkew = 0; ///< s
};

struct SessionSetup {
    SessionKind kind = SessionKind::Participant;
    std::string code = {};
    std::string language = {}; ///< empty: the study's first
    std::uint64_t seed = 0;    ///< of the schedule and the plans
    std::string id = {};       ///< of the session, 32 hexadecimal digits; empty: a fresh random one
};

/// What a conductor works with; all of it must outlive the conductor.
struct Surroundings {
    FileSystem& files;
    const Clock& clock;
    Planner& planner;
    std::string program = {}; ///< version
};

/// Conducts one session: a state machine over the session's journal. Every step appends its event, synced,
/// before the next thing may be shown; `state` and `prompt` follow from the journal alone, so that a session
/// can be taken up where it ended. Not safe for use from two threads at once.
///
/// Steps that do not fit the moment return "session.not-now" and change nothing; a step whose event could not
/// be written returns the file's error and changes nothing either, so it can be tried again.
class Conductor {
public:
    /// Makes the session's folder in the study folder, draws the schedule, and writes the first event.
    static Result<std::unique_ptr<Conductor>> begin(const Study& study, const SessionSetup& setup,
                                                    const Surroundings& surroundings);
    /// Takes a session up again that was not ended. @return "session.other-protocol" if the study has changed
    /// since, "session.ended", "file.locked" if another program conducts it.
    static Result<std::unique_ptr<Conductor>> resume(const Study& study, const SessionFolder& folder,
                                                     const Surroundings& surroundings);

    const Study& study() const { return study_; }
    const Texts& texts() const { return *texts_; }
    const SessionFolder& folder() const { return folder_; }
    const SessionState& state() const { return state_; }
    Prompt prompt() const;
    /// How long `next` may wait for a plan that knows the last answer, in s (the study's grey interval by
    /// default).
    void setPatience(double seconds) { patience_ = seconds; }

    Result<void> next();
    Result<void> answer(const GivenAnswer& given);
    Result<void> undo();
    Result<void> pause(const std::string& reason);
    Result<void> goOn();
    Result<void> note(const std::string& text);
    Result<void> estimateShown();
    /// @param by "participant" or "experimenter"
    Result<void> stop(const std::string& by);

    /// For the bench: what the planner is about.
    struct PlannerStatus {
        bool planReady = false; ///< a queue of main pairs stands ready
        int queued = 0;
        int knownAnswers = 0;         ///< that the queue's plan knew
        double lastSeconds = 0;       ///< thread time of the last plan
        std::string lastProblem = {}; ///< why the last plan failed, or empty
        std::vector<std::string> relaxed = {};
    };
    PlannerStatus plannerStatus() const;

private:
    struct Asked {
        PlanRequest request;
        std::vector<int> known;
        std::vector<NamedPair> pending;
    };

    Conductor(const Study& study, const Surroundings& surroundings, SessionFolder folder,
              std::unique_ptr<FileLock> lock, JournalWriter journal);

    Result<void> append(Event event);
    Result<void> showTrial();
    Result<void> showAgain(TrialShown shown);
    Result<void> finish();
    Result<void> end(SessionEnded ended);
    void askForPlan();
    Result<void> adoptPlan();
    bool knowsAllShown(const Asked& asked) const;
    /// The next trial's number; 0 if it is a main trial, none is ready, and no held-out pair can come early
    /// instead.
    int nextTrial(bool mainReady) const;
    const ScheduledTrial& scheduled(int trial) const;
    bool breakDue() const;

    const Study& study_;
    Surroundings surroundings_;
    SessionFolder folder_;
    std::unique_ptr<FileLock> lock_;
    JournalWriter journal_;
    SessionState state_;
    const Texts* texts_ = nullptr;
    double patience_ = 0;
    std::vector<Asked> asked_; ///< requests whose plans may still be adopted
    std::optional<Plan> plan_; ///< taken from the planner and not yet adopted
    std::uint64_t lastRequest_ = 0;
    std::string planProblem_;
    std::optional<std::chrono::nanoseconds> waitingSince_; ///< since when no pair is ready
};

} // namespace whichway
