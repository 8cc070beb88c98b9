// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/planning_request.h"

#include "core/preference/model_of_protocol.h"
#include "core/random.h"

#include <algorithm>
#include <charconv>

namespace whichway {

std::shared_ptr<const PlanningProblem> planningProblemOf(const Protocol& protocol) {
    auto problem = std::make_shared<PlanningProblem>();
    problem->features = protocol.table.standardised;
    problem->model = responseModelOf(protocol);
    problem->settings = protocol.planning;
    problem->mainTrials = protocol.trials.main;
    return problem;
}

int rowOf(const Protocol& protocol, const std::string& motion) {
    const auto& names = protocol.table.motions;
    const auto found = std::find(names.begin(), names.end(), motion);
    return found == names.end() ? -1 : static_cast<int>(found - names.begin());
}

std::uint64_t planSeed(const SessionBegan& began, std::uint64_t id) {
    if (id > 1)
        return deriveSeed(began.seed, 1000 + id);
    std::uint64_t fromProtocol = 0;
    const std::string head = began.protocol.hash.substr(0, 16);
    std::from_chars(head.data(), head.data() + head.size(), fromProtocol, 16);
    return deriveSeed(fromProtocol, 1000 + id);
}

PlanRequest planRequestOf(const SessionBegan& began, std::span<const AnsweredTrial> answers,
                          std::span<const int> known, std::span<const NamedPair> pending, std::uint64_t id,
                          int batch) {
    const Protocol& protocol = began.protocol;
    const auto pairOf = [&](const std::string& left, const std::string& right) {
        return Pair{rowOf(protocol, left), rowOf(protocol, right)};
    };
    PlanRequest request{.id = id, .batch = batch, .seed = planSeed(began, id)};
    for (const AnsweredTrial& answer : answers)
        if (answer.kind == TrialKind::Main &&
            std::find(known.begin(), known.end(), answer.trial) != known.end())
            request.answered.push_back({.pair = pairOf(answer.left, answer.right), .answer = answer.answer});
    for (const NamedPair& pair : pending)
        request.pending.push_back(pairOf(pair.left, pair.right));
    for (const ScheduledTrial& trial : began.schedule) {
        if (trial.kind == TrialKind::Main)
            continue;
        const Pair pair = pairOf(trial.left, trial.right);
        if (pair.left >= 0 && pair.right >= 0 && pair.left != pair.right)
            request.reserved.push_back(pair.canonical());
    }
    std::sort(request.reserved.begin(), request.reserved.end());
    request.reserved.erase(std::unique(request.reserved.begin(), request.reserved.end()),
                           request.reserved.end());
    return request;
}

} // namespace whichway
