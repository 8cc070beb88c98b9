// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/table_columns.h"

#include "core/files/nearest_name.h"

#include <algorithm>
#include <fmt/format.h>

namespace whichway {

namespace {

constexpr std::size_t kListed = 12;
constexpr std::size_t kSearched = 50;

} // namespace

Place placeOf(const CsvCell& cell, const std::string& file) {
    return {file, cell.line, cell.column};
}

std::string didYouMean(const std::string& text, std::span<const std::string> known) {
    if (const std::string nearest = nearestName(text, known); !nearest.empty())
        return fmt::format("Did you mean “{}”?", nearest);
    if (known.empty())
        return "Take it out.";
    std::string list;
    for (std::size_t i = 0; i < std::min(known.size(), kListed); ++i)
        list += (i == 0 ? "“" : ", “") + known[i] + "”";
    return known.size() > kListed ? fmt::format("Known are {} and {} more.", list, known.size() - kListed)
                                  : fmt::format("Known {} {}.", known.size() == 1 ? "is" : "are", list);
}

TableColumns findColumns(const CsvTable& table, const std::vector<WantedColumn>& wanted,
                         std::vector<Error>& problems) {
    TableColumns columns;
    std::vector<std::string> names;
    for (const WantedColumn& column : wanted) {
        names.push_back(column.name);
        const auto found = std::find_if(table.header.begin(), table.header.end(),
                                        [&](const CsvCell& cell) { return cell.text == column.name; });
        columns.at.push_back(found == table.header.end() ? -1
                                                         : static_cast<int>(found - table.header.begin()));
        if (found == table.header.end() && column.needed) {
            columns.complete = false;
            problems.push_back({"study.missing-column",
                                {table.file, 1, 1},
                                fmt::format("There is no column “{}”.", column.name),
                                "Add it to the first line.",
                                {column.name}});
        }
    }
    for (const CsvCell& cell : table.header)
        if (std::find(names.begin(), names.end(), cell.text) == names.end())
            problems.push_back({"study.unknown-column",
                                placeOf(cell, table.file),
                                fmt::format("“{}” is not a column of this table.", cell.text),
                                didYouMean(cell.text, names),
                                {cell.text}});
    return columns;
}

bool checkMotionCell(const CsvCell& cell, const std::string& file, std::span<const std::string> motions,
                     std::set<std::string>& seen, std::vector<Error>& problems) {
    if (!std::binary_search(motions.begin(), motions.end(), cell.text)) {
        // A table of nothing but wrong names is not worth the search for what each might mean.
        const std::string nearest = problems.size() < kSearched ? nearestName(cell.text, motions) : "";
        problems.push_back({"study.unknown-motion",
                            placeOf(cell, file),
                            fmt::format("There is no motion “{}” in trajectories.", cell.text),
                            nearest.empty() ? "Correct the name, or take the row out."
                                            : fmt::format("Did you mean “{}”?", nearest),
                            {cell.text}});
        return false;
    }
    if (!seen.insert(cell.text).second) {
        problems.push_back({"study.duplicate-motion",
                            placeOf(cell, file),
                            fmt::format("“{}” has a row above.", cell.text),
                            "Keep one of the rows.",
                            {cell.text}});
        return false;
    }
    return true;
}

} // namespace whichway
