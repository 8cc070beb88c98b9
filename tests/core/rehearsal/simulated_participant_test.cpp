// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/rehearsal/simulated_participant.h"

#include "core/random.h"

#include <cmath>
#include <gtest/gtest.h>
#include <map>
#include <vector>

namespace whichway {
namespace {

/// Independent standard normal features.
Matrix randomFeatures(std::size_t motions, std::size_t dimension, std::uint64_t seed) {
    Random random(seed);
    Matrix features(motions, dimension);
    for (double& value : features.values)
        value = random.normal();
    return features;
}

std::vector<double> differenceOf(const Matrix& features, std::size_t left, std::size_t right) {
    std::vector<double> difference(features.columns);
    for (std::size_t j = 0; j < features.columns; ++j)
        difference[j] = features(left, j) - features(right, j);
    return difference;
}

SimulatedPerson personOf(const Matrix& features, const ResponseModel& model, const PersonSettings& settings,
                         std::uint64_t seed = 1) {
    return makePerson(features, model, settings, seed).value();
}

// p^2 + (1 - p)^2 = 0.68 at p = 0.8, and logistic(ln 4) = 0.8: worked by hand.
TEST(SimulatedParticipant, OfOnePairHasTheLengthThatTheFormulaGives) {
    Matrix features(2, 1);
    features(0, 0) = 1;
    features(1, 0) = -1;
    const ResponseModel model{.dimension = 1};
    const SimulatedPerson person = personOf(features, model, {.agreement = 0.68, .weights = {3}});
    EXPECT_NEAR(person.weights[0], std::log(4.0) / 2, 1e-12);
}

class SimulatedParticipantOfASeed : public testing::TestWithParam<int> {};

TEST_P(SimulatedParticipantOfASeed, AgreesWithThemselvesAsOftenAsAsked) {
    const auto seed = static_cast<std::uint64_t>(GetParam());
    const ResponseModel model{.dimension = 6};
    const Matrix features = randomFeatures(60, 6, seed);
    for (const double agreement : {0.75, 0.85, 0.95}) {
        const SimulatedPerson person = personOf(features, model, {.agreement = agreement}, seed);
        EXPECT_NEAR(selfAgreement(features, person), agreement, 1e-12);

        // The same by counting: two answers to each of many random pairs.
        const SimulatedParticipant participant(person, model, seed);
        Random random(seed + 1000);
        constexpr int kPairs = 10000;
        int agreed = 0;
        for (int pair = 0; pair < kPairs; ++pair) {
            const std::size_t left = random.below(60);
            const std::size_t right = (left + 1 + random.below(59)) % 60;
            const std::vector<double> difference = differenceOf(features, left, right);
            const auto trial = static_cast<std::uint64_t>(2 * pair);
            agreed += (participant.answer(difference, trial) > 0) ==
                      (participant.answer(difference, trial + 1) > 0);
        }
        const double error = std::sqrt(agreement * (1 - agreement) / kPairs);
        EXPECT_NEAR(static_cast<double>(agreed) / kPairs, agreement, 4 * error);
    }
}

INSTANTIATE_TEST_SUITE_P(Seeds, SimulatedParticipantOfASeed, testing::Range(1, 9));

TEST(SimulatedParticipant, UsesEachConfidenceLevelAsOftenAsTheModelSays) {
    const ResponseModel model{.dimension = 2, .levels = 3, .cannotTell = true};
    const Matrix features = randomFeatures(40, 2, 7);
    const SimulatedPerson person =
        personOf(features, model, {.agreement = 0.8, .sideBias = 0.4, .lapse = 0.1});
    const SimulatedParticipant participant(person, model, 3);
    const std::vector<double> difference = {0.3, -0.2};
    const double eta = person.weights[0] * 0.3 - person.weights[1] * 0.2 + person.sideBias;
    constexpr int kTrials = 40000;
    std::map<int, int> counts;
    for (int trial = 1; trial <= kTrials; ++trial)
        ++counts[participant.answer(difference, static_cast<std::uint64_t>(trial))];
    // The model's formula once more, from the C library's exp (Agresti 1992; see response_model.h).
    const auto above = [](double x) { return 1 / (1 + std::exp(-x)); };
    double beyond = 0;
    for (int level = 3; level >= 1; --level) {
        const double cut = person.cuts[static_cast<std::size_t>(level - 1)];
        const double next = level < 3 ? above(eta - person.cuts[static_cast<std::size_t>(level)]) : 0;
        const double p = 0.1 / 7 + 0.9 * (above(eta - cut) - next);
        EXPECT_NEAR(counts[level] / double{kTrials}, p, 4 * std::sqrt(p * (1 - p) / kTrials)) << level;
        beyond += counts[level];
    }
    EXPECT_GT(counts[0], 0);
    EXPECT_GT(beyond, 0);
}

TEST(SimulatedParticipant, SetsTheCutPointsSoThatEachLevelIsMeantForAThirdOfThePairs) {
    const ResponseModel model{.dimension = 4, .levels = 3};
    const Matrix features = randomFeatures(80, 4, 11);
    const SimulatedPerson person = personOf(features, model, {.agreement = 0.85});
    ASSERT_EQ(person.cuts.size(), 3u);
    EXPECT_EQ(person.cuts[0], 0);
    int below[2] = {};
    int pairs = 0;
    for (std::size_t i = 0; i < 80; ++i)
        for (std::size_t j = i + 1; j < 80; ++j, ++pairs) {
            const double gap = std::abs(dot(person.weights, differenceOf(features, i, j)));
            below[0] += gap < person.cuts[1];
            below[1] += gap < person.cuts[2];
        }
    EXPECT_NEAR(below[0] / double(pairs), 1.0 / 3, 0.002);
    EXPECT_NEAR(below[1] / double(pairs), 2.0 / 3, 0.002);
}

TEST(SimulatedParticipant, KeepsTheDirectionThatIsGiven) {
    const ResponseModel model{.dimension = 3};
    const SimulatedPerson person = personOf(randomFeatures(30, 3, 5), model, {.weights = {1, -2, 0.5}});
    EXPECT_NEAR(person.weights[1] / person.weights[0], -2, 1e-12);
    EXPECT_NEAR(person.weights[2] / person.weights[0], 0.5, 1e-12);
}

TEST(SimulatedParticipant, WithoutAnAgreementKeepsTheLengthOfTheGivenWeights) {
    const ResponseModel model{.dimension = 2};
    const SimulatedPerson person =
        personOf(randomFeatures(30, 2, 5), model, {.agreement = std::nullopt, .weights = {1, -2}});
    EXPECT_EQ(person.weights, (std::vector<double>{1, -2}));
}

TEST(SimulatedParticipant, AnswersTheSameTrialOfTheSameSeedTheSameWay) {
    const ResponseModel model{.dimension = 3};
    const Matrix features = randomFeatures(30, 3, 5);
    const SimulatedParticipant one(personOf(features, model, {}, 9), model, 4);
    const SimulatedParticipant same(personOf(features, model, {}, 9), model, 4);
    const SimulatedParticipant other(personOf(features, model, {}, 9), model, 5);
    EXPECT_EQ(one.person(), same.person());
    int differing = 0;
    for (std::uint64_t trial = 200; trial > 0; --trial) {
        const std::vector<double> difference = differenceOf(features, trial % 30, (trial + 7) % 30);
        EXPECT_EQ(one.answer(difference, trial), same.answer(difference, trial));
        differing += one.answer(difference, trial) != other.answer(difference, trial);
    }
    EXPECT_GT(differing, 0);
}

TEST(SimulatedParticipant, LeansToTheSideOfTheBiasOnIdenticalMotions) {
    const ResponseModel model{.dimension = 3};
    const SimulatedParticipant participant(
        personOf(randomFeatures(30, 3, 5), model, {.sideBias = std::log(3.0)}), model, 4);
    int left = 0;
    for (std::uint64_t trial = 0; trial < 10000; ++trial)
        left += participant.answer(std::vector<double>{0, 0, 0}, trial) > 0;
    EXPECT_NEAR(left / 10000.0, 0.75, 4 * std::sqrt(0.75 * 0.25 / 10000)); // logistic(ln 3) = 3/4
}

TEST(SimulatedParticipant, WhoLapsesTooOftenCannotBeThatConsistent) {
    const ResponseModel model{.dimension = 2};
    const auto person = makePerson(randomFeatures(30, 2, 5), model, {.agreement = 0.95, .lapse = 0.5}, 1);
    ASSERT_FALSE(person);
    EXPECT_EQ(person.error().code, "rehearsal.agreement");
}

TEST(SimulatedParticipant, RefusesSettingsThatDoNotFit) {
    const ResponseModel model{.dimension = 2};
    const Matrix features = randomFeatures(30, 2, 5);
    EXPECT_THROW((void)makePerson(features, model, {.agreement = 1.0}, 1), std::invalid_argument);
    EXPECT_THROW((void)makePerson(features, model, {.weights = {1}}, 1), std::invalid_argument);
    EXPECT_THROW((void)makePerson(features, model, {.lapse = -0.1}, 1), std::invalid_argument);
    EXPECT_THROW((void)makePerson(randomFeatures(30, 3, 5), model, {}, 1), std::invalid_argument);
}

} // namespace
} // namespace whichway
