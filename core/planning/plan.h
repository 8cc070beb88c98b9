// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/response_model.h"
#include "core/result.h"
#include "core/study/protocol.h"

#include <cstdint>
#include <memory>
#include <stop_token>
#include <string>
#include <vector>

namespace whichway {

/// Two motions of the main library by row of the feature table, in presented order where that matters.
struct Pair {
    int left = 0, right = 0;
    /// The same two with the lower row first: how a pair is recognised.
    Pair canonical() const { return left < right ? Pair{left, right} : Pair{right, left}; }
    bool operator==(const Pair&) const = default;
    auto operator<=>(const Pair&) const = default;
};

/// What stays the same through a session. A value, shared read-only between threads.
struct PlanningProblem {
    Matrix features = {}; ///< n x d standardised
    ResponseModel model = {};
    PlanningSettings settings = {};
    int mainTrials = 40; ///< of the whole session: no motion fills more than a fifth of them
};

struct AnsweredPair {
    Pair pair = {}; ///< presented order
    int answer = 0; ///< as in Response
};

/// One question to the planner: everything its answer depends on besides the problem. A value.
struct PlanRequest {
    std::uint64_t id = 0;                    ///< grows with each request of a session
    std::vector<AnsweredPair> answered = {}; ///< main trials that teach the weights, in order
    std::vector<Pair> pending = {};          ///< shown and not yet answered, presented order
    std::vector<Pair> reserved = {};         ///< pairs of other kinds: never proposed
    int batch = 1;
    std::uint64_t seed = 1;
};

struct PlannedPair {
    Pair pair = {}; ///< canonical order; the session decides the sides
    double information =
        0; ///< bits about all parameters, given the answers and the pairs before it, on fresh draws
    bool operator==(const PlannedPair&) const = default;
};

struct Plan {
    std::uint64_t request = 0;
    std::vector<PlannedPair> pairs = {};
    std::vector<std::string> relaxed = {};    ///< hard rules that had to give way, in plain words
    double seconds = 0;                       ///< thread time it took; not part of the plan's value
    bool operator==(const Plan& other) const; ///< compares all but `seconds`
};

/// Changes whenever the same request may give another plan.
inline constexpr int kPlannerVersion = 1;

/// Plans one batch. Same problem and request, same plan, on any machine.
/// @return kCancelled, or "planning.no-pair" if the library holds no pair that may be asked.
/// @throws std::invalid_argument if a pair is out of range or the model does not fit the features.
Result<Plan> makePlan(const PlanningProblem& problem, const PlanRequest& request, std::stop_token stop = {});

} // namespace whichway
