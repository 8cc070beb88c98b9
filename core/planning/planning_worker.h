// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/planning/plan.h"

#include <chrono>
#include <condition_variable>
#include <functional>
#include <memory>
#include <mutex>
#include <optional>
#include <thread>

namespace whichway {

/// Where a session's plans come from. Called from the session's thread only.
class Planner {
public:
    virtual ~Planner() = default;
    /// Asks for a plan; a request that is still waiting or running is dropped in its favour.
    virtual void request(PlanRequest request) = 0;
    /// The newest finished plan or failure that was not taken yet, if any; waits for it up to `patience`.
    virtual std::optional<Result<Plan>> take(std::chrono::milliseconds patience) = 0;
};

/// Plans in the caller's thread, when the plan is taken (a request that is replaced before costs nothing):
/// for simulated participants and tests.
class ImmediatePlanner final : public Planner {
public:
    explicit ImmediatePlanner(std::shared_ptr<const PlanningProblem> problem);
    void request(PlanRequest request) override;
    std::optional<Result<Plan>> take(std::chrono::milliseconds patience) override;

private:
    std::shared_ptr<const PlanningProblem> problem_;
    std::optional<PlanRequest> waiting_;
};

/// Plans in one background thread at the lowest priority. The newest request wins: a running one is stopped.
/// `onReady`, if given, is called in the worker's thread after a plan became available.
class PlanningWorker final : public Planner {
public:
    explicit PlanningWorker(std::shared_ptr<const PlanningProblem> problem,
                            std::function<void()> onReady = {});
    ~PlanningWorker() override;
    PlanningWorker(const PlanningWorker&) = delete;
    PlanningWorker& operator=(const PlanningWorker&) = delete;

    void request(PlanRequest request) override;
    std::optional<Result<Plan>> take(std::chrono::milliseconds patience) override;

private:
    void work(std::stop_token stop);

    // immutable
    const std::shared_ptr<const PlanningProblem> problem_;
    const std::function<void()> onReady_;
    // guarded by mutex_
    std::mutex mutex_;
    std::condition_variable_any changed_;
    std::optional<PlanRequest> waiting_;
    bool busy_ = false;
    std::stop_source running_;
    std::optional<Result<Plan>> ready_;
    // last: it uses all of the above
    std::jthread thread_;
};

} // namespace whichway
