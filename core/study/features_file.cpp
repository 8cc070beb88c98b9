// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/features_file.h"

#include "core/study/table_columns.h"

#include <algorithm>
#include <fmt/format.h>
#include <set>

namespace whichway {

namespace {

/// Reports columns of features that have a measure, and returns the table's other faults of columns.
TableColumns columnsOf(const CsvTable& table, std::span<const FeatureDefinition> features,
                       std::vector<Error>& problems) {
    std::vector<WantedColumn> wanted = {{"trajectory", true}};
    CsvTable unmeasured;
    unmeasured.file = table.file;
    for (const FeatureDefinition& feature : features)
        if (feature.measure.empty())
            wanted.push_back({feature.name, true});
    for (const CsvCell& cell : table.header) {
        const auto measured =
            std::find_if(features.begin(), features.end(), [&](const FeatureDefinition& feature) {
                return feature.name == cell.text && !feature.measure.empty();
            });
        if (measured != features.end())
            problems.push_back({"study.measured-column",
                                placeOf(cell, table.file),
                                fmt::format("“{}” is measured (“{}”), so it cannot be given as well.",
                                            cell.text, measured->measure),
                                "Take this column out, or the measure in study.toml.",
                                {cell.text, measured->measure}});
    }
    for (const FeatureDefinition& feature : features)
        if (!feature.measure.empty())
            wanted.push_back({feature.name, false});
    return findColumns(table, wanted, problems);
}

} // namespace

GivenFeatures parseFeaturesFile(std::string_view content, const std::string& file,
                                std::span<const FeatureDefinition> features,
                                std::span<const std::string> motions,
                                std::span<const std::string> mainMotions, std::vector<Error>& problems) {
    const Result<CsvTable> table = parseCsv(content, file, kTableLimits);
    if (!table) {
        problems.push_back(table.error());
        return {};
    }
    const TableColumns columns = columnsOf(*table, features, problems);
    if (!columns.complete)
        return {};

    std::size_t given = 0;
    for (const FeatureDefinition& feature : features)
        given += feature.measure.empty() ? 1 : 0;
    GivenFeatures values;
    std::set<std::string> seen;
    for (const std::vector<CsvCell>& row : table->rows) {
        const CsvCell& motion = row[static_cast<std::size_t>(columns.at[0])];
        if (!checkMotionCell(motion, file, motions, seen, problems))
            continue;
        std::vector<GivenValue> cells;
        for (std::size_t k = 0; k < given; ++k) {
            const CsvCell& cell = row[static_cast<std::size_t>(columns.at[k + 1])];
            const Result<double> number = numberIn(cell, file);
            if (number)
                cells.push_back({*number, placeOf(cell, file)});
            else
                problems.push_back(number.error());
        }
        if (cells.size() == given)
            values[motion.text] = std::move(cells);
    }
    for (const std::string& motion : mainMotions)
        if (!seen.contains(motion))
            problems.push_back(
                {"study.motion-without-features",
                 {file, 0, 0},
                 fmt::format("There is no row for “{}”, which is in the main library.", motion),
                 "Add its features, or take the motion out of the main library.",
                 {motion}});
    return values;
}

} // namespace whichway
