// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/dynamics.h"

#include <algorithm>
#include <cmath>

namespace whichway {

BaseState driveFor(double seconds, const BaseState& from, double askedSpeed, double askedTurnRate,
                   const BaseLimits& limits) {
    const auto approach = [&](double now, double asked, double most) {
        return now + std::clamp(asked - now, -most * seconds, most * seconds);
    };
    BaseState to = from;
    to.speed = approach(from.speed, std::clamp(askedSpeed, 0.0, limits.speed), limits.acceleration);
    to.turnRate = approach(from.turnRate, std::clamp(askedTurnRate, -limits.turnRate, limits.turnRate),
                           limits.turnAcceleration);
    const double speed = 0.5 * (from.speed + to.speed);
    const double turn = 0.5 * (from.turnRate + to.turnRate) * seconds;
    // The chord of the arc: its length shrinks by sin(turn/2) / (turn/2).
    const double half = 0.5 * turn;
    const double chord = std::abs(half) < 1e-6 ? 1.0 : std::sin(half) / half;
    to.x = from.x + speed * seconds * chord * std::cos(from.heading + half);
    to.y = from.y + speed * seconds * chord * std::sin(from.heading + half);
    to.heading = from.heading + turn;
    return to;
}

} // namespace whichway
