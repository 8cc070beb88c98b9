// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>

namespace whichway::motions {

/// A recipe of six quick motions past one person, and its scene.
inline const std::string kSmallRecipe = R"(format = 1
invented = true
scene = "scenes/hall.toml"
seed = 5
rate_hz = 10
most_seconds = 8
decimals = 4
start = [1, 2]

[base]
speed = 2
acceleration = 2
turn_rate = 1.5
turn_acceleration = 4

[[person]]
path = [[0, 4, 3.2], [10, 3, 3.2]]

[[manner]]
name = "plain"
count = 5
cruise = [1.0, 2.0]
gap = [0.1, 0.5]
side = [-0.3, 0.5]

[[manner]]
name = "practice"
role = "practice"
prefix = "p"
count = 1
cruise = [1.2, 1.4]
wait = [0.5, 1.0]
)";

inline const std::string kHall = R"(name = "hall"
bounds = [0, 0, 8, 4]
floor = [[0, 0.5, 8, 3]]
goal = [6, 2]
robot = { length = 0.5, width = 0.4, radius = 0.3 }
person_radius = 0.2
keep_right_axis = 2
)";

inline std::string changed(std::string text, const std::string& from, const std::string& to) {
    text.replace(text.find(from), from.size(), to);
    return text;
}

} // namespace whichway::motions
