// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/csv.h"
#include "core/result.h"

#include <set>
#include <span>
#include <string>
#include <vector>

namespace whichway {

// What library.csv and features.csv have in common: named columns and a column of motions.

/// As many rows as a study may have motions, several times over.
inline constexpr CsvLimits kTableLimits = {.rows = 20000, .columns = 128};

struct WantedColumn {
    std::string name = {};
    bool needed = true;
};

struct TableColumns {
    std::vector<int> at = {}; ///< index in the header for each wanted column, -1 where it is not there
    bool complete = true;     ///< every needed column is there
};

/// Finds the wanted columns by name. Appends "study.missing-column" (at the header's line) and
/// "study.unknown-column" (with the nearest wanted name) to `problems`.
TableColumns findColumns(const CsvTable& table, const std::vector<WantedColumn>& wanted,
                         std::vector<Error>& problems);

/// Whether the cell names one of `motions` (in byte order) that is not in `seen` yet, to which it is added.
/// Appends "study.unknown-motion" or "study.duplicate-motion".
bool checkMotionCell(const CsvCell& cell, const std::string& file, std::span<const std::string> motions,
                     std::set<std::string>& seen, std::vector<Error>& problems);

Place placeOf(const CsvCell& cell, const std::string& file);

/// "Did you mean “ward”?", or the whole list where nothing is near.
std::string didYouMean(const std::string& text, std::span<const std::string> known);

} // namespace whichway
