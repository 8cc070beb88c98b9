// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/file_system.h"
#include "core/study/study.h"
#include "tests/support/tiny_study.h"

#include <filesystem>
#include <functional>
#include <gtest/gtest.h>
#include <string>
#include <unistd.h>
#include <vector>

// Ways to spoil a TinyStudy and to read it back from a real folder.

namespace whichway::spoiled {

inline std::string placeInWords(const Place& place) {
    return place.line == 0 ? place.file : fmt::format("{}:{}:{}", place.file, place.line, place.column);
}

inline std::string codesAndPlaces(const std::vector<Error>& problems) {
    std::string text;
    for (const Error& problem : problems)
        text += fmt::format("{} {} ({} / {})\n", problem.code, placeInWords(problem.place), problem.message,
                            problem.remedy);
    return text;
}

/// Writes, reads and removes a study folder.
inline StudyReading readBack(const TinyStudy& study, const std::string& name,
                             const std::string& featuresFile = "") {
    const std::filesystem::path folder =
        std::filesystem::path(testing::TempDir()) / fmt::format("whichway_study_{}_{}", getpid(), name);
    std::filesystem::remove_all(folder);
    study.writeTo(folder);
    StudyReading reading = readStudy(RealFileSystem(), folder.string(),
                                     featuresFile.empty() ? "" : (folder / featuresFile).string());
    std::filesystem::remove_all(folder);
    return reading;
}

/// Spoils by replacing, in one file, a text that stands there once.
inline std::function<void(TinyStudy&)> in(const char* file, std::string from, std::string to) {
    return [=](TinyStudy& study) { study.replace(file, from, to); };
}
inline std::function<void(TinyStudy&)> toml(std::string from, std::string to) {
    return in("study.toml", std::move(from), std::move(to));
}
inline std::function<void(TinyStudy&)> features(std::string from, std::string to) {
    return in("features.csv", std::move(from), std::move(to));
}
inline std::function<void(TinyStudy&)> library(std::string from, std::string to) {
    return in("library.csv", std::move(from), std::move(to));
}
inline std::function<void(TinyStudy&)> motion(std::string from, std::string to) {
    return in("trajectories/m1.csv", std::move(from), std::move(to));
}
inline std::function<void(TinyStudy&)> write(const char* file, std::string content) {
    return [=](TinyStudy& study) { study.files[file] = content; };
}
inline std::function<void(TinyStudy&)> erase(const char* file) {
    return [=](TinyStudy& study) { study.files.erase(file); };
}
inline std::function<void(TinyStudy&)> link(const char* file, const char* target) {
    return [=](TinyStudy& study) {
        study.files.erase(file);
        study.links[file] = target;
    };
}
inline std::function<void(TinyStudy&)> all(std::vector<std::function<void(TinyStudy&)>> parts) {
    return [=](TinyStudy& study) {
        for (const auto& part : parts)
            part(study);
    };
}

inline std::string repeated(const std::string& part, int times) {
    std::string text;
    for (int i = 0; i < times; ++i)
        text += part;
    return text;
}

} // namespace whichway::spoiled
