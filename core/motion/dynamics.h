// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

namespace whichway {

/// What a differential-drive base can do.
struct BaseLimits {
    double speed = 1.5;            ///< m/s, > 0; it never drives backwards
    double acceleration = 1.0;     ///< m/s^2, speeding up and slowing down
    double turnRate = 1.2;         ///< rad/s
    double turnAcceleration = 3.0; ///< rad/s^2
};

struct BaseState {
    double x = 0, y = 0; ///< m
    double heading = 0;  ///< rad
    double speed = 0;    ///< m/s
    double turnRate = 0; ///< rad/s
};

/// The state `seconds` later when the base is asked for a speed and a turn rate: both approach what is asked
/// as fast as the limits allow, and the base moves on the arc of their means (the unicycle model; exact for
/// constant rates).
BaseState driveFor(double seconds, const BaseState& from, double askedSpeed, double askedTurnRate,
                   const BaseLimits& limits);

} // namespace whichway
