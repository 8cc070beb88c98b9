// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/protocol.h"
#include "core/study/study_section.h"

#include <vector>

namespace whichway {

/// Reads the tables [features.NAME] of study.toml, in their order, and checks each against the measure it
/// names.
std::vector<FeatureDefinition> readFeatures(StudySection& root);

} // namespace whichway
