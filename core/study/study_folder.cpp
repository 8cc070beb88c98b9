// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/study_folder.h"

#include <algorithm>
#include <fmt/format.h>

namespace whichway {

namespace {

constexpr const char* kTrajectories = "trajectories";
constexpr std::string_view kEnding = ".csv";

Error problem(const char* code, const std::string& path, std::string message, std::string remedy,
              std::vector<std::string> values = {}) {
    return {code, {path, 0, 0}, std::move(message), std::move(remedy), std::move(values)};
}

} // namespace

bool isName(std::string_view text) {
    return !text.empty() && text.size() <= 64 && std::all_of(text.begin(), text.end(), [](char c) {
        return (c >= 'A' && c <= 'Z') || (c >= 'a' && c <= 'z') || (c >= '0' && c <= '9') || c == '_' ||
               c == '-';
    });
}

std::string motionFile(const std::string& motion) {
    return std::string(kTrajectories) + "/" + motion + std::string(kEnding);
}

StudyFolder::StudyFolder(const FileSystem& files, std::string folder, const FolderLimits& limits)
    : files_(files), folder_(std::move(folder)), limits_(limits) {}

bool StudyFolder::has(const std::string& path) const {
    return files_.kind(folder_ + "/" + path) != EntryKind::Missing;
}

Result<void> StudyFolder::checkWay(const std::string& path, EntryKind expected) const {
    for (std::size_t end = 0; end < path.size();) {
        end = std::min(path.find('/', end + 1), path.size());
        const std::string part = path.substr(0, end);
        const EntryKind wanted = end == path.size() ? expected : EntryKind::Directory;
        const EntryKind kind = files_.kind(folder_ + "/" + part);
        if (kind == wanted)
            continue;
        if (kind == EntryKind::Missing)
            return problem(
                "study.missing-file", part,
                fmt::format("{} is missing.", wanted == EntryKind::Directory ? "This folder" : "This file"),
                "A study folder needs it: see “How a study folder looks” in README.md.");
        if (kind == EntryKind::Link)
            return problem("study.link", part,
                           "This is a symbolic link, and links in study folders are not followed.",
                           "Put the file or folder itself here.");
        return problem("study.not-a-file", part,
                       wanted == EntryKind::Directory ? "This is not a folder." : "This is not a plain file.",
                       wanted == EntryKind::Directory ? "Put a folder of this name here."
                                                      : "Put a file of this name here.");
    }
    return {};
}

Result<std::string> StudyFolder::read(const std::string& path) {
    if (const Result<void> way = checkWay(path, EntryKind::File); !way)
        return way.error();
    Result<std::string> content = files_.read(folder_ + "/" + path, limits_.fileBytes);
    if (!content) {
        Error error = content.error();
        error.place = {path, 0, 0};
        if (error.remedy.empty())
            error.remedy = "See that the file can be read.";
        return error;
    }
    bytesRead_ += content->size();
    if (bytesRead_ > limits_.folderBytes)
        return problem("study.too-large", path,
                       fmt::format("Up to here the study holds more than {} MB.", limits_.folderBytes >> 20),
                       "Keep fewer motions, or fewer samples of each.",
                       {std::to_string(limits_.folderBytes >> 20)});
    return content;
}

std::vector<std::string> StudyFolder::motionNames(std::vector<Error>& problems) const {
    if (const Result<void> way = checkWay(kTrajectories, EntryKind::Directory); !way) {
        problems.push_back(way.error());
        return {};
    }
    const Result<std::vector<DirectoryEntry>> entries = files_.list(folder_ + "/" + kTrajectories);
    if (!entries) {
        problems.push_back(entries.error());
        problems.back().place = {kTrajectories, 0, 0};
        return {};
    }
    std::vector<std::string> names;
    bool faulty = false;
    for (const DirectoryEntry& entry : *entries) {
        const std::string path = std::string(kTrajectories) + "/" + entry.name;
        if (entry.name.starts_with('.'))
            continue;
        const bool linked = entry.kind == EntryKind::Link;
        if (linked && !entry.name.ends_with(kEnding)) {
            problems.push_back(problem(
                "study.link", path, "This is a symbolic link, and links in study folders are not followed.",
                "Put the file itself here."));
        } else if ((!linked && entry.kind != EntryKind::File) || !entry.name.ends_with(kEnding)) {
            problems.push_back(problem("study.unexpected-file", path,
                                       "Only NAME.csv files belong in trajectories.",
                                       "Move it elsewhere, or end its name in “.csv”."));
        } else if (!isName(std::string_view(entry.name).substr(0, entry.name.size() - kEnding.size()))) {
            problems.push_back(
                problem("study.name", path,
                        "A motion is named by 1 to 64 of the letters A to Z and a to z, digits, “_” and “-”.",
                        "Rename the file."));
        } else if (names.size() == limits_.motions) {
            problems.push_back(problem("study.too-many-motions", kTrajectories,
                                       fmt::format("There are more than {} motions.", limits_.motions),
                                       "Keep those that differ in what the study asks about.",
                                       {std::to_string(limits_.motions)}));
            return {};
        } else {
            names.push_back(entry.name.substr(0, entry.name.size() - kEnding.size()));
            continue;
        }
        faulty = true;
    }
    if (names.empty() && !faulty)
        problems.push_back(problem("study.no-motions", kTrajectories, "There is no motion in this folder.",
                                   "Put one NAME.csv for each motion here."));
    return names;
}

} // namespace whichway
