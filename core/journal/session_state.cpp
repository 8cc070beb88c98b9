// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/session_state.h"

#include <algorithm>

namespace whichway {
namespace {

/// Applies one event. Every condition is checked before anything changes, so that a refused event leaves the
/// state as it was; `refusal` says why.
class Step {
public:
    Step(SessionState& state, const Record& record) : s_(state), record_(record) {}

    std::string refusal() const { return refusal_; }

    void operator()(const SessionBegan& began) {
        if (!require(s_.events == 0, "a session begins only once"))
            return;
        const int trials = static_cast<int>(began.schedule.size());
        for (const ScheduledTrial& trial : began.schedule)
            if (!require(trial.repeatOf >= 0 && trial.repeatOf <= trials,
                         "a scheduled trial repeats one that is not there"))
                return;
        s_.began = began;
        s_.firstTime = record_.time;
    }

    void operator()(const InstructionShown& shown) {
        const int pages = static_cast<int>(texts().instructions.size());
        if (!running() || !require(!s_.paused, "the session is paused") ||
            !require(!s_.onStage, "a pair is on the stage") ||
            !require(shown.page == s_.instructionPage + 1 && shown.page <= pages + 1,
                     "another page comes first"))
            return;
        s_.instructionPage = shown.page;
        s_.undoOpen = false;
    }

    void operator()(const PlanAdopted& plan) {
        if (!running() ||
            !require(plan.pairs.size() == plan.information.size(), "its lists differ in length") ||
            !require(std::all_of(plan.known.begin(), plan.known.end(),
                                 [&](int trial) { return isAnsweredMain(trial); }),
                     "it knows an answer that was not given") ||
            !require(std::all_of(plan.pending.begin(), plan.pending.end(),
                                 [&](const NamedPair& p) { return row(p.left) >= 0 && row(p.right) >= 0; }) &&
                         std::all_of(plan.pairs.begin(), plan.pairs.end(),
                                     [&](const NamedPair& p) {
                                         return row(p.left) >= 0 && row(p.left) < row(p.right);
                                     }),
                     "its pairs are not in the feature table"))
            return;
        s_.queue.clear();
        for (std::size_t i = 0; i < plan.pairs.size(); ++i)
            s_.queue.push_back(
                {.pair = plan.pairs[i], .information = plan.information[i], .planRecord = record_.number});
        s_.plans.push_back(plan);
    }

    void operator()(const TrialShown& shown) {
        const auto& schedule = s_.began.schedule;
        if (!running() || !require(!s_.paused, "the session is paused") ||
            !require(shown.trial >= 1 && shown.trial <= static_cast<int>(schedule.size()),
                     "there is no such trial") ||
            !require(!s_.isAnswered(shown.trial), "the trial is answered"))
            return;
        const NamedPair pair{shown.left, shown.right};
        if (const auto before = s_.shown.find(shown.trial); before != s_.shown.end()) {
            const TrialShown& first = before->second.shown;
            if (!require(pair == NamedPair{first.left, first.right} && shown.kind == first.kind,
                         "the trial showed other motions before") ||
                !require(!s_.onStage || s_.onStage->trial == shown.trial, "another pair is on the stage"))
                return;
        } else if (!showFirst(shown, pair, scheduled(shown.trial))) {
            return;
        }
        s_.onStage = shown;
        s_.inBreak = false;
        s_.undoOpen = false;
    }

    void operator()(const AnswerGiven& given) {
        if (!running() || !require(!s_.paused, "the session is paused") ||
            !require(s_.onStage && s_.onStage->trial == given.trial, "that trial is not on the stage") ||
            !require(given.answer >= -s_.began.protocol.levels && given.answer <= s_.began.protocol.levels &&
                         (given.answer != 0 || s_.began.protocol.cannotTell),
                     "the study has no such answer"))
            return;
        const ShownTrial& shown = s_.shown.at(given.trial);
        s_.answers.push_back({.trial = given.trial,
                              .kind = shown.shown.kind,
                              .left = shown.shown.left,
                              .right = shown.shown.right,
                              .answer = given.answer,
                              .responseTime = given.responseTime,
                              .replays = given.replays,
                              .wait = shown.shown.wait,
                              .startSkew = given.startSkew,
                              .time = record_.time,
                              .record = record_.number,
                              .planRecord = shown.planRecord,
                              .information = shown.information});
        s_.onStage.reset();
        s_.undoOpen = true;
    }

    void operator()(const AnswerUndone& undone) {
        if (!running() || !require(!s_.paused, "the session is paused") ||
            !require(s_.undoOpen && s_.answers.back().trial == undone.trial,
                     "that answer can no longer be undone"))
            return;
        s_.answers.pop_back();
        s_.onStage = s_.shown.at(undone.trial).shown;
        s_.undoOpen = false;
        ++s_.undone;
    }

    void operator()(const BreakShown& shown) {
        if (!running() || !require(!s_.paused, "the session is paused") ||
            !require(!s_.onStage, "a pair is on the stage") ||
            !require(!s_.answers.empty() && s_.answers.back().trial == shown.afterTrial,
                     "that trial was not the last to be answered"))
            return;
        s_.inBreak = true;
        s_.breakAfter = shown.afterTrial;
        s_.undoOpen = false;
    }

    void operator()(const Paused& paused) {
        if (!running() || !require(!s_.paused, "the session is paused already"))
            return;
        s_.paused = paused;
        ++s_.pauses;
    }

    void operator()(const WentOn&) {
        if (!running() || !require(s_.paused.has_value(), "the session is not paused"))
            return;
        s_.paused.reset();
    }

    void operator()(const NoteTaken& note) {
        if (begun())
            s_.notes.push_back({.trial = note.trial, .text = note.text, .time = record_.time});
    }

    void operator()(const SessionResumed&) {
        if (running())
            ++s_.resumed;
    }

    void operator()(const EstimateShown&) {
        if (begun())
            s_.estimateShown = true;
    }

    void operator()(const SessionEnded& ended) {
        if (!running())
            return;
        s_.ended = ended;
        s_.onStage.reset();
        s_.paused.reset();
        s_.inBreak = false;
        s_.undoOpen = false;
        s_.queue.clear();
    }

    void operator()(const EstimateMade& estimate) {
        if (!require(s_.ended.has_value(), "the session has not ended") ||
            !require(!s_.estimate, "there is an estimate already"))
            return;
        s_.estimate = estimate;
    }

private:
    bool require(bool condition, const char* otherwise) {
        if (!condition && refusal_.empty())
            refusal_ = otherwise;
        return condition;
    }
    bool begun() { return require(s_.events > 0, "the session has not begun"); }
    bool running() { return begun() && require(!s_.ended, "the session has ended"); }

    bool isAnsweredMain(int trial) const {
        return std::any_of(s_.answers.begin(), s_.answers.end(), [&](const AnsweredTrial& answer) {
            return answer.trial == trial && answer.kind == TrialKind::Main;
        });
    }

    /// Of the feature table, or -1.
    std::ptrdiff_t row(const std::string& motion) const {
        const auto& motions = s_.began.protocol.table.motions;
        const auto found = std::find(motions.begin(), motions.end(), motion);
        return found == motions.end() ? -1 : found - motions.begin();
    }

    /// Trials come in the schedule's order, but a held-out one may come early while a main pair is being
    /// planned.
    bool isTurnOf(int trial) const {
        for (int earlier = 1; earlier < trial; ++earlier)
            if (!s_.isAnswered(earlier))
                return scheduled(earlier).kind == TrialKind::Main &&
                       scheduled(trial).kind == TrialKind::HeldOut;
        return true;
    }
    const ScheduledTrial& scheduled(int trial) const {
        return s_.began.schedule[static_cast<std::size_t>(trial - 1)];
    }

    const Texts& texts() const {
        static const Texts none;
        for (const Texts& texts : s_.began.protocol.texts)
            if (texts.language == s_.began.language)
                return texts;
        return s_.began.protocol.texts.empty() ? none : s_.began.protocol.texts.front();
    }

    bool showFirst(const TrialShown& shown, const NamedPair& pair, const ScheduledTrial& scheduled) {
        if (!require(!s_.onStage, "another pair is on the stage") ||
            !require(isTurnOf(shown.trial), "an earlier trial comes first") ||
            !require(shown.kind == scheduled.kind, "the schedule has another kind of trial there"))
            return false;
        ShownTrial first{.shown = shown};
        if (scheduled.kind == TrialKind::Main) {
            if (!require(!s_.queue.empty(), "no pair was planned"))
                return false;
            const QueuedPair head = s_.queue.front();
            const NamedPair presented =
                scheduled.lowerLeft ? head.pair : NamedPair{head.pair.right, head.pair.left};
            if (!require(pair == presented, "another pair was planned"))
                return false;
            first.planRecord = head.planRecord;
            first.information = head.information;
            s_.queue.erase(s_.queue.begin());
        } else if (!require(pair == NamedPair{scheduled.left, scheduled.right},
                            "the schedule has other motions there")) {
            return false;
        }
        s_.shown.emplace(shown.trial, first);
        s_.longestWait = std::max(s_.longestWait, shown.wait);
        return true;
    }

    SessionState& s_;
    const Record& record_;
    std::string refusal_;
};

} // namespace

bool SessionState::isAnswered(int trial) const {
    return std::any_of(answers.begin(), answers.end(),
                       [&](const AnsweredTrial& answer) { return answer.trial == trial; });
}

int SessionState::answered(TrialKind kind) const {
    return static_cast<int>(std::count_if(answers.begin(), answers.end(),
                                          [&](const AnsweredTrial& answer) { return answer.kind == kind; }));
}

Result<void> apply(SessionState& state, const Record& record) {
    Step step(state, record);
    std::visit(step, record.event);
    if (!step.refusal().empty())
        return Error{.code = "journal.order",
                     .place = {.file = {}, .line = static_cast<int>(record.number)},
                     .message = "Event " + std::to_string(record.number) +
                                " of the journal cannot follow the events before it: " + step.refusal() + ".",
                     .remedy = "Restore the journal from a backup; nothing was changed here.",
                     .values = {std::to_string(record.number), step.refusal()}};
    ++state.events;
    state.lastTime = record.time;
    return {};
}

Result<SessionState> replayRecords(std::span<const Record> records) {
    SessionState state;
    for (const Record& record : records)
        if (auto applied = apply(state, record); !applied)
            return applied.error();
    if (state.events == 0)
        return Error{.code = "journal.empty",
                     .place = {},
                     .message = "The journal holds no whole event: the session never began.",
                     .remedy = "Begin a new session."};
    return state;
}

} // namespace whichway
