// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/journal/events.h"
#include "core/result.h"

#include <string>
#include <vector>

namespace whichway {

// STUDY/sessions/ID/ or, for pilots and simulated participants, STUDY/pilots/ID/ with
//   journal.jsonl     the journal
//   participant.txt   the code, the only place in the session where it stands
//   lock              held while a program conducts the session

struct SessionFolder {
    std::string path = {}; ///< STUDY/sessions/ID
    std::string id = {};   ///< 32 hexadecimal digits
    std::string code = {}; ///< participant code
    bool pilot = false;    ///< stands under pilots/
    std::string journal() const { return path + "/journal.jsonl"; }
    std::string lockFile() const { return path + "/lock"; }
};

/// Codes are [A-Za-z0-9_-]{1,64}. @return "session.code" otherwise.
Result<void> checkParticipantCode(const std::string& code);

/// Makes the folder of a new session, its code file written and synced. The journal is not there yet.
/// @param id 32 lower-case hexadecimal digits from the operating system's random source, never derived from
/// the code.
/// @return "session.code", "file.exists", "file.…".
/// @throws std::invalid_argument if `id` is not that.
Result<SessionFolder> createSessionFolder(FileSystem& files, const std::string& study, SessionKind kind,
                                          const std::string& id, const std::string& code);

/// Every session folder of the study, sorted by id; folders without a code file have an empty code.
Result<std::vector<SessionFolder>> listSessionFolders(const FileSystem& files, const std::string& study);

/// The session folder at `path`. @return "session.not-a-session" if there is no journal in it.
Result<SessionFolder> openSessionFolder(const FileSystem& files, const std::string& path);

/// A fresh random id of 32 hexadecimal digits (getrandom).
std::string randomSessionId();

} // namespace whichway
