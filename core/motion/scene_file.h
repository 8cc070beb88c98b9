// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/scene.h"
#include "core/result.h"

#include <string>
#include <string_view>
#include <vector>

namespace whichway {

struct SceneReading {
    Scene scene = {}; ///< whole only if `problems` is empty
    std::vector<Error> problems = {};
};

/// Reads a scene from TOML; metres and radians, y upwards, rectangles as [x, y, width, height] from their
/// lower left corner:
///     name = "ward"                       # [A-Za-z0-9_-]{1,64}
///     bounds = [0, 0, 16, 9]              # what is drawn
///     floor = [[0, 3, 16, 2.8]]           # where the robot may be
///     walls = [[0, 3, 2, 3]]              # x1, y1, x2, y2
///     doors = [[2, 3, 1, 0, 1.5]]         # hinge x, y, width, angle of the closed and of the open leaf
///     furniture = [[1, 0.5, 1, 2]]        # decoration
///     goal = [15, 4.4]
///     robot = { length = 1.0, width = 0.6, radius = 0.55 }
///     person_radius = 0.25
///     keep_right_axis = 4.4               # y of the corridor's centre line
/// Problems: the codes of toml_table.h, "scene.range", "scene.too-many", "scene.name".
SceneReading parseScene(std::string_view content, const std::string& file);

} // namespace whichway
