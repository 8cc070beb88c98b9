// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/trajectory.h"
#include "core/result.h"
#include "core/study/protocol.h"

#include <string>
#include <vector>

namespace whichway {

class FileSystem;

/// A study folder, read and found whole. A value.
struct Study {
    std::string folder = {};
    Protocol protocol = {};
    /// All motions: first the main library in the order of protocol.table.motions, then those that only
    /// practice and catch pairs use.
    std::vector<Trajectory> motions = {};

    /// nullptr if there is none of that name.
    const Trajectory* motion(const std::string& name) const;
    /// The scene of a motion, or nullptr where the study has none.
    const Scene* sceneOf(const Trajectory& motion) const;
};

/// A study or every problem that was found in it, at least one, in the order of files and lines.
struct StudyReading {
    Study study = {};                 ///< whole only if `problems` is empty
    std::vector<Error> problems = {}; ///< codes "study.…", "csv.…", "file.…"
    bool ok() const { return problems.empty(); }
};

/// Reads and checks `folder`. Never follows links or paths out of the folder; never throws on hostile
/// content.
/// @param featuresFile another feature table to use in place of features.csv, or empty.
StudyReading readStudy(const FileSystem& files, const std::string& folder,
                       const std::string& featuresFile = "");

} // namespace whichway
