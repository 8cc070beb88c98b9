// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/session/playback.h"

#include <algorithm>

namespace whichway {
namespace {

constexpr std::chrono::milliseconds kUnseen(500);

double secondsOf(std::chrono::nanoseconds span) {
    return std::chrono::duration<double>(span).count();
}

} // namespace

Playback::Playback(const Clock& clock, QObject* parent) : QObject(parent), clock_(clock) {}

void Playback::begin(double left, double right) {
    clear();
    duration_ = std::max({left, right, 1e-3});
    Q_EMIT started();
}

void Playback::beginSeen(double left, double right) {
    clear();
    duration_ = std::max({left, right, 1e-3});
    openedAt_ = clock_.sinceBoot();
    startedAt_ = *openedAt_ - std::chrono::ceil<Instant>(std::chrono::duration<double>(duration_));
    Q_EMIT started();
    Q_EMIT opened();
}

void Playback::clear() {
    duration_ = 0;
    startedAt_.reset();
    openedAt_.reset();
    heldAt_.reset();
    lastLook_.reset();
    replays_ = 0;
    interruptions_ = 0;
}

double Playback::paintedSeconds() {
    if (isShown() && !isHeld() && !startedAt_) {
        startedAt_ = clock_.sinceBoot();
        lastLook_ = startedAt_;
    }
    return seconds();
}

double Playback::seconds() const {
    if (!startedAt_)
        return 0;
    return std::clamp(secondsOf(now() - *startedAt_), 0.0, duration_);
}

void Playback::look() {
    if (!startedAt_ || isHeld())
        return;
    const Instant at = clock_.sinceBoot();
    const bool wasRunning = lastLook_ && secondsOf(*lastLook_ - *startedAt_) < duration_;
    if (wasRunning && at - *lastLook_ > kUnseen) {
        startedAt_.reset();
        ++interruptions_;
        Q_EMIT started();
        return;
    }
    lastLook_ = at;
    if (!openedAt_ && seconds() >= duration_) {
        openedAt_ = at;
        Q_EMIT opened();
    }
}

void Playback::replay() {
    if (!isShown() || isHeld())
        return;
    startedAt_.reset();
    ++replays_;
    Q_EMIT started();
}

void Playback::hold() {
    if (isShown() && !isHeld())
        heldAt_ = clock_.sinceBoot();
}

void Playback::release() {
    if (!isHeld())
        return;
    const Instant away = clock_.sinceBoot() - *heldAt_;
    heldAt_.reset();
    for (auto* moment : {&startedAt_, &openedAt_, &lastLook_})
        if (*moment)
            **moment += away;
}

double Playback::secondsOpen() const {
    return openedAt_ ? secondsOf(now() - *openedAt_) : -1;
}

} // namespace whichway
