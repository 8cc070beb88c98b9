// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/work/job_pool.h"

#include <atomic>
#include <gtest/gtest.h>
#include <latch>
#include <numeric>
#include <stdexcept>
#include <string>

using namespace whichway;

namespace {

Error broken(std::size_t index) {
    return {.code = "test.broken", .place = {}, .message = std::to_string(index), .remedy = ""};
}

/// Returns when asked to stop. It waits on the token itself, so it would hang where no stop ever comes.
Result<void> untilStopped(const std::stop_token& stop) {
    std::mutex mutex;
    std::condition_variable_any changed;
    std::unique_lock lock(mutex);
    changed.wait(lock, stop, [] { return false; });
    return Error{.code = kCancelled, .place = {}, .message = "", .remedy = ""};
}

class JobPoolOf : public ::testing::TestWithParam<int> {};

} // namespace

TEST_P(JobPoolOf, RunsEveryJobOnceAndItsWritesAreVisible) {
    JobPool pool(GetParam());
    EXPECT_EQ(pool.threads(), GetParam());
    for (const std::size_t count : {0u, 1u, 2u, 7u, 100u}) {
        std::vector<int> runs(count, 0); // no atomics: ThreadSanitizer watches that none are needed
        const auto done = pool.run(count, [&](std::size_t index, const std::stop_token&) -> Result<void> {
            ++runs[index];
            return {};
        });
        EXPECT_TRUE(done.ok());
        EXPECT_EQ(runs, std::vector<int>(count, 1));
    }
}

TEST_P(JobPoolOf, ReportsTheFailureOfTheLowestIndexWhateverTheRace) {
    JobPool pool(GetParam());
    for (int repeat = 0; repeat < 50; ++repeat) {
        std::vector<int> runs(40, 0);
        const auto done = pool.run(40, [&](std::size_t index, const std::stop_token&) -> Result<void> {
            ++runs[index];
            if (index % 10 == 7)
                return broken(index);
            return {};
        });
        ASSERT_FALSE(done.ok());
        EXPECT_EQ(done.error(), broken(7));
        EXPECT_EQ(std::accumulate(runs.begin(), runs.begin() + 8, 0), 8) << "the jobs before it all ran";
    }
}

TEST_P(JobPoolOf, GivesTheExceptionOfAJobToTheCallerAndCanGoOn) {
    JobPool pool(GetParam());
    const JobPool::Job job = [](std::size_t index, const std::stop_token&) -> Result<void> {
        if (index == 3)
            throw std::runtime_error("three");
        if (index == 5)
            return broken(index);
        return {};
    };
    try {
        (void)pool.run(20, job);
        FAIL() << "nothing was thrown";
    } catch (const std::runtime_error& error) {
        EXPECT_STREQ(error.what(), "three");
    }
    EXPECT_TRUE(pool.run(3, job).ok());
}

TEST_P(JobPoolOf, StopsRunningJobsWhenAskedTo) {
    JobPool pool(GetParam());
    std::stop_source source;
    std::atomic<std::size_t> begun = 0;
    const auto done = pool.run(
        1000,
        [&](std::size_t, const std::stop_token& stop) {
            ++begun;
            source.request_stop();
            return untilStopped(stop);
        },
        source.get_token());
    ASSERT_FALSE(done.ok());
    EXPECT_EQ(done.error().code, kCancelled);
    EXPECT_LE(begun, static_cast<std::size_t>(GetParam()));
}

TEST_P(JobPoolOf, RunsNothingWhenItWasStoppedBefore) {
    JobPool pool(GetParam());
    std::stop_source source;
    source.request_stop();
    std::atomic<int> ended = 0;
    const auto done = pool.run(
        1000,
        [&](std::size_t, const std::stop_token& stop) {
            const auto stopped = untilStopped(stop); // a job may have begun before the stop was seen
            ++ended;
            return stopped;
        },
        source.get_token());
    ASSERT_FALSE(done.ok());
    EXPECT_EQ(done.error().code, kCancelled);
    EXPECT_LE(ended, GetParam());
}

TEST_P(JobPoolOf, CountsTheFinishedJobsUpToTheLast) {
    JobPool pool(GetParam());
    std::vector<std::size_t> told;
    const auto caller = std::this_thread::get_id();
    const auto done = pool.run(
        30, [](std::size_t, const std::stop_token&) { return Result<void>(); }, {},
        [&](std::size_t finished, std::size_t count) {
            EXPECT_EQ(std::this_thread::get_id(), caller);
            EXPECT_EQ(count, 30u);
            told.push_back(finished);
        });
    EXPECT_TRUE(done.ok());
    ASSERT_FALSE(told.empty());
    EXPECT_EQ(told.back(), 30u);
    for (std::size_t i = 1; i < told.size(); ++i)
        EXPECT_LT(told[i - 1], told[i]);
}

TEST_P(JobPoolOf, StopsTheJobsWhenProgressThrows) {
    JobPool pool(GetParam());
    const auto run = [&] {
        (void)pool.run(
            50,
            [](std::size_t index, const std::stop_token& stop) {
                return index < 1 ? Result<void>() : untilStopped(stop);
            },
            {}, [](std::size_t, std::size_t) { throw std::runtime_error("screen"); });
    };
    EXPECT_THROW(run(), std::runtime_error);
    EXPECT_TRUE(pool.run(5, [](std::size_t, const std::stop_token&) { return Result<void>(); }).ok());
}

TEST_P(JobPoolOf, LetsSeveralCallersTakeTurns) {
    JobPool pool(GetParam());
    std::vector<std::vector<int>> runs(3, std::vector<int>(20, 0));
    {
        std::vector<std::jthread> callers;
        for (std::vector<int>& own : runs)
            callers.emplace_back([&pool, &own] {
                const auto done =
                    pool.run(20, [&](std::size_t index, const std::stop_token&) -> Result<void> {
                        ++own[index];
                        return {};
                    });
                EXPECT_TRUE(done.ok());
            });
    }
    EXPECT_EQ(runs, std::vector(3, std::vector<int>(20, 1)));
}

TEST_P(JobPoolOf, RefusesToBeCalledFromItsOwnJobs) {
    JobPool pool(GetParam());
    const JobPool::Job inner = [](std::size_t, const std::stop_token&) { return Result<void>(); };
    EXPECT_THROW((void)pool.run(1, [&](std::size_t, const std::stop_token&) { return pool.run(1, inner); }),
                 std::logic_error);
}

INSTANTIATE_TEST_SUITE_P(Threads, JobPoolOf, ::testing::Values(1, 2, 5));

// Jobs 0 and 1 are running at once, so the failure of the first has to stop the second.
TEST(JobPool, StopsARunningJobBehindAFailedOne) {
    JobPool pool(2);
    std::latch both(2);
    const auto done = pool.run(2, [&](std::size_t index, const std::stop_token& stop) -> Result<void> {
        both.arrive_and_wait();
        return index == 0 ? Result<void>(broken(0)) : untilStopped(stop);
    });
    ASSERT_FALSE(done.ok());
    EXPECT_EQ(done.error(), broken(0));
}

// Job 1 fails while job 0 is running: job 0 is not stopped, and its own failure counts.
TEST(JobPool, LetsAJobBeforeAFailedOneGoOn) {
    JobPool pool(2);
    std::latch failed(1);
    const auto done = pool.run(2, [&](std::size_t index, const std::stop_token& stop) -> Result<void> {
        if (index == 0)
            failed.wait();
        else
            failed.count_down();
        EXPECT_TRUE(index == 1 || !stop.stop_requested());
        return broken(index);
    });
    ASSERT_FALSE(done.ok());
    EXPECT_EQ(done.error(), broken(0));
}

TEST(JobPool, NeedsAThread) {
    EXPECT_THROW(JobPool(0), std::invalid_argument);
    EXPECT_THROW(JobPool(257), std::invalid_argument);
}
