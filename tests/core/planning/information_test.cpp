// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/information.h"

#include "core/planning/belief.h"
#include "core/random.h"

#include <algorithm>
#include <cmath>
#include <gtest/gtest.h>

using namespace whichway;

namespace {

/// The definition, worked out naively with the C library: H(mean p) - mean H(p) in bits, averaged over the
/// answers to `open` pairs, whose probabilities weight the draws.
double naiveInformation(const ResponseModel& model, const Draws& draws, const std::vector<double>& difference,
                        const std::vector<std::vector<double>>& open) {
    const std::vector<int> answers = answersOf(model);
    const auto probability = [&](std::size_t m, const std::vector<double>& psi, int answer) {
        double eta = draws.sideBias[m];
        for (std::size_t j = 0; j < psi.size(); ++j)
            eta += draws.weights(m, j) * psi[j];
        return responseProbability(model, eta, draws.cuts.row(m), answer);
    };
    std::vector<std::vector<double>> contexts = {
        std::vector<double>(draws.count(), 1.0 / static_cast<double>(draws.count()))};
    for (const auto& psi : open) {
        std::vector<std::vector<double>> finer;
        for (const auto& context : contexts)
            for (const int answer : answers) {
                std::vector<double> weighted = context;
                for (std::size_t m = 0; m < weighted.size(); ++m)
                    weighted[m] *= probability(m, psi, answer);
                finer.push_back(weighted);
            }
        contexts = finer;
    }
    double information = 0;
    for (const auto& context : contexts) {
        double mass = 0;
        for (const double weight : context)
            mass += weight;
        double entropy = 0, meanEntropy = 0;
        for (const int answer : answers) {
            double mean = 0;
            for (std::size_t m = 0; m < context.size(); ++m) {
                const double p = probability(m, difference, answer);
                mean += context[m] / mass * p;
                meanEntropy -= context[m] / mass * p * std::log2(p);
            }
            entropy -= mean * std::log2(mean);
        }
        information += mass * (entropy - meanEntropy);
    }
    return information;
}

std::vector<double> randomDifference(Random& random, int d) {
    std::vector<double> difference;
    for (int j = 0; j < d; ++j)
        difference.push_back(1.4 * random.normal());
    return difference;
}

} // namespace

struct ModelCase {
    int dimension, levels;
    bool cannotTell;
    double lapse;
};

class Information : public ::testing::TestWithParam<ModelCase> {
protected:
    const ResponseModel model_{.dimension = GetParam().dimension,
                               .levels = GetParam().levels,
                               .cannotTell = GetParam().cannotTell,
                               .lapse = GetParam().lapse};
    const Draws draws_ = drawPrior(model_, 333, 5);
};

TEST_P(Information, EqualsItsDefinition) {
    const InformationScorer scorer(model_, draws_);
    Random random(3);
    for (int i = 0; i < 20; ++i) {
        const std::vector<double> difference = randomDifference(random, model_.dimension);
        ASSERT_NEAR(scorer.information(difference), naiveInformation(model_, draws_, difference, {}), 1e-9);
    }
}

TEST_P(Information, AveragesOverTheAnswersToAnOpenPair) {
    Random random(4);
    const std::vector<double> open = randomDifference(random, model_.dimension);
    InformationScorer scorer(model_, draws_);
    scorer.condition(open, 1);
    for (int i = 0; i < 10; ++i) {
        const std::vector<double> difference = randomDifference(random, model_.dimension);
        ASSERT_NEAR(scorer.information(difference), naiveInformation(model_, draws_, difference, {open}),
                    1e-9);
    }
    // Knowing the answer to the same pair leaves less to learn from it.
    EXPECT_LT(scorer.information(open), InformationScorer(model_, draws_).information(open));
}

INSTANTIATE_TEST_SUITE_P(Models, Information,
                         ::testing::Values(ModelCase{1, 1, false, 0.05}, ModelCase{4, 3, false, 0.05},
                                           ModelCase{4, 2, true, 0.05}, ModelCase{6, 3, false, 0.0},
                                           ModelCase{3, 7, true, 0.1}));

TEST(InformationScorer, IsWithinMonteCarloErrorWhenContextsAreDrawn) {
    const ResponseModel model{.dimension = 3, .levels = 2, .cannotTell = false};
    const Draws draws = drawPrior(model, 1024, 8);
    Random random(9);
    std::vector<std::vector<double>> open;
    for (int i = 0; i < 3; ++i) // 64 combinations: beyond what is enumerated
        open.push_back(randomDifference(random, 3));
    InformationScorer scorer(model, draws);
    for (std::size_t i = 0; i < open.size(); ++i)
        scorer.condition(open[i], i);
    for (int i = 0; i < 10; ++i) {
        const std::vector<double> difference = randomDifference(random, 3);
        const double exact = naiveInformation(model, draws, difference, open);
        EXPECT_NEAR(scorer.information(difference), exact, 0.06 + 0.1 * exact);
    }
}

// The screen keeps the truly best pairs: all of the exact best 20 are among its best 300 of 3,160.
TEST(Belief, ScreensSoThatTheBestPairsSurvive) {
    for (std::uint64_t seed = 1; seed <= 5; ++seed) {
        Random random(seed);
        PlanningProblem problem{.features = Matrix(80, 5), .model = {.dimension = 5, .levels = 3}};
        for (double& value : problem.features.values)
            value = random.normal();
        std::vector<Response> responses;
        for (int i = 0; i < 15; ++i) {
            Response response{.difference = randomDifference(random, 5)};
            response.answer = response.difference[0] - 0.5 * response.difference[1] > 0 ? 2 : -1;
            responses.push_back(response);
        }
        const auto posterior = samplePosterior(problem.model, responses,
                                               {.drawsPerChain = 128, .seed = seed, .diagnose = false});
        ASSERT_TRUE(posterior.ok());
        const InformationScorer scorer(problem.model, posterior->draws);
        const PlanRequest request{};
        const PairRules rules(problem, request);
        std::vector<ScreenedPair> exact;
        for (int i = 0; i < 80; ++i)
            for (int k = i + 1; k < 80; ++k) {
                std::vector<double> difference(5);
                for (std::size_t j = 0; j < 5; ++j)
                    difference[j] = problem.features(static_cast<std::size_t>(i), j) -
                                    problem.features(static_cast<std::size_t>(k), j);
                if (rules.allows(i, k))
                    exact.push_back(
                        {.pair = {i, k}, .score = static_cast<float>(scorer.information(difference))});
            }
        std::sort(exact.begin(), exact.end(), [](const auto& a, const auto& b) { return a.score > b.score; });
        const std::vector<ScreenedPair> screened = Belief(problem, posterior->draws).screen(rules, 300);
        for (std::size_t i = 0; i < 20; ++i)
            EXPECT_TRUE(std::any_of(screened.begin(), screened.end(),
                                    [&](const ScreenedPair& one) { return one.pair == exact[i].pair; }))
                << "seed " << seed << ", rank " << i;
    }
}
