// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/session/audit.h"

#include "core/findings/session_posterior.h"
#include "core/journal/journal.h"
#include "core/journal/session_state.h"
#include "core/planning/plan.h"
#include "core/session/planning_request.h"
#include "core/session/schedule.h"

#include <cmath>
#include <map>
#include <memory>
#include <variant>

namespace whichway {
namespace {

std::string atEvent(std::uint64_t number) {
    return "event " + std::to_string(number);
}

/// Each trial shown must be the scheduled one or, for a main trial, the head of the queue before it was first
/// shown.
void auditTrials(std::span<const Record> records, SessionAudit& audit) {
    const auto& began = std::get<SessionBegan>(records.front().event);
    const auto schedule = drawSchedule(began.protocol, began.seed);
    if (!schedule || *schedule != began.schedule)
        audit.trialDifferences.push_back("the schedule drawn again from its seed is another one");

    SessionState state;
    std::map<int, NamedPair> shownBefore;
    for (const Record& record : records) {
        if (const auto* shown = std::get_if<TrialShown>(&record.event)) {
            const NamedPair pair{shown->left, shown->right};
            const auto& plan = began.schedule[static_cast<std::size_t>(shown->trial - 1)];
            NamedPair expected{plan.left, plan.right};
            if (const auto before = shownBefore.find(shown->trial); before != shownBefore.end())
                expected = before->second;
            else if (plan.kind == TrialKind::Main && !state.queue.empty())
                expected = plan.lowerLeft
                               ? state.queue.front().pair
                               : NamedPair{state.queue.front().pair.right, state.queue.front().pair.left};
            if (pair != expected)
                audit.trialDifferences.push_back(atEvent(record.number) + ": trial " +
                                                 std::to_string(shown->trial) + " showed " + shown->left +
                                                 " and " + shown->right + ", not " + expected.left + " and " +
                                                 expected.right);
            shownBefore[shown->trial] = pair;
        }
        (void)apply(state, record); // the caller has replayed all of it already
    }
    audit.trials = audit.trialDifferences.empty() ? Sameness::Same : Sameness::Different;
}

Result<void> auditPlans(std::span<const Record> records, SessionAudit& audit, std::stop_token stop) {
    const auto problem = planningProblemOf(std::get<SessionBegan>(records.front().event).protocol);
    SessionState state;
    for (const Record& record : records) {
        const auto* adopted = std::get_if<PlanAdopted>(&record.event);
        if (adopted && adopted->plannerVersion != kPlannerVersion) {
            ++audit.plans;
            audit.planDifferences.push_back(atEvent(record.number) + ": made by version " +
                                            std::to_string(adopted->plannerVersion) +
                                            " of the planner, this is " + std::to_string(kPlannerVersion));
        } else if (adopted) {
            ++audit.plans;
            PlanRequest request = planRequestOf(state.began, state.answers, adopted->known, adopted->pending,
                                                adopted->request, adopted->batch);
            request.seed = adopted->seed;
            const auto plan = makePlan(*problem, request, stop);
            if (!plan) {
                if (plan.error().code == kCancelled)
                    return plan.error();
                audit.planDifferences.push_back(atEvent(record.number) + ": " + describe(plan.error()));
            } else {
                const auto& names = state.began.protocol.table.motions;
                std::vector<NamedPair> pairs;
                std::vector<double> information;
                for (const PlannedPair& planned : plan->pairs) {
                    pairs.push_back({names[static_cast<std::size_t>(planned.pair.left)],
                                     names[static_cast<std::size_t>(planned.pair.right)]});
                    information.push_back(planned.information);
                }
                if (pairs != adopted->pairs)
                    audit.planDifferences.push_back(atEvent(record.number) + ": the plan has other pairs");
                else if (information != adopted->information || plan->relaxed != adopted->relaxed)
                    audit.planDifferences.push_back(atEvent(record.number) +
                                                    ": the same pairs, but another information");
            }
        }
        (void)apply(state, record);
    }
    if (audit.plans > 0)
        audit.planned = audit.planDifferences.empty() ? Sameness::Same : Sameness::Different;
    return {};
}

Result<void> auditEstimate(const SessionState& state, SessionAudit& audit, std::stop_token stop) {
    if (!state.estimate)
        return {};
    const EstimateMade& then = *state.estimate;
    const auto posterior = sessionPosterior(state, stop);
    if (!posterior)
        return posterior.error();
    const EstimateMade now = estimateOf(*posterior, state.answered(TrialKind::Main), reportSettings(state));
    if (now == then) {
        audit.estimates = Sameness::Same;
        return {};
    }
    audit.estimates = Sameness::WithinMonteCarlo;
    if (now.names != then.names || now.answers != then.answers)
        audit.estimateDifferences.push_back("the estimate is of other quantities or answers");
    for (std::size_t i = 0; i < now.mean.size() && i < then.mean.size(); ++i) {
        const double error = 4 * std::hypot(now.mcse[i], then.mcse[i]);
        if (!(std::abs(now.mean[i] - then.mean[i]) <= error))
            audit.estimateDifferences.push_back(now.names[i] + ": " + std::to_string(then.mean[i]) +
                                                " then, " + std::to_string(now.mean[i]) + " now");
    }
    if (!audit.estimateDifferences.empty())
        audit.estimates = Sameness::Different;
    return {};
}

} // namespace

Result<SessionAudit> auditSession(const FileSystem& files, const SessionFolder& folder,
                                  std::stop_token stop) {
    const auto reading = readJournal(files, folder.journal());
    if (!reading)
        return reading.error();
    const auto state = replayRecords(reading->records);
    if (!state)
        return state.error();
    SessionAudit audit{.events = reading->records.size(), .tornBytes = reading->tornBytes};
    auditTrials(reading->records, audit);
    if (auto plans = auditPlans(reading->records, audit, stop); !plans)
        return plans.error();
    if (auto estimate = auditEstimate(*state, audit, stop); !estimate)
        return estimate.error();
    return audit;
}

} // namespace whichway
