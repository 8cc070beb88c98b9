// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/clock.h"

namespace whichway {

/// A clock that moves only when told to.
class ManualClock final : public Clock {
public:
    std::chrono::nanoseconds sinceBoot() const override { return now_; }
    std::string wallTime() const override { return "2026-03-03T14:02:11.250+01:00"; }
    void advance(std::chrono::nanoseconds by) { now_ += by; }

private:
    std::chrono::nanoseconds now_{1000000000};
};

} // namespace whichway
