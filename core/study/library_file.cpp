// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/library_file.h"

#include "core/files/csv.h"
#include "core/study/table_columns.h"

#include <algorithm>
#include <fmt/format.h>
#include <set>

namespace whichway {

namespace {

struct Role {
    const char* word;
    MotionRole role;
};
constexpr Role kRoles[] = {
    {"main", MotionRole::Main}, {"practice", MotionRole::Practice}, {"catch", MotionRole::Catch}};

} // namespace

Library plainLibrary(std::span<const std::string> motions, std::span<const std::string> scenes) {
    Library library;
    for (const std::string& motion : motions)
        library[motion] = {MotionRole::Main, scenes.empty() ? "" : scenes.front()};
    return library;
}

std::optional<Library> parseLibraryFile(std::string_view content, const std::string& file,
                                        std::span<const std::string> motions,
                                        std::span<const std::string> scenes, std::vector<Error>& problems) {
    const Result<CsvTable> table = parseCsv(content, file, kTableLimits);
    if (!table) {
        problems.push_back(table.error());
        return std::nullopt;
    }
    const TableColumns columns =
        findColumns(*table, {{"trajectory", true}, {"scene", scenes.size() > 1}, {"role", true}}, problems);
    if (!columns.complete)
        return std::nullopt;
    const int motionColumn = columns.at[0], sceneColumn = columns.at[1], roleColumn = columns.at[2];

    Library library;
    std::set<std::string> seen;
    for (const std::vector<CsvCell>& row : table->rows) {
        const CsvCell& motion = row[static_cast<std::size_t>(motionColumn)];
        if (!checkMotionCell(motion, file, motions, seen, problems))
            continue;
        LibraryEntry& entry = library[motion.text];
        if (sceneColumn >= 0) {
            const CsvCell& scene = row[static_cast<std::size_t>(sceneColumn)];
            entry.scene = scene.text;
            if (!(scene.text.empty() && scenes.empty()) &&
                std::find(scenes.begin(), scenes.end(), scene.text) == scenes.end())
                problems.push_back({"study.unknown-scene",
                                    placeOf(scene, file),
                                    fmt::format("“{}” is not a scene of this study.", scene.text),
                                    scenes.empty()
                                        ? "Name the scene's file in study.toml, or leave the cell empty."
                                        : didYouMean(scene.text, scenes),
                                    {scene.text}});
        } else if (!scenes.empty()) {
            entry.scene = scenes.front();
        }
        const CsvCell& role = row[static_cast<std::size_t>(roleColumn)];
        const auto* known = std::find_if(std::begin(kRoles), std::end(kRoles),
                                         [&](const Role& candidate) { return role.text == candidate.word; });
        if (known == std::end(kRoles))
            problems.push_back({"study.unknown-role",
                                placeOf(role, file),
                                fmt::format("“{}” is not a role of a motion.", role.text),
                                "Write main, practice or catch.",
                                {role.text}});
        else
            entry.role = known->role;
    }
    for (const std::string& motion : motions)
        if (!seen.contains(motion))
            problems.push_back({"study.unlisted-motion",
                                {file, 0, 0},
                                fmt::format("There is no row for “{}”, which is in trajectories.", motion),
                                "Add a row that says its role, or take the file away.",
                                {motion}});
    return library;
}

} // namespace whichway
