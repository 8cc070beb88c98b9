// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/motion/scene.h"
#include "core/motion/trajectory.h"
#include "core/result.h"

#include <map>
#include <optional>
#include <span>
#include <string>
#include <string_view>

namespace whichway {

using MeasureSettings = std::map<std::string, double>;

/// A named way to turn a motion into one number. Descriptive figures of recorded motion, not an assessment of
/// safety.
struct Measure {
    std::string phrase = {};       ///< how study files name it: "closest distance to a person"
    std::string unit = {};         ///< "m"; "1" for none
    std::string meaning = {};      ///< one sentence, with the formula
    MeasureSettings settings = {}; ///< every setting that it knows, with its default, SI units
    bool needsPeople = false;

    /// `chosen` holds every setting of the measure. @return "measure.undefined" with the reason where the
    /// motion has no such number; it is never made up.
    Result<double> (*evaluate)(const Trajectory& motion, const Scene* scene,
                               const MeasureSettings& chosen) = nullptr;
};

/// All measures, in the order of the handbook.
std::span<const Measure> measures();

/// nullptr if there is none of that phrase.
const Measure* findMeasure(std::string_view phrase);

/// Why a measure's setting cannot have that value, in one sentence; nothing if it can.
std::optional<std::string> faultOfSetting(std::string_view name, double value);

/// Evaluates with `overrides` over the defaults.
/// @throws std::invalid_argument if `overrides` names a setting that the measure does not know or that has a
/// fault, or if the motion has fewer than 2 samples.
Result<double> evaluateMeasure(const Measure& measure, const Trajectory& motion, const Scene* scene,
                               const MeasureSettings& overrides = {});

} // namespace whichway
