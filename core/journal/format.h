// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/events.h"
#include "core/result.h"

#include <string>
#include <string_view>

namespace whichway {

/// The hash that the first line of a journal names as its predecessor's.
inline constexpr std::string_view kJournalRoot =
    "0000000000000000000000000000000000000000000000000000000000000000";

struct EncodedRecord {
    std::string line = {}; ///< one JSON object and a newline
    std::string hash = {}; ///< of this line; the next line names it
};

/// One line of the journal: {"number", "type", "time", "run", "monotonic_ns", "payload", "previous",
/// "hash"}, numbers in full precision. The hash is SHA-256 over the previous hash and the line without its
/// own hash (see DEVELOPERS.md).
EncodedRecord encodeRecord(const Record& record, std::string_view previousHash);

/// Whether the line (without its newline) is one that was written whole: its text fits its own hash.
bool isWholeLine(std::string_view line);

struct DecodedRecord {
    Record record = {};
    std::string hash = {};
};

/// @return "journal.corrupt" with the event number in `place.line` when the line is no record, breaks the
/// chain, or its hash is wrong; "journal.newer" when it holds an event type or format this program does not
/// know.
Result<DecodedRecord> decodeRecord(std::string_view line, std::uint64_t expectedNumber,
                                   std::string_view previousHash);

} // namespace whichway
