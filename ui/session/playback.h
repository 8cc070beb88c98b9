// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/clock.h"

#include <QObject>
#include <optional>

namespace whichway {

/// Plays the two motions of a pair from one monotonic clock. Both start with the frame that first shows them,
/// and where they are follows from the clock at each painting, never from counted ticks. The answer opens
/// when both were seen to the end. Screen thread only; `clock` must outlive it.
class Playback final : public QObject {
    Q_OBJECT
public:
    explicit Playback(const Clock& clock, QObject* parent = nullptr);

    /// A pair to be seen from its start; durations in s.
    void begin(double left, double right);
    /// A pair that was seen before and stands at its end, open for an answer.
    void beginSeen(double left, double right);
    /// Nothing is to be seen.
    void clear();

    /// For the painting that the participant sees: the seconds into both motions. The first call starts the
    /// clock.
    double paintedSeconds();
    /// The same for onlookers, without starting anything.
    double seconds() const;
    /// To be called about once a frame: finds out that the end was reached, and starts again from the
    /// beginning when the participant cannot have seen the motions because no frame was drawn for half a
    /// second.
    void look();

    void replay();
    /// Stops and goes on, while something else asks for attention. The time between does not count.
    void hold();
    void release();

    bool isShown() const { return duration_ > 0; }
    bool isHeld() const { return heldAt_.has_value(); }
    bool isRunning() const { return isShown() && !isHeld() && seconds() < duration_; }
    bool seen() const { return openedAt_.has_value(); }
    int replays() const { return replays_; }
    int interruptions() const { return interruptions_; }
    double duration() const { return duration_; } ///< of the longer motion, s
    double secondsOpen() const; ///< since answering became possible, s; negative: it is not yet

Q_SIGNALS:
    void started(); ///< a pair, or its replay, begins
    void opened();  ///< both were seen to the end for the first time

private:
    using Instant = std::chrono::nanoseconds;

    Instant now() const { return heldAt_ ? *heldAt_ : clock_.sinceBoot(); }

    const Clock& clock_;
    double duration_ = 0;
    std::optional<Instant> startedAt_;
    std::optional<Instant> openedAt_;
    std::optional<Instant> heldAt_;
    std::optional<Instant> lastLook_;
    int replays_ = 0;
    int interruptions_ = 0;
};

} // namespace whichway
