// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/unfinished_session.h"

#include "core/journal/journal.h"
#include "core/journal/session_state.h"

#include <algorithm>
#include <optional>

namespace whichway {

Result<std::vector<UnfinishedSession>> unfinishedSessions(const FileSystem& files, const std::string& study,
                                                          const std::string& code) {
    auto folders = listSessionFolders(files, study);
    if (!folders)
        return folders.error();
    std::vector<UnfinishedSession> found;
    std::optional<Error> unreadable;
    for (const SessionFolder& folder : *folders) {
        if ((!code.empty() && folder.code != code) || files.kind(folder.journal()) != EntryKind::File)
            continue;
        auto reading = readJournal(files, folder.journal());
        if (!reading) {
            unreadable = reading.error();
            continue;
        }
        if (reading->records.empty())
            continue;
        auto state = replayRecords(reading->records);
        if (!state) {
            unreadable = state.error();
            continue;
        }
        if (state->ended)
            continue;
        found.push_back({.folder = folder,
                         .answered = static_cast<int>(state->answers.size()),
                         .total = static_cast<int>(state->began.schedule.size()),
                         .began = reading->records.front().time,
                         .last = reading->records.back().time});
    }
    if (found.empty() && unreadable)
        return *unreadable;
    std::stable_sort(found.begin(), found.end(),
                     [](const auto& one, const auto& other) { return one.began < other.began; });
    return found;
}

} // namespace whichway
