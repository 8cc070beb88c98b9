// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands/study_folder.h"

#include "app/terminal.h"

#include <fmt/core.h>
#include <utility>

namespace whichway {

std::optional<Study> openStudy(const FileSystem& files, const std::string& folder,
                               const std::string& featuresFile) {
    StudyReading reading = readStudy(files, folder, featuresFile);
    for (const Error& problem : reading.problems)
        complain(problem);
    if (reading.ok())
        return std::move(reading.study);
    const std::size_t count = reading.problems.size();
    complain(fmt::format("{} problem{} in {}", count, count == 1 ? "" : "s", folder));
    return std::nullopt;
}

} // namespace whichway
