// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/rehearsal/simulated_session.h"

#include "core/session/planning_request.h"

#include <cstddef>
#include <vector>

namespace whichway {
namespace {

int answerTo(const Prompt& prompt, const SessionBegan& began, const SimulatedParticipant& participant) {
    const Matrix& z = began.protocol.table.standardised;
    const auto trial = static_cast<std::uint64_t>(prompt.trial);
    const int left = rowOf(began.protocol, prompt.left);
    const int right = rowOf(began.protocol, prompt.right);
    std::vector<double> difference(z.columns, 0.0);
    if (left >= 0 && right >= 0) {
        for (std::size_t j = 0; j < z.columns; ++j)
            difference[j] = z(static_cast<std::size_t>(left), j) - z(static_cast<std::size_t>(right), j);
    } else if (prompt.trialKind == TrialKind::Catch) {
        const Side expected = began.schedule[static_cast<std::size_t>(prompt.trial - 1)].expected;
        return expected == Side::Left ? began.protocol.levels : -began.protocol.levels;
    }
    return participant.answer(difference, trial);
}

} // namespace

Result<void> conductSimulated(Conductor& conductor, const SimulatedParticipant& participant) {
    // A planner that answers at once has a pair after one more try; one that works beside may take longer.
    constexpr int kMostTries = 60;
    conductor.setPatience(1);
    int tries = 0;
    for (;;) {
        const Prompt prompt = conductor.prompt();
        Result<void> step;
        switch (prompt.kind) {
        case PromptKind::Ended:
            return {};
        case PromptKind::Trial:
            tries = 0;
            step = conductor.answer({.answer = answerTo(prompt, conductor.state().began, participant)});
            break;
        case PromptKind::Paused:
            step = conductor.goOn();
            break;
        case PromptKind::WaitingForPlan:
            if (++tries > kMostTries || !conductor.plannerStatus().lastProblem.empty())
                return Error{.code = "rehearsal.no-plan",
                             .place = {},
                             .message =
                                 "The planner has no pair to show: " + conductor.plannerStatus().lastProblem,
                             .remedy = "Check the study's library.",
                             .values = {}};
            step = conductor.next();
            break;
        default:
            step = conductor.next();
        }
        if (!step)
            return step;
    }
}

} // namespace whichway
