// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/clock.h"
#include "core/files/file_system.h"
#include "core/journal/events.h"
#include "core/result.h"

#include <cstdint>
#include <memory>
#include <string>
#include <vector>

namespace whichway {

/// A journal as far as it is whole.
struct JournalReading {
    std::vector<Record> records = {};
    std::uint64_t goodBytes = 0; ///< where the last whole record ends
    std::uint64_t tornBytes = 0; ///< what follows: a record that was being written
    std::string torn = {};       ///< those bytes
    std::string lastHash = {};
};

/// Reads every whole record. What stands behind the last whole record is torn, not an error: it was being
/// written when the program or the power ended. A bad line with a whole record behind it was once written and
/// synced, so it is "journal.corrupt" with its event number. Nothing is changed on disk. (Damage to the very
/// last line cannot be told from a torn one; JournalWriter::resume keeps those bytes.)
/// @return also "journal.newer" (decodeRecord), "file.…".
Result<JournalReading> readJournal(const FileSystem& files, const std::string& path);

/// Appends events to one journal. `files` and `clock` must outlive it.
class JournalWriter {
public:
    /// Starts a journal that must not exist yet.
    static Result<JournalWriter> create(FileSystem& files, const Clock& clock, const std::string& path);
    /// Goes on behind `reading`. A torn tail is cut off, after it was saved beside the journal as
    /// PATH.torn-NUMBER.
    static Result<JournalWriter> resume(FileSystem& files, const Clock& clock, const std::string& path,
                                        const JournalReading& reading);

    /// Appends and syncs: when it returns a record, that record survives a power cut. After an error nothing
    /// counts as written; the next call first cuts off what may stand behind the last good record.
    /// @throws std::invalid_argument as encodeRecord does; then nothing was written.
    Result<Record> append(Event event);

private:
    JournalWriter(FileSystem& files, const Clock& clock, std::string path);

    FileSystem* files_;
    const Clock* clock_;
    std::string path_;
    int run_ = 1;
    std::unique_ptr<AppendFile> file_;
    std::uint64_t number_ = 0;
    std::uint64_t goodBytes_ = 0;
    std::string lastHash_;
    bool tailInDoubt_ = false;
};

} // namespace whichway
