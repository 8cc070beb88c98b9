// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <chrono>
#include <string>

namespace whichway {

/// Time as the core sees it.
class Clock {
public:
    virtual ~Clock() = default;
    /// Monotonic within one start of the machine (CLOCK_BOOTTIME, so that sleep counts).
    virtual std::chrono::nanoseconds sinceBoot() const = 0;
    /// ISO 8601 with the local offset and milliseconds: "2026-03-03T14:02:11.250+01:00".
    virtual std::string wallTime() const = 0;
};

class RealClock final : public Clock {
public:
    std::chrono::nanoseconds sinceBoot() const override;
    std::string wallTime() const override;
};

} // namespace whichway
