// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/session/session_controller.h"

#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

constexpr std::chrono::milliseconds kPolling(10);
constexpr std::chrono::seconds kLate(1);

} // namespace

SessionController::SessionController(SessionParts parts) : parts_(std::move(parts)), playback_(parts_.clock) {
    began_ = parts_.clock.sinceBoot();
    polling_.setInterval(kPolling);
    polling_.setTimerType(Qt::PreciseTimer);
    connect(&polling_, &QTimer::timeout, this, &SessionController::poll);
}

Result<std::unique_ptr<SessionController>> SessionController::begin(SessionParts parts,
                                                                    const SessionSetup& setup) {
    std::unique_ptr<SessionController> controller(new SessionController(std::move(parts)));
    SessionParts& own = controller->parts_;
    auto conductor = Conductor::begin(
        own.study, setup,
        {.files = own.files, .clock = own.clock, .planner = *own.planner, .program = own.program});
    if (!conductor)
        return conductor.error();
    controller->conductor_ = std::move(*conductor);
    controller->conductor_->setPatience(0); // the grey interval is waited for here
    return controller;
}

Result<std::unique_ptr<SessionController>> SessionController::resume(SessionParts parts,
                                                                     const SessionFolder& folder) {
    std::unique_ptr<SessionController> controller(new SessionController(std::move(parts)));
    SessionParts& own = controller->parts_;
    auto conductor = Conductor::resume(
        own.study, folder,
        {.files = own.files, .clock = own.clock, .planner = *own.planner, .program = own.program});
    if (!conductor)
        return conductor.error();
    controller->conductor_ = std::move(*conductor);
    controller->conductor_->setPatience(0);
    controller->present(false);
    return controller;
}

bool SessionController::isLate() const {
    return between_ && parts_.clock.sinceBoot() > betweenUntil_ + kLate;
}

double SessionController::secondsRunning() const {
    return std::chrono::duration<double>(parts_.clock.sinceBoot() - began_).count();
}

SessionController::Progress SessionController::progress() const {
    const SessionState& state = conductor_->state();
    const Prompt now = prompt();
    Progress progress;
    const auto& schedule = state.began.schedule;
    const auto practices =
        static_cast<int>(std::count_if(schedule.begin(), schedule.end(),
                                       [](const auto& trial) { return trial.kind == TrialKind::Practice; }));
    const int practised = state.answered(TrialKind::Practice);
    if (state.onStage)
        progress.practice = state.onStage->kind == TrialKind::Practice;
    else if (now.kind == PromptKind::Saved)
        progress.practice = now.trialKind == TrialKind::Practice;
    else
        progress.practice = practised < practices;
    const int done = progress.practice ? practised : now.done - practised;
    progress.total = progress.practice ? practices : now.total - practices;
    progress.number = std::min(progress.total, done + (state.onStage ? 1 : 0));
    const int every = state.began.protocol.trials.breakAfter;
    if (every > 0 && !progress.practice) {
        const int next = (std::max(progress.number, 1) + every - 1) / every * every;
        progress.breakAfter = next < progress.total ? next : 0;
    }
    return progress;
}

bool SessionController::perform(const QString& failure, const Step& step,
                                const std::function<void()>& after) {
    auto done = step();
    if (!done) {
        if (done.error().code == "session.not-now")
            return false;
        trouble_ = Trouble{.text = failure, .error = done.error()};
        again_ = [this, failure, step, after] { perform(failure, step, after); };
        playback_.hold();
        Q_EMIT changed();
        return false;
    }
    if (trouble_)
        playback_.release();
    trouble_.reset();
    again_ = nullptr;
    if (after)
        after();
    Q_EMIT changed();
    if (state().ended)
        Q_EMIT ended();
    return true;
}

void SessionController::tryAgain() {
    if (const auto again = again_)
        again();
}

void SessionController::present(bool seen) {
    const Prompt now = prompt();
    if (now.kind != PromptKind::Trial && now.kind != PromptKind::Saved) {
        playback_.clear();
        return;
    }
    const Trajectory* left = motion(now.left);
    const Trajectory* right = motion(now.right);
    if (!left || !right) // the reader of study folders refuses a pair of unknown motions
        return;
    if (seen || now.kind == PromptKind::Saved)
        playback_.beginSeen(left->duration(), right->duration());
    else
        playback_.begin(left->duration(), right->duration());
    Q_EMIT presented();
}

void SessionController::startBetween() {
    between_ = true;
    betweenUntil_ = parts_.clock.sinceBoot() +
                    std::chrono::milliseconds(std::lround(study().protocol.trials.greyInterval * 1000));
    playback_.clear();
    polling_.start();
    Q_EMIT changed();
}

void SessionController::poll() {
    if (!between_ || trouble_ || parts_.clock.sinceBoot() < betweenUntil_)
        return;
    const bool wasLate = isLate();
    const auto step = [this]() -> Result<void> { return conductor_->next(); };
    if (prompt().kind == PromptKind::WaitingForPlan) {
        // Asking again changes nothing on the screen, unless it succeeds or the wait becomes long.
        if (auto shown = step(); shown && prompt().kind == PromptKind::WaitingForPlan) {
            if (isLate() != wasLate)
                Q_EMIT changed();
            return;
        } else if (!shown) {
            perform(tr("The next pair could not be written to the journal."), [shown] { return shown; });
            again_ = [this] {
                trouble_.reset();
                poll();
            };
            return;
        }
        between_ = false;
        polling_.stop();
        present(false);
        Q_EMIT changed();
        return;
    }
    perform(tr("The next step could not be written to the journal."), step, [this] {
        if (prompt().kind == PromptKind::WaitingForPlan)
            return;
        between_ = false;
        polling_.stop();
        present(false);
    });
}

bool SessionController::next() {
    if (between_ || trouble_)
        return false;
    const Prompt now = prompt();
    switch (now.kind) {
    case PromptKind::Trial:
    case PromptKind::Paused:
    case PromptKind::Ended:
        return false;
    case PromptKind::Instruction:
        if (now.page < now.pages)
            return perform(tr("The next page could not be written to the journal."),
                           [this] { return conductor_->next(); });
        [[fallthrough]];
    default:
        startBetween();
        return true;
    }
}

bool SessionController::answer(int answer) {
    if (between_ || trouble_ || prompt().kind != PromptKind::Trial || !playback_.seen())
        return false;
    const Progress where = progress();
    const GivenAnswer given{.answer = answer,
                            .responseTime = playback_.secondsOpen(),
                            .replays = playback_.replays(),
                            .startSkew = 0}; // one painting draws both first frames
    const QString failure = where.practice ? tr("The answer to practice pair %1 could not be written.")
                                           : tr("The answer to pair %1 could not be written.");
    return perform(failure.arg(where.number), [this, given] { return conductor_->answer(given); });
}

bool SessionController::undo() {
    if (between_ || trouble_ || prompt().kind != PromptKind::Saved)
        return false;
    return perform(
        tr("Taking the answer back could not be written."), [this] { return conductor_->undo(); },
        [this] { present(true); });
}

bool SessionController::pause(const std::string& reason) {
    if (trouble_)
        return false;
    return perform(
        tr("The pause could not be written to the journal."),
        [this, reason] { return conductor_->pause(reason); },
        [this] {
            between_ = false;
            polling_.stop();
            playback_.clear();
        });
}

bool SessionController::goOn() {
    if (trouble_ || prompt().kind != PromptKind::Paused)
        return false;
    return perform(
        tr("Going on could not be written to the journal."), [this] { return conductor_->goOn(); },
        [this] {
            present(false);
            if (prompt().kind == PromptKind::WaitingForPlan)
                startBetween();
        });
}

bool SessionController::note(const QString& text) {
    const QString trimmed = text.trimmed();
    if (trimmed.isEmpty() || trouble_)
        return false;
    return perform(tr("The note could not be written."),
                   [this, trimmed] { return conductor_->note(trimmed.toStdString()); });
}

bool SessionController::stop(const std::string& by) {
    return perform(
        tr("The end of the session could not be written."), [this, by] { return conductor_->stop(by); },
        [this] {
            between_ = false;
            polling_.stop();
            playback_.clear();
        });
}

} // namespace whichway
