// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/journal.h"

#include "core/journal/format.h"

#include <utility>

namespace whichway {
namespace {

/// A session of some hundred trials with a library of some thousand motions stays far below this.
constexpr std::uint64_t kLongestJournal = 512ull << 20;

/// Whether a record that was written whole ends before some line break of `text` and does not begin with it.
/// It need not begin a line: the byte that is damaged may be the line break before it.
bool holdsLaterRecord(std::string_view text) {
    constexpr std::string_view kBegin = "{\"format\":";
    for (std::size_t begin = text.find(kBegin, 1); begin != std::string_view::npos;
         begin = text.find(kBegin, begin + 1)) {
        const std::size_t newline = text.find('\n', begin);
        if (newline == std::string_view::npos)
            return false;
        if (isWholeLine(text.substr(begin, newline - begin)))
            return true;
    }
    return false;
}

} // namespace

Result<JournalReading> readJournal(const FileSystem& files, const std::string& path) {
    auto content = files.read(path, kLongestJournal);
    if (!content)
        return content.error();
    JournalReading reading{.lastHash = std::string(kJournalRoot)};
    std::string_view rest = *content;
    while (!rest.empty()) {
        const std::size_t newline = rest.find('\n');
        if (newline == std::string_view::npos)
            break;
        auto decoded = decodeRecord(rest.substr(0, newline), reading.records.size() + 1, reading.lastHash);
        if (!decoded) {
            // A power cut garbles what was being written, and nothing whole stands behind that. A whole
            // record behind a bad line shows that the line was once written and synced, and has been damaged
            // since.
            if (decoded.error().code == "journal.corrupt" && !holdsLaterRecord(rest))
                break;
            Error error = decoded.error();
            error.place.file = path;
            return error;
        }
        reading.records.push_back(std::move(decoded->record));
        reading.lastHash = std::move(decoded->hash);
        reading.goodBytes += newline + 1;
        rest.remove_prefix(newline + 1);
    }
    reading.tornBytes = content->size() - reading.goodBytes;
    reading.torn = content->substr(reading.goodBytes);
    return reading;
}

JournalWriter::JournalWriter(FileSystem& files, const Clock& clock, std::string path)
    : files_(&files), clock_(&clock), path_(std::move(path)) {}

Result<JournalWriter> JournalWriter::create(FileSystem& files, const Clock& clock, const std::string& path) {
    if (files.kind(path) != EntryKind::Missing)
        return Error{.code = "file.exists",
                     .place = {.file = path},
                     .message = "There is a journal already.",
                     .remedy = "Begin the session in a folder of its own."};
    auto file = files.openAppend(path);
    if (!file)
        return file.error();
    JournalWriter writer(files, clock, path);
    writer.file_ = std::move(*file);
    writer.lastHash_ = std::string(kJournalRoot);
    return writer;
}

Result<JournalWriter> JournalWriter::resume(FileSystem& files, const Clock& clock, const std::string& path,
                                            const JournalReading& reading) {
    JournalWriter writer(files, clock, path);
    if (reading.tornBytes > 0) {
        // Whatever it was, it is kept beside the journal: cutting must not be what loses an answer.
        const std::string aside = path + ".torn-" + std::to_string(reading.records.size() + 1);
        if (auto kept = files.replace(aside, reading.torn); !kept)
            return kept.error();
        if (auto cut = files.truncate(path, reading.goodBytes); !cut)
            return cut.error();
    }
    auto file = files.openAppend(path);
    if (!file)
        return file.error();
    writer.file_ = std::move(*file);
    writer.run_ = reading.records.empty() ? 1 : reading.records.back().run + 1;
    writer.number_ = reading.records.size();
    writer.goodBytes_ = reading.goodBytes;
    writer.lastHash_ = reading.lastHash;
    return writer;
}

Result<Record> JournalWriter::append(Event event) {
    if (tailInDoubt_) {
        if (auto cut = files_->truncate(path_, goodBytes_); !cut)
            return cut.error();
        tailInDoubt_ = false;
    }
    Record record{.number = number_ + 1,
                  .run = run_,
                  .monotonic = clock_->sinceBoot().count(),
                  .time = clock_->wallTime(),
                  .event = std::move(event)};
    EncodedRecord encoded = encodeRecord(record, lastHash_);
    tailInDoubt_ = true;
    if (auto written = file_->append(encoded.line); !written)
        return written.error();
    if (auto synced = file_->sync(); !synced)
        return synced.error();
    tailInDoubt_ = false;
    number_ = record.number;
    goodBytes_ += encoded.line.size();
    lastHash_ = std::move(encoded.hash);
    return record;
}

} // namespace whichway
