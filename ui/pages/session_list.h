// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/journal/events.h"
#include "core/journal/session_folder.h"
#include "core/result.h"

#include <QString>
#include <string>
#include <vector>

namespace whichway {

/// One session of a study as its journal tells it.
struct SessionRow {
    enum class State { Finished, Stopped, Unfinished, Unreadable };

    SessionFolder folder = {};
    SessionKind kind = SessionKind::Participant;
    State state = State::Unreadable;
    int answered = 0, total = 0; ///< trials
    std::string began = {};      ///< time of the first event, ISO 8601
    Error problem = {};          ///< why it is unreadable
};

/// All sessions of a study, the newest first. Cost: reads every journal.
/// @return the error of the folder's listing; a session that cannot be read is a row that says so.
Result<std::vector<SessionRow>> listSessions(const FileSystem& files, const std::string& study);

/// "finished, 60 of 60 trials", "stopped after 12 of 60 trials", …
QString sessionStateText(const SessionRow& row);
/// "3 March 2026, 14:02".
QString sessionTimeText(const SessionRow& row);

} // namespace whichway
