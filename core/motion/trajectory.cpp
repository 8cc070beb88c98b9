// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/motion/trajectory.h"

#include <algorithm>

namespace whichway {

Instant instantAt(const Trajectory& trajectory, double seconds) {
    Instant instant;
    if (trajectory.time.empty())
        return instant;
    const double t = trajectory.time.front() + seconds;
    const auto after = std::upper_bound(trajectory.time.begin(), trajectory.time.end(), t);
    std::size_t i = 0, j = 0;
    double share = 0;
    if (after == trajectory.time.end()) {
        i = j = trajectory.time.size() - 1;
    } else if (after != trajectory.time.begin()) {
        j = static_cast<std::size_t>(after - trajectory.time.begin());
        i = j - 1;
        share = (t - trajectory.time[i]) / (trajectory.time[j] - trajectory.time[i]);
    }
    const auto between = [&](const std::vector<double>& values) {
        return values[i] + share * (values[j] - values[i]);
    };
    instant.x = between(trajectory.x);
    instant.y = between(trajectory.y);
    instant.heading = between(trajectory.heading);
    for (const PersonTrack& person : trajectory.people)
        instant.people.push_back({.x = between(person.x), .y = between(person.y)});
    return instant;
}

} // namespace whichway
