// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/conductor.h"

#include "core/findings/session_posterior.h"
#include "core/session/planning_request.h"
#include "core/session/schedule.h"

#include <algorithm>
#include <chrono>
#include <stdexcept>
#include <utility>

namespace whichway {
namespace {

Error notNow(const std::string& step, const std::string& why) {
    return {.code = "session.not-now",
            .place = {},
            .message = "It is not the moment to " + step + ": " + why + ".",
            .remedy = "",
            .values = {step, why}};
}

const Texts* textsFor(const Protocol& protocol, const std::string& language) {
    for (const Texts& texts : protocol.texts)
        if (language.empty() || texts.language == language)
            return &texts;
    return nullptr;
}

/// The names that a trial shows: those of the schedule or, for main trials, of the planned pair.
NamedPair presented(const ScheduledTrial& trial, const NamedPair& planned) {
    if (trial.kind != TrialKind::Main)
        return {trial.left, trial.right};
    return trial.lowerLeft ? planned : NamedPair{planned.right, planned.left};
}

std::string compilerVersion() {
#if defined(__VERSION__)
    return __VERSION__;
#else
    return "unknown";
#endif
}

} // namespace

Conductor::Conductor(const Study& study, const Surroundings& surroundings, SessionFolder folder,
                     std::unique_ptr<FileLock> lock, JournalWriter journal)
    : study_(study), surroundings_(surroundings), folder_(std::move(folder)), lock_(std::move(lock)),
      journal_(std::move(journal)), patience_(study.protocol.trials.greyInterval) {}

Result<std::unique_ptr<Conductor>> Conductor::begin(const Study& study, const SessionSetup& setup,
                                                    const Surroundings& surroundings) {
    if (auto checked = checkParticipantCode(setup.code); !checked)
        return checked.error();
    const Texts* texts = textsFor(study.protocol, setup.language);
    if (!texts)
        return Error{.code = "session.language",
                     .place = {},
                     .message = "The study has no texts in “" + setup.language + "”.",
                     .remedy = "Choose one of its languages.",
                     .values = {setup.language}};
    auto schedule = drawSchedule(study.protocol, setup.seed);
    if (!schedule)
        return schedule.error();

    const std::string id = setup.id.empty() ? randomSessionId() : setup.id;
    auto folder = createSessionFolder(surroundings.files, study.folder, setup.kind, id, setup.code);
    if (!folder)
        return folder.error();
    auto lock = surroundings.files.lock(folder->lockFile());
    if (!lock)
        return lock.error();
    auto journal = JournalWriter::create(surroundings.files, surroundings.clock, folder->journal());
    if (!journal)
        return journal.error();

    std::unique_ptr<Conductor> conductor(
        new Conductor(study, surroundings, *folder, std::move(*lock), std::move(*journal)));
    conductor->texts_ = texts;
    SessionBegan began{.session = id,
                       .kind = setup.kind,
                       .program = surroundings.program,
                       .compiler = compilerVersion(),
                       .language = texts->language,
                       .seed = setup.seed,
                       .protocol = study.protocol,
                       .schedule = std::move(*schedule)};
    if (auto written = conductor->append(std::move(began)); !written)
        return written.error();
    conductor->askForPlan();
    if (!texts->instructions.empty())
        if (auto written = conductor->append(InstructionShown{.page = 1}); !written)
            return written.error();
    return conductor;
}

Result<std::unique_ptr<Conductor>> Conductor::resume(const Study& study, const SessionFolder& folder,
                                                     const Surroundings& surroundings) {
    auto lock = surroundings.files.lock(folder.lockFile());
    if (!lock)
        return lock.error();
    auto reading = readJournal(surroundings.files, folder.journal());
    if (!reading)
        return reading.error();
    auto state = replayRecords(reading->records);
    if (!state)
        return state.error();
    if (state->ended)
        return Error{.code = "session.ended",
                     .place = {.file = folder.path},
                     .message = "This session has ended.",
                     .remedy = "Begin a new one."};
    if (state->began.protocol.hash != study.protocol.hash)
        return Error{.code = "session.other-protocol",
                     .place = {.file = folder.path},
                     .message = "The study was changed after this session began (protocol " +
                                state->began.protocol.hash.substr(0, 8) + ", now " +
                                study.protocol.hash.substr(0, 8) + ").",
                     .remedy = "Restore the study as it was, or close the session as it stands."};
    const Texts* texts = textsFor(study.protocol, state->began.language);
    if (!texts)
        texts = &study.protocol.texts.front();
    auto journal = JournalWriter::resume(surroundings.files, surroundings.clock, folder.journal(), *reading);
    if (!journal)
        return journal.error();

    std::unique_ptr<Conductor> conductor(
        new Conductor(study, surroundings, folder, std::move(*lock), std::move(*journal)));
    conductor->texts_ = texts;
    conductor->state_ = std::move(*state);
    for (const PlanAdopted& plan : conductor->state_.plans)
        conductor->lastRequest_ = std::max(conductor->lastRequest_, plan.request);
    if (auto written = conductor->append(
            SessionResumed{.program = surroundings.program, .droppedBytes = reading->tornBytes});
        !written)
        return written.error();
    if (conductor->state_.onStage && !conductor->state_.paused)
        if (auto shown = conductor->showAgain(*conductor->state_.onStage); !shown)
            return shown.error();
    conductor->askForPlan();
    return conductor;
}

Result<void> Conductor::append(Event event) {
    // An event that could not be read back must never reach the disk: try it on a copy first.
    SessionState after = state_;
    const Record trial{.number = state_.events + 1, .event = event};
    if (auto possible = apply(after, trial); !possible)
        throw std::logic_error("Conductor: " + describe(possible.error()));
    auto record = journal_.append(std::move(event));
    if (!record)
        return record.error();
    if (auto applied = apply(state_, *record); !applied)
        throw std::logic_error("Conductor: " + describe(applied.error()));
    return {};
}

Prompt Conductor::prompt() const {
    Prompt prompt;
    prompt.pages = static_cast<int>(texts_->instructions.size());
    prompt.done = static_cast<int>(state_.answers.size());
    prompt.total = static_cast<int>(state_.began.schedule.size());
    if (state_.ended) {
        prompt.kind = PromptKind::Ended;
        prompt.text = texts_->end;
    } else if (state_.paused) {
        prompt.kind = PromptKind::Paused;
    } else if (state_.onStage) {
        prompt.kind = PromptKind::Trial;
        prompt.trial = state_.onStage->trial;
        prompt.trialKind = state_.onStage->kind;
        prompt.left = state_.onStage->left;
        prompt.right = state_.onStage->right;
    } else if (waitingSince_) {
        prompt.kind = PromptKind::WaitingForPlan;
    } else if (state_.inBreak) {
        prompt.kind = PromptKind::Break;
        prompt.text = texts_->breakText;
    } else if (state_.undoOpen) {
        const AnsweredTrial& last = state_.answers.back();
        prompt.kind = PromptKind::Saved;
        prompt.trial = last.trial;
        prompt.trialKind = last.kind;
        prompt.left = last.left;
        prompt.right = last.right;
    } else if (state_.instructionPage > prompt.pages) {
        prompt.kind = PromptKind::PracticeEnds;
        prompt.text = texts_->practiceEnds;
    } else {
        prompt.kind = PromptKind::Instruction;
        prompt.page = state_.instructionPage;
        if (prompt.page > 0)
            prompt.text = texts_->instructions[static_cast<std::size_t>(prompt.page - 1)];
    }
    return prompt;
}

Result<void> Conductor::next() {
    const Prompt now = prompt();
    switch (now.kind) {
    case PromptKind::Ended:
        return notNow("go on", "the session has ended");
    case PromptKind::Trial:
        return notNow("go on", "the pair on the stage has no answer yet");
    case PromptKind::Paused:
        return notNow("go on", "the session is paused");
    case PromptKind::Instruction:
        if (now.page < now.pages)
            return append(InstructionShown{.page = now.page + 1});
        return showTrial();
    case PromptKind::Saved: {
        if (now.done == now.total)
            return finish();
        const bool practiceOver = now.trialKind == TrialKind::Practice && nextTrial(true) > 0 &&
                                  scheduled(nextTrial(true)).kind != TrialKind::Practice;
        if (practiceOver && !texts_->practiceEnds.empty() && state_.instructionPage <= now.pages)
            return append(InstructionShown{.page = now.pages + 1});
        if (breakDue())
            return append(BreakShown{.afterTrial = now.trial});
        return showTrial();
    }
    case PromptKind::PracticeEnds:
    case PromptKind::Break:
    case PromptKind::WaitingForPlan:
        return showTrial();
    }
    return {};
}

bool Conductor::breakDue() const {
    const int every = state_.began.protocol.trials.breakAfter;
    const int counted = static_cast<int>(state_.answers.size()) - state_.answered(TrialKind::Practice);
    return every > 0 && counted > 0 && counted % every == 0 &&
           state_.breakAfter != state_.answers.back().trial;
}

const ScheduledTrial& Conductor::scheduled(int trial) const {
    return state_.began.schedule[static_cast<std::size_t>(trial - 1)];
}

int Conductor::nextTrial(bool mainReady) const {
    const int total = static_cast<int>(state_.began.schedule.size());
    for (int trial = 1; trial <= total; ++trial) {
        if (state_.isAnswered(trial))
            continue;
        if (scheduled(trial).kind != TrialKind::Main || mainReady)
            return trial;
        // No main pair is ready: a held-out pair, and only such a one, may come early in its place.
        for (int later = trial + 1; later <= total; ++later)
            if (!state_.isAnswered(later) && scheduled(later).kind == TrialKind::HeldOut)
                return later;
        return 0;
    }
    return 0;
}

Result<void> Conductor::showTrial() {
    if (scheduled(nextTrial(true)).kind == TrialKind::Main) {
        const bool rolling = state_.began.protocol.planning.schedule == PlanSchedule::Rolling;
        if (rolling || state_.queue.empty())
            if (auto adopted = adoptPlan(); !adopted)
                return adopted;
    }
    const int trial = nextTrial(!state_.queue.empty());
    if (trial == 0) {
        if (!waitingSince_)
            waitingSince_ = surroundings_.clock.sinceBoot();
        if (asked_.empty())
            askForPlan();
        return {};
    }
    const ScheduledTrial& plan = scheduled(trial);
    const NamedPair pair = presented(plan, state_.queue.empty() ? NamedPair{} : state_.queue.front().pair);
    double wait = 0;
    if (waitingSince_)
        wait = std::chrono::duration<double>(surroundings_.clock.sinceBoot() - *waitingSince_).count();
    const bool isMain = plan.kind == TrialKind::Main;
    if (auto shown = append(TrialShown{
            .trial = trial, .kind = plan.kind, .left = pair.left, .right = pair.right, .wait = wait});
        !shown)
        return shown;
    waitingSince_.reset();
    if (isMain)
        askForPlan();
    return {};
}

Result<void> Conductor::showAgain(TrialShown shown) {
    shown.wait = 0;
    return append(std::move(shown));
}

Result<void> Conductor::answer(const GivenAnswer& given) {
    if (!state_.onStage || state_.paused || state_.ended)
        return notNow("answer", "no pair is on the stage");
    const Protocol& protocol = state_.began.protocol;
    const int level = std::abs(given.answer);
    if (level > protocol.levels || (given.answer == 0 && !protocol.cannotTell))
        return Error{.code = "session.answer",
                     .place = {},
                     .message = given.answer == 0
                                    ? std::string("This study does not allow “cannot tell”.")
                                    : "Confidence " + std::to_string(level) + " is not one of 1 to " +
                                          std::to_string(protocol.levels) + ".",
                     .remedy = "Answer again."};
    const bool isMain = state_.onStage->kind == TrialKind::Main;
    if (auto written = append(AnswerGiven{.trial = state_.onStage->trial,
                                          .answer = given.answer,
                                          .responseTime = given.responseTime,
                                          .replays = given.replays,
                                          .startSkew = given.startSkew});
        !written)
        return written;
    if (isMain && protocol.planning.schedule == PlanSchedule::Rolling)
        askForPlan();
    return {};
}

Result<void> Conductor::undo() {
    if (!state_.undoOpen || state_.paused || state_.ended)
        return notNow("undo", "there is no answer that can still be taken back");
    const AnsweredTrial last = state_.answers.back();
    if (auto undone = append(AnswerUndone{.trial = last.trial}); !undone)
        return undone;
    waitingSince_.reset();
    std::erase_if(asked_, [&](const Asked& asked) {
        return std::find(asked.known.begin(), asked.known.end(), last.trial) != asked.known.end();
    });
    if (auto shown = showAgain(*state_.onStage); !shown)
        return shown;
    if (last.kind == TrialKind::Main)
        askForPlan();
    return {};
}

Result<void> Conductor::pause(const std::string& reason) {
    if (state_.paused || state_.ended)
        return notNow("pause", state_.ended ? "the session has ended" : "it is paused already");
    return append(Paused{.reason = reason});
}

Result<void> Conductor::goOn() {
    if (!state_.paused)
        return notNow("go on", "the session is not paused");
    if (auto went = append(WentOn{}); !went)
        return went;
    return state_.onStage ? showAgain(*state_.onStage) : Result<void>();
}

Result<void> Conductor::note(const std::string& text) {
    return append(NoteTaken{.trial = state_.onStage ? state_.onStage->trial : 0, .text = text});
}

Result<void> Conductor::estimateShown() {
    return append(EstimateShown{});
}

Result<void> Conductor::stop(const std::string& by) {
    if (state_.ended)
        return notNow("stop", "the session has ended");
    return end({.how = SessionEnd::Stopped, .by = by, .reason = "asked for"});
}

Result<void> Conductor::finish() {
    return end({.how = SessionEnd::Finished, .by = "schedule", .reason = "every trial was answered"});
}

Result<void> Conductor::end(SessionEnded ended) {
    waitingSince_.reset();
    if (auto written = append(std::move(ended)); !written)
        return written;
    // The session is over and safe. A missing estimate costs a recomputation, so its failure is not the
    // session's.
    if (const auto posterior = sessionPosterior(state_))
        (void)append(estimateOf(*posterior, state_.answered(TrialKind::Main), reportSettings(state_)));
    return {};
}

void Conductor::askForPlan() {
    const Protocol& protocol = state_.began.protocol;
    const bool fixed = protocol.planning.schedule == PlanSchedule::Fixed;
    Asked asked;
    int remaining = 0;
    std::vector<const ScheduledTrial*> open;
    for (std::size_t i = 0; i < state_.began.schedule.size(); ++i) {
        const ScheduledTrial& trial = state_.began.schedule[i];
        const int number = static_cast<int>(i) + 1;
        if (trial.kind != TrialKind::Main)
            continue;
        if (state_.isAnswered(number)) {
            asked.known.push_back(number);
        } else if (state_.onStage && state_.onStage->trial == number) {
            asked.pending.push_back({state_.onStage->left, state_.onStage->right});
        } else {
            ++remaining;
            open.push_back(&trial);
        }
    }
    if (fixed) {
        // The batch stands until its last answer, so what is queued will be shown: it counts as pending too.
        for (std::size_t i = 0; i < state_.queue.size() && i < open.size(); ++i)
            asked.pending.push_back(presented(*open[i], state_.queue[i].pair));
        remaining -= static_cast<int>(state_.queue.size());
    }
    if (remaining <= 0)
        return;
    const int batch = std::min(protocol.planning.batch, remaining);
    asked.request =
        planRequestOf(state_.began, state_.answers, asked.known, asked.pending, ++lastRequest_, batch);
    surroundings_.planner.request(asked.request);
    asked_.push_back(std::move(asked));
}

bool Conductor::knowsAllShown(const Asked& asked) const {
    const auto known = [&](int trial) {
        return std::find(asked.known.begin(), asked.known.end(), trial) != asked.known.end();
    };
    const auto pending = [&](const std::string& left, const std::string& right) {
        return std::find(asked.pending.begin(), asked.pending.end(), NamedPair{left, right}) !=
               asked.pending.end();
    };
    return std::all_of(state_.answers.begin(), state_.answers.end(), [&](const AnsweredTrial& answer) {
        return answer.kind != TrialKind::Main || known(answer.trial) || pending(answer.left, answer.right);
    });
}

Result<void> Conductor::adoptPlan() {
    // A plan made before a pair was shown might propose that very pair: such requests are void.
    std::erase_if(asked_, [&](const Asked& asked) { return !knowsAllShown(asked); });
    const auto patience = std::chrono::milliseconds(static_cast<long long>(patience_ * 1000));
    if (auto taken = surroundings_.planner.take(patience)) {
        if (taken->ok()) {
            plan_ = std::move(taken->value());
        } else {
            planProblem_ = describe(taken->error());
            asked_.clear(); // asked again when a pair is wanted
        }
    }
    if (!plan_)
        return {};
    const Plan& plan = *plan_;
    const auto asked = std::find_if(asked_.begin(), asked_.end(),
                                    [&](const Asked& one) { return one.request.id == plan.request; });
    if (asked == asked_.end()) {
        plan_.reset();
        return {};
    }
    PlanAdopted event{.request = plan.request,
                      .known = asked->known,
                      .pending = asked->pending,
                      .seed = asked->request.seed,
                      .batch = asked->request.batch,
                      .plannerVersion = kPlannerVersion,
                      .fallback = static_cast<int>(asked->known.size()) < state_.answered(TrialKind::Main),
                      .relaxed = plan.relaxed,
                      .seconds = plan.seconds};
    const auto& names = state_.began.protocol.table.motions;
    for (const PlannedPair& planned : plan.pairs) {
        event.pairs.push_back({names[static_cast<std::size_t>(planned.pair.left)],
                               names[static_cast<std::size_t>(planned.pair.right)]});
        event.information.push_back(planned.information);
    }
    if (auto written = append(std::move(event)); !written)
        return written;
    planProblem_.clear();
    asked_.erase(asked_.begin(), asked + 1);
    plan_.reset();
    return {};
}

Conductor::PlannerStatus Conductor::plannerStatus() const {
    PlannerStatus status{.planReady = !state_.queue.empty(),
                         .queued = static_cast<int>(state_.queue.size()),
                         .lastProblem = planProblem_};
    if (!state_.plans.empty()) {
        const PlanAdopted& last = state_.plans.back();
        status.knownAnswers = static_cast<int>(last.known.size());
        status.lastSeconds = last.seconds;
        status.relaxed = last.relaxed;
    }
    return status;
}

} // namespace whichway
