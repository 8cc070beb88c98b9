// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/journal/session_folder.h"
#include "core/result.h"

#include <string>
#include <vector>

namespace whichway {

/// A session that began and has not ended.
struct UnfinishedSession {
    SessionFolder folder = {};
    int answered = 0, total = 0; ///< trials
    std::string began = {};      ///< time of its first event
    std::string last = {};       ///< time of its last event
};

/// The unfinished sessions of a participant, or of everybody if `code` is empty, in the order they began.
/// A folder in which no event was completed (the program ended while it began) holds nothing to take up and
/// is left out.
/// @return an error of the folder's listing; the journal's error if a session of that code cannot be read and
/// there is no other.
Result<std::vector<UnfinishedSession>> unfinishedSessions(const FileSystem& files, const std::string& study,
                                                          const std::string& code);

} // namespace whichway
