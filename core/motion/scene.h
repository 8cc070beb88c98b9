// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <string>
#include <vector>

namespace whichway {

struct Segment {
    double x1 = 0, y1 = 0, x2 = 0, y2 = 0; ///< m
    bool operator==(const Segment&) const = default;
};

struct Rectangle {
    double x = 0, y = 0, width = 0, height = 0; ///< m, lower left corner and size
    bool operator==(const Rectangle&) const = default;
};

/// A door leaf: hinge, length, and the angles of the closed and the open leaf (drawn as an arc).
struct Door {
    double x = 0, y = 0;         ///< hinge, m
    double width = 0;            ///< m
    double closed = 0, open = 0; ///< rad, anticlockwise from +x
    bool operator==(const Door&) const = default;
};

/// What stands still around the motions. y points up, x to the right. A value.
struct Scene {
    std::string name = {};
    Rectangle bounds = {};             ///< the part that is drawn
    std::vector<Rectangle> floor = {}; ///< where the robot may be; the rest is drawn as rooms
    std::vector<Segment> walls = {};
    std::vector<Door> doors = {};
    std::vector<Rectangle> furniture = {};  ///< decoration only
    std::vector<double> goal = {};          ///< x, y of the goal in m, or empty
    double robotLength = 0, robotWidth = 0; ///< m, footprint centred on the robot's position
    double robotRadius = 0;                 ///< m, the disc that distances are measured from
    double personRadius = 0;                ///< m
    double keepRightAxis = 0;               ///< y of the corridor's centre line, m
    bool operator==(const Scene&) const = default;
};

} // namespace whichway
