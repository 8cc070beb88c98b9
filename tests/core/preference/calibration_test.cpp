// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/diagnostics.h"
#include "core/preference/posterior.h"
#include "core/random.h"

#include <cmath>
#include <gtest/gtest.h>

namespace whichway {
namespace {

/// Truth from the prior, questions at random, answers from the model.
struct Participant {
    Draws truth = {};
    std::vector<Response> responses = {};
};

Participant simulate(const ResponseModel& model, int answers, std::uint64_t seed) {
    Participant participant{.truth = drawPrior(model, 1, deriveSeed(seed, 1))};
    Random random(deriveSeed(seed, 2));
    for (int i = 0; i < answers; ++i) {
        Response response;
        double eta = participant.truth.sideBias[0];
        for (std::size_t j = 0; j < participant.truth.weights.columns; ++j) {
            response.difference.push_back(std::sqrt(2.0) * random.normal());
            eta += participant.truth.weights(0, j) * response.difference[j];
        }
        double left = random.uniform();
        for (const int answer : answersOf(model)) {
            response.answer = answer;
            left -= responseProbability(model, eta, participant.truth.cuts.row(0), answer);
            if (left < 0)
                break;
        }
        participant.responses.push_back(response);
    }
    return participant;
}

struct Coverage {
    int inside = 0, all = 0;
    void add(const std::vector<double>& draws, double truth) {
        ++all;
        inside += quantileOf(draws, 0.05) <= truth && truth <= quantileOf(draws, 0.95);
    }
    double share() const { return static_cast<double>(inside) / all; }
};

double length(std::span<const double> row) {
    return std::sqrt(dot(row, row));
}

// Posterior intervals cover draws of the prior as often as they say (the idea of Cook, Gelman and Rubin 2006,
// and of Talts et al. 2018). 200 people give a standard error of .021 for one scalar.
TEST(Calibration, NinetyPerCentIntervalsCoverNineInTen) {
    const ResponseModel model{.dimension = 4};
    Coverage weights, sensitivity, sideBias, firstCut;
    for (std::uint64_t seed = 1; seed <= 200; ++seed) {
        const Participant participant = simulate(model, 20, seed);
        const auto posterior = samplePosterior(model, participant.responses,
                                               {.drawsPerChain = 250, .seed = seed, .diagnose = false});
        ASSERT_TRUE(posterior);
        const Draws& draws = posterior->draws;
        const auto column = [&](auto value) {
            std::vector<double> values;
            for (std::size_t i = 0; i < draws.count(); ++i)
                values.push_back(value(i));
            return values;
        };
        for (std::size_t j = 0; j < 4; ++j)
            weights.add(column([&](std::size_t i) { return draws.weights(i, j); }),
                        participant.truth.weights(0, j));
        sensitivity.add(column([&](std::size_t i) { return length(draws.weights.row(i)); }),
                        length(participant.truth.weights.row(0)));
        sideBias.add(draws.sideBias, participant.truth.sideBias[0]);
        firstCut.add(column([&](std::size_t i) { return draws.cuts(i, 1); }), participant.truth.cuts(0, 1));
    }
    for (const Coverage& coverage : {weights, sensitivity, sideBias, firstCut}) {
        EXPECT_GE(coverage.share(), 0.84);
        EXPECT_LE(coverage.share(), 0.96);
    }
}

} // namespace
} // namespace whichway
