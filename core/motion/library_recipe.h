// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/dynamics.h"
#include "core/motion/scene.h"
#include "core/motion/trajectory.h"
#include "core/result.h"

#include <cstdint>
#include <stop_token>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// A number that is drawn anew for each motion, uniformly.
struct DrawnRange {
    double low = 0, high = 0;
};

/// A way of driving. Each motion of it draws its own numbers from the ranges.
struct DrivingManner {
    std::string name = {};
    std::string role = "main"; ///< "main", "practice" or "catch"
    std::string prefix = "m";  ///< motions are named by it and a number
    int count = 1;
    DrawnRange cruise = {};     ///< m/s
    DrawnRange gap = {};        ///< m, clearance to people that it steers for
    DrawnRange foresight = {};  ///< m, how far ahead of a person it begins to give way
    DrawnRange side = {};       ///< m, where it drives when nobody is near: offset from the axis to the right
    DrawnRange slowing = {};    ///< 0 to 1, share of the speed that it takes off beside people
    DrawnRange unevenness = {}; ///< 0 to 1, how much its speed sways
    DrawnRange wander = {};     ///< m, how far its course sways
    DrawnRange wait = {};       ///< s, a stop on the way
    DrawnRange waitAt = {};     ///< 0 to 1, after which share of the way
};

/// How a library of motions is made: one base, one scene, people who do the same in every motion, and manners
/// of driving past them. A value.
struct LibraryRecipe {
    std::string scenePath = {}; ///< as written, relative to the recipe
    std::uint64_t seed = 1;
    double rate = 20;              ///< samples a second
    double mostSeconds = 10;       ///< longer motions are drawn again
    int decimals = 5;              ///< of the coordinates in the files
    double startX = 0, startY = 0; ///< m
    BaseLimits base = {};
    /// Of each person: t (s), x, y (m), piecewise straight.
    std::vector<std::vector<std::vector<double>>> people = {};
    std::vector<DrivingManner> manners = {};
};

struct RecipeReading {
    LibraryRecipe recipe = {}; ///< whole only if `problems` is empty
    std::vector<Error> problems = {};
};

/// Reads RECIPE.toml; sample_studies/ward_cart/recipe.toml shows every key. Problems: the codes of
/// toml_table.h, "recipe.format", "recipe.range", "recipe.role", "recipe.path", "recipe.too-many".
RecipeReading parseRecipe(std::string_view content, const std::string& file);

struct MadeMotion {
    Trajectory trajectory = {};
    std::string role = {};
};

/// Makes the library: motions in the order of the manners. A draw that touches a wall or a person, does not
/// arrive in time, or nearly repeats an earlier motion is drawn again. Same recipe, same motions.
/// @return "recipe.cannot" if a manner yields no motion in 400 draws; kCancelled.
Result<std::vector<MadeMotion>> makeLibrary(const LibraryRecipe& recipe, const Scene& scene,
                                            std::stop_token stop = {});

} // namespace whichway
