// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/study_checks.h"

#include "core/files/nearest_name.h"
#include "core/study/study_folder.h"

#include <algorithm>
#include <fmt/format.h>

namespace whichway {

namespace {

void checkMotion(const std::string& name, MotionRole role, const char* roleName, const Place& place,
                 const Library& library, std::span<const std::string> motions, std::vector<Error>& problems) {
    if (name.empty())
        return; // reported where study.toml was read
    const auto found = library.find(name);
    if (!std::binary_search(motions.begin(), motions.end(), name)) {
        const std::string nearest = nearestName(name, motions);
        problems.push_back(
            {"study.unknown-motion",
             place,
             fmt::format("There is no motion “{}” in trajectories.", name),
             nearest.empty() ? "Name a motion of the library." : fmt::format("Did you mean “{}”?", nearest),
             {name}});
    } else if (found != library.end() && found->second.role != MotionRole::Main &&
               found->second.role != role) {
        problems.push_back({"study.wrong-role",
                            place,
                            fmt::format("The motion “{}” has another role in library.csv.", name),
                            fmt::format("Name a motion whose role is {} or main.", roleName),
                            {name, roleName}});
    }
}

} // namespace

void checkPairs(const StudyFile& study, const Library& library, std::span<const std::string> motions,
                std::vector<Error>& problems) {
    for (std::size_t i = 0; i < study.protocol.practicePairs.size(); ++i) {
        const PracticePair& pair = study.protocol.practicePairs[i];
        const std::string path = fmt::format("practice_pair.{}.", i);
        checkMotion(pair.left, MotionRole::Practice, "practice", study.places.of(path + "left"), library,
                    motions, problems);
        checkMotion(pair.right, MotionRole::Practice, "practice", study.places.of(path + "right"), library,
                    motions, problems);
    }
    for (std::size_t i = 0; i < study.protocol.catchPairs.size(); ++i) {
        const CatchPair& pair = study.protocol.catchPairs[i];
        const std::string path = fmt::format("catch_pair.{}.", i);
        checkMotion(pair.better, MotionRole::Catch, "catch", study.places.of(path + "better"), library,
                    motions, problems);
        checkMotion(pair.worse, MotionRole::Catch, "catch", study.places.of(path + "worse"), library, motions,
                    problems);
    }
}

void checkLibrarySize(const StudyFile& study, std::size_t mainMotions, std::vector<Error>& problems) {
    if (mainMotions < 2) {
        problems.push_back(
            {mainMotions == 0 ? "study.no-main-motions" : "study.one-motion",
             {"trajectories", 0, 0},
             mainMotions == 0 ? "No motion has the role main." : "The main library is one motion.",
             "A study compares motions: put at least two into the main library.",
             {}});
        return;
    }
    const std::size_t pairs = mainMotions * (mainMotions - 1) / 2;
    const TrialSettings& trials = study.protocol.trials;
    const auto needed = static_cast<std::size_t>(trials.main + trials.heldOut);
    if (pairs < needed)
        problems.push_back(
            {"study.too-few-motions",
             study.places.of("trials.main"),
             fmt::format("{} main and {} held-out trials need {} different pairs, and {} motions make {}.",
                         trials.main, trials.heldOut, needed, mainMotions, pairs),
             "Ask fewer questions, or add motions.",
             {std::to_string(needed), std::to_string(mainMotions), std::to_string(pairs)}});
}

FeatureTable standardiseOrReport(const StudyFile& study, std::vector<std::string> motions, Matrix raw,
                                 const GivenFeatures& given, std::vector<Error>& problems) {
    const std::vector<FeatureDefinition>& features = study.protocol.features;
    const std::vector<std::string> names = motions;
    StandardisedTable result = standardise(std::move(motions), std::move(raw), features);
    for (const StandardisationFault& fault : result.faults) {
        const FeatureDefinition& feature = features[fault.feature];
        const Place place = study.places.of("features." + feature.name);
        const std::string value = fmt::format("{:g}", fault.value);
        switch (fault.kind) {
        case StandardisationFault::Kind::OneMotion:
            break; // reported by checkLibrarySize
        case StandardisationFault::Kind::NotPositive: {
            std::size_t column = 0;
            for (std::size_t j = 0; j < fault.feature; ++j)
                column += features[j].measure.empty() ? 1 : 0;
            const std::string& motion = names[fault.motion];
            problems.push_back(
                {"study.not-positive",
                 feature.measure.empty() ? given.at(motion)[column].place : Place{motionFile(motion), 0, 0},
                 fmt::format("“{}” is {} for “{}”, and a logarithmic scale needs positive values.",
                             feature.name, value, motion),
                 fmt::format("Correct the value, or take scale = \"log\" out of [features.{}].",
                             feature.name),
                 {feature.name, value, motion}});
            break;
        }
        case StandardisationFault::Kind::Constant:
            problems.push_back(
                {"study.constant-feature",
                 place,
                 fmt::format("“{}” is {} for every motion of the main library.", feature.name, value),
                 "Take the feature out, or add motions in which it differs.",
                 {feature.name, value}});
            break;
        case StandardisationFault::Kind::ConstantWhenCapped:
            problems.push_back(
                {"study.constant-feature",
                 place,
                 fmt::format("“{}” is {} from its 5th to its 95th percentile, so capping leaves nothing.",
                             feature.name, value),
                 "Take scale = \"capped\" out, or add motions in which the feature differs.",
                 {feature.name, value}});
            break;
        }
    }
    return std::move(result.table);
}

} // namespace whichway
