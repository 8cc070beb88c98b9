// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/features_file.h"
#include "core/study/library_file.h"
#include "core/study/standardise.h"
#include "core/study/study_file.h"

#include <span>
#include <string>
#include <vector>

namespace whichway {

// What the files of a study must say together. Each check appends its problems.

/// Practice pairs name motions of role main or practice, catch pairs of role main or catch.
/// "study.unknown-motion", "study.wrong-role", at the name in study.toml.
/// @param motions all that are in trajectories/, in byte order
void checkPairs(const StudyFile& study, const Library& library, std::span<const std::string> motions,
                std::vector<Error>& problems);

/// The main library is large enough: at least two motions ("study.no-main-motions", "study.one-motion"), and
/// a pair for each main and held-out trial ("study.too-few-motions").
void checkLibrarySize(const StudyFile& study, std::size_t mainMotions, std::vector<Error>& problems);

/// Standardises, and says why a feature cannot be: "study.constant-feature" at the feature in study.toml,
/// "study.not-positive" at the value in the feature table or at the motion that was measured.
FeatureTable standardiseOrReport(const StudyFile& study, std::vector<std::string> motions, Matrix raw,
                                 const GivenFeatures& given, std::vector<Error>& problems);

} // namespace whichway
