// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/journal/session_state.h"
#include "core/planning/plan.h"
#include "core/result.h"

#include <memory>
#include <span>

namespace whichway {

/// What the planner needs of a protocol.
std::shared_ptr<const PlanningProblem> planningProblemOf(const Protocol& protocol);

/// Row of a motion in the protocol's feature table. @return -1 if it is not of the main library.
int rowOf(const Protocol& protocol, const std::string& motion);

/// The request for a plan that knows the answers of `known` (trial numbers) and treats `pending` (presented
/// order) as unanswered. It follows from the session alone, so that a replay asks the very same.
PlanRequest planRequestOf(const SessionBegan& began, std::span<const AnsweredTrial> answers,
                          std::span<const int> known, std::span<const NamedPair> pending, std::uint64_t id,
                          int batch);

/// Seed of a session's request number `id`. The first request, made before any answer, has the same seed for
/// every participant of a protocol, so that it can be planned when the study is opened.
std::uint64_t planSeed(const SessionBegan& began, std::uint64_t id);

} // namespace whichway
