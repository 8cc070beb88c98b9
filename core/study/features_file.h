// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/csv.h"
#include "core/result.h"
#include "core/study/protocol.h"

#include <map>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

struct GivenValue {
    double value = 0;
    Place place = {};
};

/// Values that a lab computed itself: by motion, in the order of the columns asked for.
using GivenFeatures = std::map<std::string, std::vector<GivenValue>>;

/// features.csv holds the features that study.toml names without a measure:
///
///     trajectory,effort,noise
///     m001,12.5,0.31
///
/// One row for each motion of the main library (rows for practice and catch motions may stand there and are
/// only checked), one column for each feature without a measure, in any order; decimal points; the units of
/// study.toml.
///
/// Appends to `problems`: the codes of csv.h, "study.missing-column", "study.unknown-column",
/// "study.measured-column" (a feature that has a measure), "study.unknown-motion", "study.duplicate-motion",
/// and "study.motion-without-features" for a main motion without a row.
/// @param features all features of the study
/// @param motions all motions that there are; `mainMotions` those that need a row
/// @return whole for each motion whose row had no problem
GivenFeatures parseFeaturesFile(std::string_view content, const std::string& file,
                                std::span<const FeatureDefinition> features,
                                std::span<const std::string> motions,
                                std::span<const std::string> mainMotions, std::vector<Error>& problems);

} // namespace whichway
