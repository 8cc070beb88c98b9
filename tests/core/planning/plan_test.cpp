// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/plan.h"

#include "core/planning/planning_worker.h"
#include "core/preference/posterior.h"
#include "core/random.h"

#include <algorithm>
#include <cmath>
#include <gtest/gtest.h>
#include <set>

using namespace whichway;

namespace {

PlanningProblem randomProblem(int motions, int d, std::uint64_t seed) {
    Random random(seed);
    PlanningProblem problem{.features =
                                Matrix(static_cast<std::size_t>(motions), static_cast<std::size_t>(d)),
                            .model = {.dimension = d, .levels = 3}};
    for (double& value : problem.features.values)
        value = random.normal();
    return problem;
}

std::vector<double> differenceOf(const PlanningProblem& problem, Pair pair) {
    std::vector<double> difference;
    for (std::size_t j = 0; j < problem.features.columns; ++j)
        difference.push_back(problem.features(static_cast<std::size_t>(pair.left), j) -
                             problem.features(static_cast<std::size_t>(pair.right), j));
    return difference;
}

/// A person's answer: w . difference by the model with cut points 0, 0.8, 2.2.
int answerOf(const std::vector<double>& weights, const std::vector<double>& difference, Random& random) {
    double eta = 0;
    for (std::size_t j = 0; j < weights.size(); ++j)
        eta += weights[j] * difference[j];
    const double noisy = eta + std::log(1 / (1 / random.uniform() - 1));
    const double size = std::abs(noisy);
    return (noisy > 0 ? 1 : -1) * (size > 2.2 ? 3 : (size > 0.8 ? 2 : 1));
}

PlanRequest answeredRequest(const PlanningProblem& problem, int answers, std::uint64_t seed) {
    Random random(seed);
    PlanRequest request{.id = 1, .batch = 3, .seed = seed};
    std::set<Pair> asked;
    std::vector<double> weights;
    for (std::size_t j = 0; j < problem.features.columns; ++j)
        weights.push_back(random.normal());
    while (static_cast<int>(request.answered.size()) < answers) {
        Pair pair{static_cast<int>(random.below(problem.features.rows)),
                  static_cast<int>(random.below(problem.features.rows))};
        if (pair.left != pair.right && asked.insert(pair.canonical()).second)
            request.answered.push_back(
                {.pair = pair, .answer = answerOf(weights, differenceOf(problem, pair), random)});
    }
    return request;
}

} // namespace

class PlanOfSeed : public ::testing::TestWithParam<int> {
protected:
    const std::uint64_t seed_ = static_cast<std::uint64_t>(GetParam());
};

TEST_P(PlanOfSeed, KeepsTheHardRules) {
    const PlanningProblem problem = randomProblem(40, 4, seed_);
    PlanRequest request = answeredRequest(problem, 12, seed_);
    request.pending = {{3, 1}};
    request.reserved = {{0, 5}, {2, 7}, {10, 11}};
    request.batch = 5;
    const auto plan = makePlan(problem, request);
    ASSERT_TRUE(plan.ok());
    ASSERT_EQ(plan->pairs.size(), 5u);
    EXPECT_TRUE(plan->relaxed.empty());
    std::set<Pair> taken = {{1, 3}, {0, 5}, {2, 7}, {10, 11}};
    std::vector<int> uses(40, 0);
    for (const AnsweredPair& answered : request.answered) {
        taken.insert(answered.pair.canonical());
        ++uses[static_cast<std::size_t>(answered.pair.left)];
        ++uses[static_cast<std::size_t>(answered.pair.right)];
    }
    for (const PlannedPair& planned : plan->pairs) {
        EXPECT_LT(planned.pair.left, planned.pair.right);
        EXPECT_TRUE(taken.insert(planned.pair).second);
        EXPECT_GT(planned.information, -0.05);
        EXPECT_LT(planned.information, std::log2(6.0));
        EXPECT_LE(++uses[static_cast<std::size_t>(planned.pair.left)], 8); // a fifth of 40
        EXPECT_LE(++uses[static_cast<std::size_t>(planned.pair.right)], 8);
    }
}

TEST_P(PlanOfSeed, IsTheSameAgainAndInTheWorker) {
    const auto problem = std::make_shared<const PlanningProblem>(randomProblem(60, 5, seed_));
    const PlanRequest request = answeredRequest(*problem, 10, seed_);
    const auto first = makePlan(*problem, request);
    const auto second = makePlan(*problem, request);
    ASSERT_TRUE(first.ok() && second.ok());
    EXPECT_EQ(*first, *second);
    PlanningWorker worker(problem);
    worker.request(request);
    const auto third = worker.take(std::chrono::minutes(5));
    ASSERT_TRUE(third && third->ok());
    EXPECT_EQ(**third, *first);
}

INSTANTIATE_TEST_SUITE_P(Seeds, PlanOfSeed, ::testing::Range(1, 9));

TEST(Plan, BeforeAnyAnswerHoldsAtMostFivePairs) {
    const PlanningProblem problem = randomProblem(50, 4, 1);
    const auto plan = makePlan(problem, {.id = 1, .batch = 10, .seed = 1});
    ASSERT_TRUE(plan.ok());
    EXPECT_EQ(plan->pairs.size(), 5u);
}

TEST(Plan, NeverPairsNearIdenticalMotionsUnlessNothingElseIsLeftAndSaysSo) {
    PlanningProblem problem = randomProblem(30, 3, 2);
    for (std::size_t i = 0; i < 10; ++i) // ten copies of one motion
        for (std::size_t j = 0; j < 3; ++j)
            problem.features(i, j) = 0.01 * static_cast<double>(i);
    const auto plan = makePlan(problem, {.id = 1, .batch = 5, .seed = 2});
    ASSERT_TRUE(plan.ok());
    for (const PlannedPair& planned : plan->pairs)
        EXPECT_FALSE(planned.pair.left < 10 && planned.pair.right < 10);

    PlanningProblem alike{.features = Matrix(3, 2), .model = {.dimension = 2, .levels = 3}};
    const auto last = makePlan(alike, {.id = 1, .batch = 1, .seed = 2});
    ASSERT_TRUE(last.ok());
    EXPECT_FALSE(last->relaxed.empty());
}

TEST(Plan, SaysWhenNoPairIsLeft) {
    const PlanningProblem problem = randomProblem(3, 2, 3);
    const auto plan =
        makePlan(problem, {.id = 1, .reserved = {{0, 1}, {0, 2}, {1, 2}}, .batch = 1, .seed = 3});
    ASSERT_FALSE(plan.ok());
    EXPECT_EQ(plan.error().code, "planning.no-pair");
}

TEST(Plan, HandlesConstantAndCollinearFeaturesAndMorePairsWantedThanThereAre) {
    PlanningProblem problem = randomProblem(6, 4, 4);
    for (std::size_t i = 0; i < 6; ++i) {
        problem.features(i, 2) = 0;
        problem.features(i, 3) = 2 * problem.features(i, 0);
    }
    PlanRequest request = answeredRequest(problem, 10, 4);
    request.batch = 20;
    const auto plan = makePlan(problem, request);
    ASSERT_TRUE(plan.ok());
    EXPECT_EQ(plan->pairs.size(), 5u); // 15 pairs, 10 asked
    EXPECT_FALSE(plan->relaxed.empty());
}

TEST(Plan, StopsWhenAsked) {
    std::stop_source source;
    source.request_stop();
    const PlanningProblem problem = randomProblem(50, 4, 5);
    const auto plan = makePlan(problem, answeredRequest(problem, 20, 5), source.get_token());
    ASSERT_FALSE(plan.ok());
    EXPECT_EQ(plan.error().code, kCancelled);
}

TEST(Plan, RefusesPairsOutOfRange) {
    const PlanningProblem problem = randomProblem(5, 2, 6);
    EXPECT_THROW((void)makePlan(problem, {.id = 1, .pending = {{0, 9}}, .batch = 1, .seed = 1}),
                 std::invalid_argument);
    EXPECT_THROW((void)makePlan(problem, {.id = 1, .batch = 0, .seed = 1}), std::invalid_argument);
}

TEST(Plan, AtRandomTakesAllowedPairsUniformly) {
    PlanningProblem problem = randomProblem(5, 2, 7);
    problem.settings.choose = "at random";
    std::vector<int> counts(25, 0);
    for (std::uint64_t seed = 0; seed < 900; ++seed) {
        const auto plan = makePlan(problem, {.id = 1, .reserved = {{0, 1}}, .batch = 1, .seed = seed});
        ASSERT_TRUE(plan.ok());
        ++counts[static_cast<std::size_t>(plan->pairs[0].pair.left * 5 + plan->pairs[0].pair.right)];
    }
    EXPECT_EQ(counts[1], 0);
    double chiSquare = 0;
    for (int i = 0; i < 5; ++i)
        for (int k = i + 1; k < 5; ++k)
            if (i * 5 + k != 1)
                chiSquare += std::pow(counts[static_cast<std::size_t>(i * 5 + k)] - 100.0, 2) / 100;
    EXPECT_LT(chiSquare, 26.12); // chi-square with 8 degrees of freedom, upper 0.1 % point
}

// Joint information of a greedy batch against the best of all batches, on the same draws, by enumeration.
TEST(Plan, ABatchComesCloseToTheBestBatchOfASmallLibrary) {
    double sum = 0;
    const int instances = 8;
    for (std::uint64_t seed = 1; seed <= instances; ++seed) {
        PlanningProblem problem = randomProblem(7, 3, 50 + seed);
        problem.mainTrials = 400;
        const PlanRequest request{.id = 1, .batch = 2, .seed = seed};
        const auto plan = makePlan(problem, request);
        ASSERT_TRUE(plan.ok());
        const Draws draws = drawPrior(problem.model, 600, 1000 + seed);
        const std::vector<int> answers = answersOf(problem.model);
        const auto jointInformation = [&](Pair a, Pair b) {
            const auto psiA = differenceOf(problem, a), psiB = differenceOf(problem, b);
            std::vector<double> mean(36, 0.0);
            double conditional = 0;
            for (std::size_t m = 0; m < draws.count(); ++m) {
                const double etaA = dot(draws.weights.row(m), psiA) + draws.sideBias[m];
                const double etaB = dot(draws.weights.row(m), psiB) + draws.sideBias[m];
                for (std::size_t i = 0; i < 6; ++i)
                    for (std::size_t k = 0; k < 6; ++k) {
                        const double p =
                            responseProbability(problem.model, etaA, draws.cuts.row(m), answers[i]) *
                            responseProbability(problem.model, etaB, draws.cuts.row(m), answers[k]);
                        mean[i * 6 + k] += p / 600;
                        conditional -= p * std::log2(p) / 600;
                    }
            }
            double entropy = 0;
            for (const double p : mean)
                entropy -= p * std::log2(p);
            return entropy - conditional;
        };
        double best = 0;
        std::vector<Pair> pairs;
        for (int i = 0; i < 7; ++i)
            for (int k = i + 1; k < 7; ++k)
                pairs.push_back({i, k});
        for (std::size_t i = 0; i < pairs.size(); ++i)
            for (std::size_t k = i + 1; k < pairs.size(); ++k)
                best = std::max(best, jointInformation(pairs[i], pairs[k]));
        sum += jointInformation(plan->pairs[0].pair, plan->pairs[1].pair) / best;
    }
    EXPECT_GT(sum / instances, 0.93);
}

TEST(ImmediatePlanner, PlansTheNewestRequestWhenItIsTaken) {
    const auto problem = std::make_shared<const PlanningProblem>(randomProblem(20, 3, 8));
    ImmediatePlanner planner(problem);
    EXPECT_FALSE(planner.take(std::chrono::milliseconds(0)).has_value());
    planner.request({.id = 1, .batch = 1, .seed = 1});
    planner.request({.id = 2, .batch = 1, .seed = 1});
    const auto plan = planner.take(std::chrono::milliseconds(0));
    ASSERT_TRUE(plan && plan->ok());
    EXPECT_EQ((*plan)->request, 2u);
    EXPECT_FALSE(planner.take(std::chrono::milliseconds(0)).has_value());
}
