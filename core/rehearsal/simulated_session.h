// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/rehearsal/simulated_participant.h"
#include "core/result.h"
#include "core/session/conductor.h"

namespace whichway {

/// Lets a simulated participant go through what is left of a session, by the very steps that a person's
/// session takes. Pairs with a motion outside the feature table (practice and catch pairs may have one)
/// carry no utility: there the expected side of a catch pair is chosen with the surest word, and any other
/// pair by chance. Response times stay unknown.
/// @return the first error of a step; "rehearsal.no-plan" if the planner has no pair to give.
Result<void> conductSimulated(Conductor& conductor, const SimulatedParticipant& participant);

} // namespace whichway
