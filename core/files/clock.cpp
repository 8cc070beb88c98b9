// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/clock.h"

#include <cstdlib>
#include <ctime>
#include <fmt/format.h>

namespace whichway {

std::chrono::nanoseconds RealClock::sinceBoot() const {
    timespec now{};
    clock_gettime(CLOCK_BOOTTIME, &now);
    return std::chrono::seconds(now.tv_sec) + std::chrono::nanoseconds(now.tv_nsec);
}

std::string RealClock::wallTime() const {
    timespec now{};
    clock_gettime(CLOCK_REALTIME, &now);
    tm local{};
    localtime_r(&now.tv_sec, &local);
    const long offset = local.tm_gmtoff / 60;
    return fmt::format("{:04}-{:02}-{:02}T{:02}:{:02}:{:02}.{:03}{}{:02}:{:02}", local.tm_year + 1900,
                       local.tm_mon + 1, local.tm_mday, local.tm_hour, local.tm_min, local.tm_sec,
                       now.tv_nsec / 1000000, offset < 0 ? '-' : '+', std::labs(offset) / 60,
                       std::labs(offset) % 60);
}

} // namespace whichway
