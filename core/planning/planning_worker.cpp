// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/planning_worker.h"

#include <sys/resource.h>
#include <sys/syscall.h>
#include <unistd.h>
#include <utility>

namespace whichway {

ImmediatePlanner::ImmediatePlanner(std::shared_ptr<const PlanningProblem> problem)
    : problem_(std::move(problem)) {}

void ImmediatePlanner::request(PlanRequest request) {
    waiting_ = std::move(request);
}

std::optional<Result<Plan>> ImmediatePlanner::take(std::chrono::milliseconds) {
    if (!waiting_)
        return std::nullopt;
    const PlanRequest request = std::move(*waiting_);
    waiting_.reset();
    return makePlan(*problem_, request);
}

PlanningWorker::PlanningWorker(std::shared_ptr<const PlanningProblem> problem, std::function<void()> onReady)
    : problem_(std::move(problem)), onReady_(std::move(onReady)),
      thread_([this](std::stop_token stop) { work(stop); }) {}

PlanningWorker::~PlanningWorker() {
    thread_.request_stop();
    {
        const std::lock_guard lock(mutex_);
        running_.request_stop();
    }
    thread_.join();
}

void PlanningWorker::request(PlanRequest request) {
    {
        const std::lock_guard lock(mutex_);
        waiting_ = std::move(request);
        running_.request_stop();
    }
    changed_.notify_all();
}

std::optional<Result<Plan>> PlanningWorker::take(std::chrono::milliseconds patience) {
    std::unique_lock lock(mutex_);
    changed_.wait_for(lock, patience, [this] { return !waiting_ && !busy_; });
    return std::exchange(ready_, std::nullopt);
}

void PlanningWorker::work(std::stop_token stop) {
    // Drawing must never wait for planning: the lowest priority, for this thread alone.
    ::setpriority(PRIO_PROCESS, static_cast<id_t>(::syscall(SYS_gettid)), 19);
    for (;;) {
        PlanRequest request;
        std::stop_token stopRun;
        {
            std::unique_lock lock(mutex_);
            if (!changed_.wait(lock, stop, [this] { return waiting_.has_value(); }))
                return;
            request = std::move(*waiting_);
            waiting_.reset();
            running_ = std::stop_source();
            stopRun = running_.get_token();
            busy_ = true;
            if (stop.stop_requested())
                return;
        }
        Result<Plan> plan = Error{.code = "planning.failed", .place = {}, .message = "", .remedy = ""};
        try { // the worker is one of the two places where an exception becomes a value
            plan = makePlan(*problem_, request, stopRun);
        } catch (const std::exception& exception) {
            plan = Error{.code = "planning.failed",
                         .place = {},
                         .message = std::string("Planning failed: ") + exception.what() + ".",
                         .remedy = "Go on; pairs of other kinds are shown meanwhile."};
        }
        const bool wasCancelled = !plan.ok() && plan.error().code == kCancelled;
        {
            const std::lock_guard lock(mutex_);
            busy_ = false;
            if (!wasCancelled)
                ready_ = std::move(plan);
        }
        changed_.notify_all();
        if (!wasCancelled && onReady_)
            onReady_();
    }
}

} // namespace whichway
