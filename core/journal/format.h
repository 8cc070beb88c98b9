// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/events.h"
#include "core/result.h"

#include <string>
#include <string_view>

namespace whichway {

/// Version of the lines and of every payload. It grows when a field is added, removed or changes its meaning.
inline constexpr int kJournalFormat = 1;

/// The hash that the first line of a journal names as its predecessor's.
inline constexpr std::string_view kJournalRoot =
    "0000000000000000000000000000000000000000000000000000000000000000";

struct EncodedRecord {
    std::string line = {}; ///< one JSON object and a newline
    std::string hash = {}; ///< of this line; the next line names it
};

/// One line of the journal: one JSON object (RFC 8259, UTF-8) without line breaks inside, then LF. Its
/// fields, in this order:
///
///     format        1
///     number        of the event, from 1, without gaps
///     type          what happened: "session began", "trial shown", "answer given", … (events.h, in words)
///     time          local time with its offset from UTC (ISO 8601)
///     run           which run of the program wrote it, from 1
///     monotonic_ns  time since the machine's start; comparable within one run
///     payload       the event: one field for each of its struct in events.h, of the same name; enumerations
///                   in words, matrices as {"rows", "columns", "values" by rows}
///     previous      the hash of the line before; 64 zeros in the first line
///     hash          SHA-256 (64 lower-case hexadecimal digits) of this line as it stands, without
///                   `,"hash":"…"` and the LF
///
/// Numbers read back to the same bits. The estimate's NaN are null. Bytes that are not UTF-8 become U+FFFD.
/// @throws std::invalid_argument if any other number is NaN, or one is infinite: it could not be read back.
EncodedRecord encodeRecord(const Record& record, std::string_view previousHash);

/// Whether the line (without its newline) is one that was written whole: its text fits its own hash.
bool isWholeLine(std::string_view line);

struct DecodedRecord {
    Record record = {};
    std::string hash = {};
};

/// @return "journal.corrupt" with the event number in `place.line` when the line is no record, breaks the
/// chain, its hash is wrong, or a field is missing, unknown, out of range or of another type; "journal.newer"
/// when it holds an event type or format this program does not know.
Result<DecodedRecord> decodeRecord(std::string_view line, std::uint64_t expectedNumber,
                                   std::string_view previousHash);

} // namespace whichway
