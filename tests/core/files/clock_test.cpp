// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/clock.h"

#include <cstdlib>
#include <ctime>
#include <gmock/gmock.h>

using namespace whichway;

namespace {

/// Sets the process's time zone as long as it lives.
class TimeZone {
public:
    explicit TimeZone(const char* zone) {
        if (const char* before = std::getenv("TZ"))
            before_ = before;
        setenv("TZ", zone, 1);
        tzset();
    }
    ~TimeZone() {
        if (before_.empty())
            unsetenv("TZ");
        else
            setenv("TZ", before_.c_str(), 1);
        tzset();
    }

private:
    std::string before_;
};

} // namespace

TEST(RealClock, NeverRunsBackwards) {
    const RealClock clock;
    auto before = clock.sinceBoot();
    EXPECT_GT(before.count(), 0);
    for (int i = 0; i < 1000; ++i) {
        const auto now = clock.sinceBoot();
        EXPECT_GE(now, before);
        before = now;
    }
}

// The forms are those of ISO 8601-1:2019 with an offset; POSIX counts TZ's offsets westwards.
TEST(RealClock, WritesLocalTimeWithItsOffset) {
    const RealClock clock;
    const char* const form = R"([0-9]{4}-[0-9]{2}-[0-9]{2}T[0-9]{2}:[0-9]{2}:[0-9]{2}\.[0-9]{3})";
    for (const auto& [zone, offset] :
         {std::pair{"UTC0", "\\+00:00"}, {"EAST-5:45", "\\+05:45"}, {"WEST3:30", "-03:30"}}) {
        const TimeZone set(zone);
        EXPECT_THAT(clock.wallTime(), testing::MatchesRegex(std::string(form) + offset));
    }
}

TEST(RealClock, TellsTheSameInstantAsTheSystem) {
    const TimeZone set("EAST-5:45");
    const RealClock clock;
    const std::time_t before = std::time(nullptr);
    const std::string text = clock.wallTime();
    const std::time_t after = std::time(nullptr);
    std::tm parts{};
    ASSERT_NE(strptime(text.c_str(), "%Y-%m-%dT%H:%M:%S", &parts), nullptr);
    const std::time_t told = timegm(&parts) - (5 * 60 + 45) * 60;
    EXPECT_GE(told, before);
    EXPECT_LE(told, after);
}
