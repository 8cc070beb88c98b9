// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <condition_variable>
#include <cstddef>
#include <exception>
#include <functional>
#include <limits>
#include <mutex>
#include <optional>
#include <stop_token>
#include <thread>
#include <vector>

namespace whichway {

/// Threads for long work that is made of independent jobs: rehearsals, cohorts, reports, library checks.
/// (A session's plans have a thread of their own, PlanningWorker.)
///
/// Job i runs on thread i mod `threads`. Each job writes what it makes into a place of its own (say, element
/// i of a vector that the caller sized before), and the caller combines these in the order of i: so the
/// result does not depend on the number of threads or on their race.
class JobPool {
public:
    /// Long jobs poll `stop` and then return an error with the code kCancelled.
    using Job = std::function<Result<void>(std::size_t index, std::stop_token stop)>;
    using Progress = std::function<void(std::size_t done, std::size_t count)>;

    /// @throws std::invalid_argument unless `threads` is 1 to 256.
    explicit JobPool(int threads);
    /// No `run` may be under way.
    ~JobPool() = default;
    JobPool(const JobPool&) = delete;
    JobPool& operator=(const JobPool&) = delete;

    int threads() const { return static_cast<int>(threads_.size()); }

    /// Runs jobs 0 … count - 1 and returns when none is running any more. What the jobs wrote is then visible
    /// to the caller. May be called from several threads, which take turns.
    ///
    /// When a job fails, the ones behind it are stopped or not begun, and those before it still run: so it is
    /// always the failure of the lowest index that is reported.
    ///
    /// @param stop stops all jobs.
    /// @param progress called in the caller's thread with rising numbers of finished jobs; some may be left
    /// out, but not the last. If it throws, the jobs are stopped and the exception goes to the caller.
    /// @return the error of the failed job of the lowest index; kCancelled if `stop` came before all were
    /// done.
    /// @throws what the job of the lowest index threw, if that was the first failure; std::logic_error if
    /// called from inside a job, which would wait for itself.
    Result<void> run(std::size_t count, const Job& job, std::stop_token stop = {},
                     const Progress& progress = {});

private:
    static constexpr std::size_t kNone = std::numeric_limits<std::size_t>::max();

    struct Failure {
        std::size_t index = kNone;
        std::optional<Error> error = {};
        std::exception_ptr exception = {};
    };
    /// What a thread is doing.
    struct Slot {
        std::size_t index = kNone;
        std::stop_source stop{std::nostopstate};
    };

    void work(std::size_t thread, std::stop_token stop);
    void finish(std::size_t thread, Failure failure);
    void stopBehind(std::size_t index);
    void stopAll();
    Result<void> outcome() const;

    std::mutex turn_; ///< held by the `run` whose turn it is
    // guarded by mutex_
    std::mutex mutex_;
    std::condition_variable_any changed_;
    const Job* job_ = nullptr;
    std::size_t count_ = 0;
    std::size_t batch_ = 0; ///< number of `run`s so far
    std::size_t done_ = 0;
    std::size_t busyThreads_ = 0;
    bool stopped_ = false;
    Failure failure_ = {};
    std::vector<Slot> slots_;
    // last, so that the threads end before anything they use
    std::vector<std::jthread> threads_;
};

} // namespace whichway
