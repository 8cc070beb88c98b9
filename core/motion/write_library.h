// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <stop_token>
#include <string>
#include <vector>

namespace whichway {

class FileSystem;

struct WrittenLibrary {
    int motions = 0;
    std::vector<Error> problems = {}; ///< of the recipe or the scene; then nothing was written
};

/// Makes the library of the recipe at `recipePath` and writes FOLDER/trajectories/NAME.csv,
/// FOLDER/library.csv (with the columns trajectory, scene, role) and the scene file at its place below
/// FOLDER.
/// @return the file system's errors, "recipe.cannot", kCancelled.
Result<WrittenLibrary> writeLibrary(FileSystem& files, const std::string& recipePath,
                                    const std::string& folder, std::stop_token stop = {});

} // namespace whichway
