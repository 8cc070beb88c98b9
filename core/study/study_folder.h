// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/result.h"

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// What a study folder may hold at most; it may come from a stranger.
struct FolderLimits {
    std::uint64_t fileBytes = 4u << 20;     ///< of one file
    std::uint64_t folderBytes = 512u << 20; ///< of all files that are read
    std::size_t motions = 5000;
};

/// [A-Za-z0-9_-]{1,64}: what may name a study, a motion or a scene.
bool isName(std::string_view text);

/// A study folder as untrusted input: nothing but plain files within it is read, no link is followed, and
/// places in errors are relative to it. Not a value: keeps count of what it has read. `files` must outlive
/// it.
class StudyFolder {
public:
    StudyFolder(const FileSystem& files, std::string folder, const FolderLimits& limits = {});

    /// Whether something stands at `path` ("library.csv", "scenes/ward.toml").
    bool has(const std::string& path) const;
    /// The whole content of a plain file.
    /// @return "study.missing-file", "study.link" (the file or a folder on the way to it is a symbolic link),
    /// "study.not-a-file", "file.too-large", "study.too-large" (all files together), or the file system's
    /// reason.
    Result<std::string> read(const std::string& path);
    /// The names, without ".csv", of the files in trajectories/ (and of links there, which `read` refuses),
    /// in byte order. What is wrong there is appended to `problems`: the above, "study.name",
    /// "study.unexpected-file" (entries that are not NAME.csv; those that begin with a dot are passed over),
    /// "study.no-motions" and "study.too-many-motions".
    std::vector<std::string> motionNames(std::vector<Error>& problems) const;

private:
    Result<void> checkWay(const std::string& path, EntryKind expected) const;

    const FileSystem& files_;
    std::string folder_;
    FolderLimits limits_;
    std::uint64_t bytesRead_ = 0;
};

/// The file of a motion, relative to the study folder.
std::string motionFile(const std::string& motion);

} // namespace whichway
