// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/planning/planning_worker.h"

#include <optional>
#include <set>

namespace whichway {

/// A planner for tests of what happens around plans: proposes the first pairs of the library that were
/// neither asked nor are pending or reserved. Costs nothing. `late` makes it answer one request behind, as a
/// slow planner would.
class QueuePlanner final : public Planner {
public:
    explicit QueuePlanner(int motions, bool late = false) : motions_(motions), late_(late) {}

    void request(PlanRequest request) override {
        if (late_ && waiting_)
            ready_ = planFor(*waiting_);
        waiting_ = std::move(request);
        lateTakes_ = 0;
        ++requests;
    }

    std::optional<Result<Plan>> take(std::chrono::milliseconds) override {
        if (failing)
            return Result<Plan>(
                Error{.code = "planning.no-pair", .place = {}, .message = "No pair.", .remedy = ""});
        if (silent)
            return std::nullopt;
        std::optional<Result<Plan>> plan = ready_;
        const bool askedAgain = !plan && ++lateTakes_ > 1; // whoever waits long enough gets it
        if ((!late_ || askedAgain) && waiting_) {
            plan = planFor(*waiting_);
            waiting_.reset();
        }
        ready_.reset();
        return plan;
    }

    bool failing = false; ///< every plan fails
    bool silent = false;  ///< no plan ever arrives
    int requests = 0;

private:
    Result<Plan> planFor(const PlanRequest& request) const {
        std::set<Pair> taken(request.reserved.begin(), request.reserved.end());
        for (const Pair& pair : request.pending)
            taken.insert(pair.canonical());
        for (const AnsweredPair& answered : request.answered)
            taken.insert(answered.pair.canonical());
        Plan plan{.request = request.id};
        for (int i = 0; i < motions_; ++i)
            for (int j = i + 1; j < motions_ && static_cast<int>(plan.pairs.size()) < request.batch; ++j)
                if (!taken.contains({i, j}))
                    plan.pairs.push_back({.pair = {i, j}, .information = 0.5});
        return plan;
    }

    int motions_;
    bool late_;
    int lateTakes_ = 0;
    std::optional<PlanRequest> waiting_;
    std::optional<Result<Plan>> ready_;
};

} // namespace whichway
