// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/protocol.h"

#include <cstdint>
#include <string>
#include <variant>
#include <vector>

namespace whichway {

enum class SessionKind { Participant, Pilot, Simulated };
enum class TrialKind { Practice, Main, HeldOut, Repeat, Catch, Identical };
enum class Side { None, Left, Right };

/// A place in the session's schedule, fixed before the first answer. Main trials get their motions from a
/// plan.
struct ScheduledTrial {
    TrialKind kind = TrialKind::Main;
    std::string left = {}, right = {}; ///< motion names as presented; empty for main trials
    int repeatOf = 0;                  ///< number (from 1) of the scheduled trial that this one repeats, or 0
    Side expected = Side::None;        ///< for catch trials: the side of the better motion
    /// For main trials: whether the lower row of the feature table stands left (balanced in blocks of four).
    bool lowerLeft = true;
    bool operator==(const ScheduledTrial&) const = default;
};

/// Two motions by name.
struct NamedPair {
    std::string left = {}, right = {};
    bool operator==(const NamedPair&) const = default;
};

// The events of a session. Times are not here but in the record around each event. Trials are named by their
// number in the schedule, from 1.

struct SessionBegan {
    std::string session = {}; ///< random id, 32 hex digits
    SessionKind kind = SessionKind::Participant;
    std::string program = {}; ///< version
    std::string compiler = {};
    std::string language = {}; ///< of the texts shown
    std::uint64_t seed = 0;
    Protocol protocol = {};
    std::vector<ScheduledTrial> schedule = {};
    bool operator==(const SessionBegan&) const = default;
};

struct InstructionShown {
    int page = 0; ///< from 1
    bool operator==(const InstructionShown&) const = default;
};

/// A plan took the queue of main pairs over: the pairs wait in this order for the next main trials.
struct PlanAdopted {
    std::uint64_t request = 0;
    std::vector<int> known = {};         ///< trials whose answers the request knew
    std::vector<NamedPair> pending = {}; ///< shown or bound to be shown, not yet answered; presented order
    std::uint64_t seed = 0;
    int batch = 0;
    int plannerVersion = 0;
    bool fallback = false;                ///< not a plan for these answers: what was at hand
    std::vector<NamedPair> pairs = {};    ///< lower row of the feature table first
    std::vector<double> information = {}; ///< bits
    std::vector<std::string> relaxed = {};
    double seconds = 0; ///< the planner's thread time
    bool operator==(const PlanAdopted&) const = default;
};

struct TrialShown {
    int trial = 0;
    TrialKind kind = TrialKind::Main;
    std::string left = {}, right = {};
    double wait = 0; ///< s that the participant waited beyond the grey interval
    bool operator==(const TrialShown&) const = default;
};

struct AnswerGiven {
    int trial = 0;
    int answer = 0;          ///< -K … K, positive for left
    double responseTime = 0; ///< s from when answering became possible; negative: not known
    int replays = 0;
    double startSkew = 0; ///< s between the first frames of the two sides
    bool operator==(const AnswerGiven&) const = default;
};

struct AnswerUndone {
    int trial = 0;
    bool operator==(const AnswerUndone&) const = default;
};

struct BreakShown {
    int afterTrial = 0;
    bool operator==(const BreakShown&) const = default;
};

struct Paused {
    std::string reason = {}; ///< "participant", "experimenter", "display", "disk"
    bool operator==(const Paused&) const = default;
};

struct WentOn {
    bool operator==(const WentOn&) const = default;
};

struct NoteTaken {
    int trial = 0; ///< the trial on the stage, or 0
    std::string text = {};
    bool operator==(const NoteTaken&) const = default;
};

/// The program took a session up again after it had ended without closing it.
struct SessionResumed {
    std::string program = {};
    std::uint64_t droppedBytes = 0; ///< torn tail that was cut off
    bool operator==(const SessionResumed&) const = default;
};

struct EstimateShown {
    bool operator==(const EstimateShown&) const = default;
};

enum class SessionEnd { Finished, Stopped, ClosedAsPartial };

struct SessionEnded {
    SessionEnd how = SessionEnd::Finished;
    std::string by = {};     ///< "schedule", "participant", "experimenter"
    std::string reason = {}; ///< which rule ended it, in plain words
    bool operator==(const SessionEnded&) const = default;
};

/// The estimate at the end of the session, so that a later analysis can say whether it gives the same.
struct EstimateMade {
    int answers = 0; ///< main trials it learned from
    std::uint64_t seed = 0;
    int chains = 0, drawsPerChain = 0;
    std::vector<std::string> names = {}; ///< as in Posterior::summaries
    std::vector<double> mean = {}, deviation = {}, mcse = {};
    std::string drawsDigest = {}; ///< SHA-256 (hex) of the draws' bits
    bool converged = false;
    bool operator==(const EstimateMade&) const = default;
};

using Event = std::variant<SessionBegan, InstructionShown, PlanAdopted, TrialShown, AnswerGiven, AnswerUndone,
                           BreakShown, Paused, WentOn, NoteTaken, SessionResumed, EstimateShown, SessionEnded,
                           EstimateMade>;

/// An event as it stands in the journal.
struct Record {
    std::uint64_t number = 0;   ///< from 1
    int run = 0;                ///< which run of the program wrote it, from 1
    std::int64_t monotonic = 0; ///< ns; comparable within one run
    std::string time = {};      ///< local time with its offset from UTC
    Event event = {};
    bool operator==(const Record&) const = default;
};

} // namespace whichway
