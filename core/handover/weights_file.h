// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/findings/session_findings.h"
#include "core/journal/session_state.h"

#include <string>

namespace whichway {

/// weights.json, format 1: what a controller or a later analysis needs, and nothing about who the person is.
/// The utility of a motion is sum over features of per_unit x transform(value), up to a constant, with
/// transform = identity, natural logarithm ("log") or clamping to [low, high] ("capped").
std::string weightsFile(const SessionState& state, const SessionFindings& findings);

} // namespace whichway
