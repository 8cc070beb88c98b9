// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/scene.h"
#include "core/result.h"

#include <map>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// What a motion is for.
enum class MotionRole {
    Main,     ///< the library that is learned about; may stand in practice and catch pairs as well
    Practice, ///< for practice pairs only
    Catch     ///< for catch pairs only
};

struct LibraryEntry {
    MotionRole role = MotionRole::Main;
    std::string scene = {}; ///< empty where the study has none
};

/// The motions by name. std::map, so that they come in byte order of their names on every machine.
using Library = std::map<std::string, LibraryEntry>;

/// library.csv says what each motion of trajectories/ is for and where it happened:
///
///     trajectory,scene,role
///     m001,ward,main
///     p1,ward,practice
///
/// One row for each motion, in any order; role is main, practice or catch. The column scene may be left out
/// where study.toml names one scene (which then is the scene of all motions) or none.
///
/// Reads it against the motions that are there. Appends to `problems`: the codes of csv.h,
/// "study.missing-column", "study.unknown-column", "study.unknown-motion", "study.duplicate-motion",
/// "study.unknown-scene", "study.unknown-role", and "study.unlisted-motion" for a motion without a row.
/// @return what could be read; nothing where the table as a whole is at fault. A motion whose role is at
/// fault counts as main.
std::optional<Library> parseLibraryFile(std::string_view content, const std::string& file,
                                        std::span<const std::string> motions,
                                        std::span<const std::string> scenes, std::vector<Error>& problems);

/// The library of a study folder without library.csv: every motion is main, in the only scene or in none.
Library plainLibrary(std::span<const std::string> motions, std::span<const std::string> scenes);

} // namespace whichway
