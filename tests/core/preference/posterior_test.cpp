// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/posterior.h"

#include "core/preference/diagnostics.h"
#include "core/random.h"

#include <bit>
#include <chrono>
#include <cmath>
#include <gtest/gtest.h>
#include <limits>
#include <thread>

namespace whichway {
namespace {

SamplerSettings quick(std::uint64_t seed = 1) {
    return {.drawsPerChain = 250, .seed = seed, .diagnose = false};
}

std::vector<Response> randomQuestions(int dimension, int count, std::uint64_t seed) {
    Random random(seed);
    std::vector<Response> responses;
    for (int i = 0; i < count; ++i) {
        Response response;
        for (int j = 0; j < dimension; ++j)
            response.difference.push_back(std::sqrt(2.0) * random.normal());
        responses.push_back(response);
    }
    return responses;
}

/// Answers by the sign of the first feature and a noise of size `noise`; the level by the size.
std::vector<Response> answeredByTheFirst(int dimension, int count, std::uint64_t seed, double noise,
                                         int levels = 3) {
    std::vector<Response> responses = randomQuestions(dimension, count, seed);
    Random random(deriveSeed(seed, 9));
    for (Response& response : responses) {
        const double x = response.difference[0] + noise * random.normal();
        const int level = std::min(levels, 1 + static_cast<int>(std::abs(x)));
        response.answer = x > 0 ? level : -level;
    }
    return responses;
}

void expectFinite(const Draws& draws) {
    for (const auto* values : {&draws.weights.values, &draws.sideBias, &draws.cuts.values})
        for (const double value : *values)
            ASSERT_TRUE(std::isfinite(value));
    for (std::size_t i = 0; i < draws.count(); ++i)
        for (std::size_t k = 1; k < draws.cuts.columns; ++k)
            ASSERT_LE(draws.cuts(i, k - 1), draws.cuts(i, k));
}

std::vector<double> column(const Matrix& matrix, std::size_t index) {
    std::vector<double> values;
    for (std::size_t i = 0; i < matrix.rows; ++i)
        values.push_back(matrix(i, index));
    return values;
}

// FNV-1a over the bits of all draws.
std::uint64_t digest(const Draws& draws) {
    std::uint64_t hash = 0xcbf29ce484222325ull;
    for (const auto* values : {&draws.weights.values, &draws.sideBias, &draws.cuts.values})
        for (const double value : *values)
            hash = (hash ^ std::bit_cast<std::uint64_t>(value)) * 0x100000001b3ull;
    return hash;
}

TEST(Prior, HasTheDocumentedQuantiles) {
    const ResponseModel model{.dimension = 3, .levels = 3, .cannotTell = true};
    const Draws draws = drawPrior(model, 100000, 5);
    ASSERT_EQ(draws.count(), 100000u);
    // Medians within 4.5 standard errors: se = sqrt(pi/2) sd / sqrt(n) on the scale where the prior is
    // normal.
    const double error = 4.5 * 1.2533 / std::sqrt(1e5);
    const auto logMedian = [&](auto value) {
        std::vector<double> logs;
        for (std::size_t i = 0; i < draws.count(); ++i)
            logs.push_back(std::log(value(i)));
        return quantileOf(logs, 0.5);
    };
    EXPECT_NEAR(logMedian([&](std::size_t i) { return draws.cuts(i, 0); }), std::log(0.3), 0.7 * error);
    EXPECT_NEAR(logMedian([&](std::size_t i) { return draws.cuts(i, 1) - draws.cuts(i, 0); }), std::log(0.8),
                0.7 * error);
    EXPECT_NEAR(logMedian([&](std::size_t i) { return draws.cuts(i, 2) - draws.cuts(i, 1); }), std::log(1.4),
                0.7 * error);
    EXPECT_NEAR(quantileOf(draws.sideBias, 0.5), 0, error);
    EXPECT_NEAR(quantileOf(draws.sideBias, 0.841344746), 1, 0.03);
    // E w^2 = s^2 E e^{2h} = (2.45^2 / 3) e^{2 * 0.36}; the median of w^2 is smaller. E log|w_j| = E log|N| +
    // log s.
    const double meanLogNormal = -0.5 * (0.5772156649015329 + std::log(2.0)); // Euler's constant
    double meanLog = 0;
    for (std::size_t i = 0; i < draws.count(); ++i)
        meanLog += std::log(std::abs(draws.weights(i, 1))) / 1e5;
    EXPECT_NEAR(meanLog, meanLogNormal + std::log(2.45 / std::sqrt(3.0)),
                4.5 * std::hypot(1.11, 0.6) / std::sqrt(1e5));
}

TEST(Prior, WhatTheModelFixesStaysFixed) {
    const Draws draws = drawPrior({.dimension = 2, .sideBiasDeviation = 0, .gapDeviation = 0}, 50, 1);
    for (std::size_t i = 0; i < draws.count(); ++i) {
        EXPECT_EQ(draws.sideBias[i], 0);
        EXPECT_EQ(draws.cuts(i, 0), 0);
        EXPECT_NEAR(draws.cuts(i, 1), 0.8, 1e-15);
        EXPECT_NEAR(draws.cuts(i, 2), 2.2, 1e-15);
    }
}

TEST(Prior, RefusesAnUnsoundModelOrNoDraws) {
    EXPECT_THROW(drawPrior({.dimension = 0}, 1, 1), std::invalid_argument);
    EXPECT_THROW(drawPrior({.dimension = 1, .levels = 8}, 1, 1), std::invalid_argument);
    EXPECT_THROW(drawPrior({.dimension = 1}, 0, 1), std::invalid_argument);
}

TEST(Posterior, WithoutAnswersIsThePrior) {
    const ResponseModel model{.dimension = 4};
    const auto posterior = samplePosterior(model, {}, {.drawsPerChain = 500, .seed = 11});
    ASSERT_TRUE(posterior);
    EXPECT_EQ(posterior->draws, drawPrior(model, 2000, 11));
    EXPECT_TRUE(posterior->converged);
}

// The whole model at once (lapse, hierarchical scale, side bias, free cuts, "cannot tell") against draws of
// the prior weighted by the likelihood, which shares no code with the sampler but the prior's own draws.
TEST(Posterior, EqualsThePriorWeightedByTheLikelihood) {
    const ResponseModel model{.dimension = 2, .levels = 3, .cannotTell = true};
    const std::vector<Response> responses{{{1.0, 0.5}, 2}, {{-0.7, 1.2}, -1}, {{0.3, -1.5}, 0},
                                          {{2.0, 0.1}, 3}, {{-1.1, -0.4}, 1}, {{0.2, 0.9}, -2},
                                          {{1.5, -1.0}, 2}};
    const Draws prior = drawPrior(model, 200000, 3);
    std::vector<double> weight;
    double total = 0;
    for (std::size_t i = 0; i < prior.count(); ++i) {
        double product = 1;
        for (const Response& response : responses)
            product *=
                responseProbability(model, dot(prior.weights.row(i), response.difference) + prior.sideBias[i],
                                    prior.cuts.row(i), response.answer);
        weight.push_back(product);
        total += product;
    }
    const auto posterior = samplePosterior(model, responses, {.drawsPerChain = 4000, .seed = 8});
    ASSERT_TRUE(posterior);
    EXPECT_TRUE(posterior->converged);
    const auto agree = [&](auto value) {
        double mean = 0, error = 0;
        for (std::size_t i = 0; i < prior.count(); ++i)
            mean += weight[i] / total * value(prior, i);
        for (std::size_t i = 0; i < prior.count(); ++i)
            error += std::pow(weight[i] / total * (value(prior, i) - mean), 2);
        Chains chains(4);
        double sampled = 0;
        for (std::size_t i = 0; i < posterior->draws.count(); ++i) {
            chains[i / 4000].push_back(value(posterior->draws, i));
            sampled += value(posterior->draws, i) / 16000;
        }
        EXPECT_NEAR(sampled, mean, 4 * std::hypot(std::sqrt(error), meanMcse(chains)));
    };
    const auto sensitivity = [](const Draws& draws, std::size_t i) {
        return std::sqrt(dot(draws.weights.row(i), draws.weights.row(i)));
    };
    agree([](const Draws& draws, std::size_t i) { return draws.weights(i, 0); });
    agree([](const Draws& draws, std::size_t i) { return draws.weights(i, 1); });
    agree([](const Draws& draws, std::size_t i) { return draws.weights(i, 0) * draws.weights(i, 0); });
    agree([](const Draws& draws, std::size_t i) { return draws.weights(i, 0) * draws.weights(i, 1); });
    agree([](const Draws& draws, std::size_t i) { return draws.sideBias[i]; });
    agree([](const Draws& draws, std::size_t i) { return draws.sideBias[i] * draws.sideBias[i]; });
    agree([](const Draws& draws, std::size_t i) { return std::log(draws.cuts(i, 0)); });
    agree([](const Draws& draws, std::size_t i) { return std::log(draws.cuts(i, 1)); });
    agree([](const Draws& draws, std::size_t i) { return std::log(draws.cuts(i, 2) - draws.cuts(i, 1)); });
    agree([&](const Draws& draws, std::size_t i) { return std::log(sensitivity(draws, i)); });
}

TEST(Posterior, GivesTheSameBitsForTheSameSeedAndOtherOnesForAnother) {
    const ResponseModel model{.dimension = 3};
    const auto responses = answeredByTheFirst(3, 15, 4, 0.5);
    const auto first = samplePosterior(model, responses, quick(7));
    const auto again = samplePosterior(model, responses, quick(7));
    const auto other = samplePosterior(model, responses, quick(8));
    ASSERT_TRUE(first && again && other);
    EXPECT_EQ(first->draws, again->draws);
    EXPECT_NE(first->draws, other->draws);
}

// Draws lead to plans, and a session's plans must be replayed on another machine, so the bits are part of the
// contract. If the sampler is changed on purpose, the new digests belong here.
TEST(Posterior, GivesTheRecordedBits) {
    const auto full =
        samplePosterior({.dimension = 3, .cannotTell = true}, answeredByTheFirst(3, 15, 4, 0.5), quick(7));
    const auto plain = samplePosterior({.dimension = 2, .levels = 2, .lapse = 0, .scaleDeviation = 0},
                                       answeredByTheFirst(2, 30, 5, 1.0, 2), quick(9));
    ASSERT_TRUE(full && plain);
    EXPECT_EQ(digest(drawPrior({.dimension = 3}, 100, 1)), 3451762438231250307u);
    EXPECT_EQ(digest(full->draws), 12402735663145338048u);
    EXPECT_EQ(digest(plain->draws), 1145466855178519484u);
}

TEST(Posterior, NamesWhatItSummarises) {
    const auto names = [](const ResponseModel& model) {
        std::vector<std::string> list;
        const auto posterior = samplePosterior(model, {}, {.drawsPerChain = 50});
        for (const ScalarSummary& summary : posterior->summaries)
            list.push_back(summary.name);
        return list;
    };
    EXPECT_EQ(
        names({.dimension = 2, .levels = 3}),
        (std::vector<std::string>{"weight 1", "weight 2", "sensitivity", "side bias", "cut 1", "cut 2"}));
    EXPECT_EQ(names({.dimension = 1, .levels = 1, .cannotTell = true, .sideBiasDeviation = 0}),
              (std::vector<std::string>{"weight 1", "sensitivity", "cut 0"}));
    EXPECT_EQ(names({.dimension = 1, .levels = 2, .gapDeviation = 0}),
              (std::vector<std::string>{"weight 1", "sensitivity", "side bias"}));
}

TEST(Posterior, SummariesDescribeTheDraws) {
    const auto posterior = samplePosterior({.dimension = 2}, answeredByTheFirst(2, 20, 6, 0.5), {.seed = 3});
    ASSERT_TRUE(posterior);
    ASSERT_EQ(posterior->draws.count(), 4000u);
    const ScalarSummary& weight = posterior->summaries[0];
    const auto draws = column(posterior->draws.weights, 0);
    EXPECT_LE(weight.low, weight.median);
    EXPECT_LE(weight.median, weight.high);
    EXPECT_NEAR(weight.median, quantileOf(draws, 0.5), 0.1 * weight.deviation);
    EXPECT_GT(weight.mean, 2 * weight.deviation); // the first feature decides
    EXPECT_TRUE(posterior->converged);
    for (const ScalarSummary& summary : posterior->summaries) {
        EXPECT_LT(summary.rHat, 1.01);
        EXPECT_GE(summary.bulkEss, 400);
        EXPECT_GE(summary.tailEss, 400);
        EXPECT_NEAR(summary.mcse * std::sqrt(summary.bulkEss) / summary.deviation, 1, 0.5);
    }
}

TEST(Posterior, SaysSoWhenItHasNotConverged) {
    const auto posterior = samplePosterior({.dimension = 2}, answeredByTheFirst(2, 20, 6, 0.5),
                                           {.chains = 2, .warmUp = 5, .drawsPerChain = 10});
    ASSERT_TRUE(posterior);
    EXPECT_FALSE(posterior->converged); // eight times 20 draws are fewer than 400
    EXPECT_EQ(posterior->draws.count(), 20u);
}

struct Hard {
    const char* name;
    ResponseModel model;
    std::vector<Response> responses;
};

std::vector<Hard> hardCases() {
    std::vector<Hard> cases;
    cases.push_back({"OneAnswer", {.dimension = 5}, answeredByTheFirst(5, 1, 1, 0)});
    cases.push_back({"OneFeature", {.dimension = 1}, answeredByTheFirst(1, 12, 2, 0.5)});
    cases.push_back({"ThirtyTwoFeatures", {.dimension = 32}, answeredByTheFirst(32, 25, 3, 0.5)});
    cases.push_back({"Separable", {.dimension = 3}, answeredByTheFirst(3, 60, 4, 0)});
    cases.push_back({"SeparableWithoutLapse",
                     {.dimension = 3, .levels = 1, .lapse = 0},
                     answeredByTheFirst(3, 60, 5, 0, 1)});
    auto alike = randomQuestions(4, 40, 6);
    for (Response& response : alike)
        response.answer = 3;
    cases.push_back({"AllAnswersAlike", {.dimension = 4}, alike});
    for (Response& response : alike)
        response.answer = 0;
    cases.push_back({"NeverCouldTell", {.dimension = 4, .cannotTell = true}, alike});
    auto same = std::vector<Response>(30, {.difference = {0, 0}, .answer = 1});
    cases.push_back({"IdenticalMotions", {.dimension = 2}, same});
    auto huge = answeredByTheFirst(2, 20, 7, 0.5);
    for (Response& response : huge)
        for (double& value : response.difference)
            value *= 1e8;
    cases.push_back({"HugeDifferences", {.dimension = 2}, huge});
    cases.push_back({"HugeDifferencesWithoutLapse", {.dimension = 2, .lapse = 0}, huge});
    cases.push_back({"SevenLevels",
                     {.dimension = 2, .levels = 7, .cannotTell = true},
                     answeredByTheFirst(2, 30, 8, 0.5, 7)});
    auto contrary = answeredByTheFirst(3, 40, 9, 0.5);
    for (std::size_t i = 0; i < contrary.size(); i += 2)
        contrary[i].answer = -contrary[i].answer;
    cases.push_back({"ContradictingAnswers", {.dimension = 3, .lapse = 0}, contrary});
    return cases;
}

class HardCase : public testing::TestWithParam<Hard> {};
INSTANTIATE_TEST_SUITE_P(Cases, HardCase, testing::ValuesIn(hardCases()),
                         [](const auto& each) { return each.param.name; });

TEST_P(HardCase, GivesAnHonestPosterior) {
    const auto posterior =
        samplePosterior(GetParam().model, GetParam().responses, {.drawsPerChain = 500, .seed = 2});
    ASSERT_TRUE(posterior);
    ASSERT_EQ(posterior->draws.count(), 2000u);
    expectFinite(posterior->draws);
    EXPECT_TRUE(posterior->converged);
    for (const ScalarSummary& summary : posterior->summaries)
        EXPECT_GT(summary.deviation, 0) << summary.name;
}

TEST(Posterior, OfIdenticalMotionsLeavesTheWeightsAtThePrior) {
    const std::vector<Response> same(30, {.difference = {0, 0}, .answer = 1});
    const auto posterior = samplePosterior({.dimension = 2, .scaleDeviation = 0}, same, {.seed = 2});
    ASSERT_TRUE(posterior);
    const double s = 2.45 / std::sqrt(2.0);
    for (std::size_t j = 0; j < 2; ++j) {
        EXPECT_NEAR(posterior->summaries[j].mean, 0, 4 * posterior->summaries[j].mcse);
        EXPECT_NEAR(posterior->summaries[j].deviation, s, 0.1 * s);
    }
    EXPECT_GT(posterior->summaries[3].mean, 0.5); // but the person leans left
}

TEST(Posterior, OfManyAnswersIsNarrowAndRight) {
    const ResponseModel model{.dimension = 3, .levels = 2};
    auto responses = randomQuestions(3, 2000, 12);
    Random random(13);
    const std::vector<double> truth{1.2, -0.7, 0.4}, cuts{0, 0.9};
    for (Response& response : responses) {
        double left = random.uniform();
        for (const int answer : answersOf(model)) {
            response.answer = answer;
            left -= responseProbability(model, dot(truth, response.difference) + 0.2, cuts, answer);
            if (left < 0)
                break;
        }
    }
    const auto posterior = samplePosterior(model, responses, {.drawsPerChain = 500});
    ASSERT_TRUE(posterior);
    EXPECT_TRUE(posterior->converged);
    for (std::size_t j = 0; j < 3; ++j) {
        EXPECT_NEAR(posterior->summaries[j].mean, truth[j], 4 * posterior->summaries[j].deviation);
        EXPECT_LT(posterior->summaries[j].deviation, 0.1);
    }
    EXPECT_NEAR(posterior->summaries[4].mean, 0.2, 4 * posterior->summaries[4].deviation);
    EXPECT_NEAR(posterior->summaries[5].mean, 0.9, 4 * posterior->summaries[5].deviation);
}

TEST(Posterior, StopsBeforeItStarts) {
    std::stop_source source;
    source.request_stop();
    const auto posterior =
        samplePosterior({.dimension = 2}, answeredByTheFirst(2, 10, 1, 1), quick(), source.get_token());
    ASSERT_FALSE(posterior);
    EXPECT_EQ(posterior.error().code, kCancelled);
}

TEST(Posterior, StopsInTheMiddle) {
    SamplerSettings endless = quick();
    endless.drawsPerChain = std::numeric_limits<int>::max();
    std::string code;
    {
        std::jthread worker([&](std::stop_token stop) {
            const auto posterior =
                samplePosterior({.dimension = 2}, answeredByTheFirst(2, 10, 1, 1), endless, stop);
            code = posterior ? "finished" : posterior.error().code;
        });
    }
    EXPECT_EQ(code, kCancelled);
}

TEST(Posterior, RefusesSettingsAndAnswersThatMakeNoSense) {
    const auto responses = answeredByTheFirst(2, 5, 1, 1);
    EXPECT_THROW((void)samplePosterior({.dimension = 2}, responses, {.chains = 0}), std::invalid_argument);
    EXPECT_THROW((void)samplePosterior({.dimension = 2}, responses, {.drawsPerChain = 0}),
                 std::invalid_argument);
    EXPECT_THROW((void)samplePosterior({.dimension = 2}, responses, {.warmUp = -1}), std::invalid_argument);
    EXPECT_THROW((void)samplePosterior({.dimension = 3}, responses, {}), std::invalid_argument);
    EXPECT_THROW((void)samplePosterior({.dimension = 2, .levels = 1}, responses, {}), std::invalid_argument);
    EXPECT_THROW((void)samplePosterior({.dimension = 2, .lapse = 0.5}, {}, {}), std::invalid_argument);
}

TEST(MeanDirection, AveragesDirectionsNotWeights) {
    Draws draws{.weights = Matrix(2, 2), .sideBias = {0, 0}, .cuts = Matrix(2, 1)};
    draws.weights(0, 0) = 100;
    draws.weights(1, 1) = 0.01;
    const auto direction = meanDirection(draws);
    EXPECT_NEAR(direction[0], std::sqrt(0.5), 1e-15);
    EXPECT_NEAR(direction[1], std::sqrt(0.5), 1e-15);
    draws.weights(1, 1) = 0;
    draws.weights(1, 0) = -3;
    EXPECT_EQ(meanDirection(draws), (std::vector<double>{0, 0}));
}

} // namespace
} // namespace whichway
