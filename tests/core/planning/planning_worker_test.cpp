// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/planning_worker.h"

#include "core/random.h"

#include <atomic>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

std::shared_ptr<const PlanningProblem> problem(int motions = 24) {
    Random random(1);
    auto made = std::make_shared<PlanningProblem>();
    made->features = Matrix(static_cast<std::size_t>(motions), 3);
    made->model = {.dimension = 3, .levels = 3};
    for (double& value : made->features.values)
        value = random.normal();
    return made;
}

PlanRequest request(std::uint64_t id) {
    return {.id = id,
            .answered = {{.pair = {0, 1}, .answer = 2}, {.pair = {2, 3}, .answer = -1}},
            .batch = 2,
            .seed = id};
}

constexpr std::chrono::minutes kAsLongAsItTakes(5);

} // namespace

TEST(PlanningWorker, TheNewestRequestWins) {
    PlanningWorker worker(problem());
    for (std::uint64_t id = 1; id <= 50; ++id)
        worker.request(request(id));
    for (;;) {
        const auto plan = worker.take(kAsLongAsItTakes);
        ASSERT_TRUE(plan && plan->ok());
        if ((*plan)->request == 50)
            break; // an earlier one may have been finished before it was replaced
    }
    EXPECT_FALSE(worker.take(std::chrono::milliseconds(0)).has_value());
}

TEST(PlanningWorker, EndsWhileAPlanIsRunning) {
    for (std::uint64_t id = 1; id <= 20; ++id) {
        PlanningWorker worker(problem(60));
        worker.request(request(id));
        if (id % 2 == 0)
            worker.request(request(id + 100));
    }
}

TEST(PlanningWorker, EndsWithoutEverBeingAsked) {
    const PlanningWorker worker(problem());
}

TEST(PlanningWorker, TellsWhenAPlanIsReady) {
    std::atomic<int> ready = 0;
    {
        PlanningWorker worker(problem(), [&] { ++ready; });
        worker.request(request(1));
        ASSERT_TRUE(worker.take(kAsLongAsItTakes).has_value());
    }
    EXPECT_EQ(ready, 1);
}

TEST(PlanningWorker, TurnsAnExceptionIntoAnError) {
    PlanningWorker worker(problem());
    worker.request({.id = 1, .pending = {{0, 999}}, .batch = 1, .seed = 1});
    const auto plan = worker.take(kAsLongAsItTakes);
    ASSERT_TRUE(plan.has_value());
    ASSERT_FALSE(plan->ok());
    EXPECT_EQ(plan->error().code, "planning.failed");
    worker.request(request(2));
    const auto next = worker.take(kAsLongAsItTakes);
    ASSERT_TRUE(next && next->ok());
}
