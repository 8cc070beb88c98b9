// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/work/job_pool.h"

#include <algorithm>
#include <stdexcept>
#include <utility>

namespace whichway {

JobPool::JobPool(int threads) {
    if (threads < 1 || threads > 256)
        throw std::invalid_argument("JobPool: between 1 and 256 threads");
    slots_.resize(static_cast<std::size_t>(threads));
    for (std::size_t thread = 0; thread < slots_.size(); ++thread)
        threads_.emplace_back([this, thread](std::stop_token stop) { work(thread, std::move(stop)); });
}

Result<void> JobPool::run(std::size_t count, const Job& job, std::stop_token stop, const Progress& progress) {
    const auto self = std::this_thread::get_id();
    if (std::any_of(threads_.begin(), threads_.end(), [&](const auto& t) { return t.get_id() == self; }))
        throw std::logic_error("JobPool: a job must not run jobs on its own pool");
    const std::lock_guard turn(turn_);
    {
        const std::lock_guard lock(mutex_);
        job_ = &job;
        count_ = count;
        done_ = 0;
        busyThreads_ = threads_.size();
        stopped_ = false;
        failure_ = {};
        ++batch_;
    }
    changed_.notify_all();

    std::exception_ptr progressFailure;
    {
        const std::stop_callback stopping(stop, [this] { stopAll(); });
        std::size_t told = 0;
        std::unique_lock lock(mutex_);
        for (;;) {
            changed_.wait(lock, [&] { return busyThreads_ == 0 || done_ > told; });
            const bool finished = busyThreads_ == 0;
            if (done_ > told) {
                told = done_;
                if (progress && !progressFailure) {
                    lock.unlock();
                    try {
                        progress(told, count);
                    } catch (...) {
                        progressFailure = std::current_exception();
                        stopAll(); // the jobs use what the caller is about to unwind
                    }
                    lock.lock();
                }
            }
            if (finished)
                break;
        }
        job_ = nullptr;
    }
    if (progressFailure)
        std::rethrow_exception(progressFailure);
    const std::lock_guard lock(mutex_);
    return outcome();
}

Result<void> JobPool::outcome() const {
    if (failure_.exception)
        std::rethrow_exception(failure_.exception);
    if (stopped_ && done_ < count_)
        return Error{.code = kCancelled, .place = {}, .message = "The work was stopped.", .remedy = ""};
    if (failure_.error)
        return *failure_.error;
    return {};
}

void JobPool::work(std::size_t thread, std::stop_token stop) {
    std::size_t lastBatch = 0;
    std::unique_lock lock(mutex_);
    while (changed_.wait(lock, stop, [&] { return batch_ != lastBatch; })) {
        lastBatch = batch_;
        for (std::size_t index = thread; index < count_; index += slots_.size()) {
            if (stopped_ || index > failure_.index)
                break;
            slots_[thread] = {.index = index, .stop = std::stop_source()};
            const Job& job = *job_;
            const std::stop_token jobStop = slots_[thread].stop.get_token();
            lock.unlock();
            Failure failure;
            try {
                if (const Result<void> result = job(index, jobStop); !result)
                    failure = {.index = index, .error = result.error()};
            } catch (...) {
                failure = {.index = index, .exception = std::current_exception()};
            }
            finish(thread, std::move(failure));
            lock.lock();
        }
        --busyThreads_;
        changed_.notify_all();
    }
}

void JobPool::finish(std::size_t thread, Failure failure) {
    const std::size_t failed = failure.index;
    {
        const std::lock_guard lock(mutex_);
        slots_[thread] = {};
        if (failed == kNone)
            ++done_;
        else if (failed < failure_.index)
            failure_ = std::move(failure);
    }
    changed_.notify_all();
    if (failed != kNone)
        stopBehind(failed);
}

void JobPool::stopBehind(std::size_t index) {
    std::vector<std::stop_source> behind;
    {
        const std::lock_guard lock(mutex_);
        for (const Slot& slot : slots_)
            if (slot.index != kNone && slot.index > index)
                behind.push_back(slot.stop);
    }
    // Not under the lock: what a job hung on its token runs here.
    for (std::stop_source& source : behind)
        source.request_stop();
}

void JobPool::stopAll() {
    std::vector<std::stop_source> running;
    {
        const std::lock_guard lock(mutex_);
        stopped_ = true;
        for (const Slot& slot : slots_)
            if (slot.index != kNone)
                running.push_back(slot.stop);
    }
    for (std::stop_source& source : running)
        source.request_stop();
}

} // namespace whichway
