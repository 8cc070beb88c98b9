// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/posterior.h"

#include "core/preference/diagnostics.h"
#include "reference_data.h"

#include <cmath>
#include <functional>
#include <gtest/gtest.h>

// Posterior moments by importance sampling outside this program, with their Monte Carlo errors; sources in
// tests/reference/README.md. Agreement means within four combined Monte Carlo errors.
namespace whichway {
namespace {

using nlohmann::json;
using reference::Table;

SamplerSettings longRun() {
    return {.chains = 4, .warmUp = 300, .drawsPerChain = 4000, .seed = 20240229};
}

void expectAgreement(const Posterior& posterior, const std::function<double(std::size_t)>& value,
                     const json& fit, std::size_t index) {
    const auto chainCount = static_cast<std::size_t>(posterior.chains);
    const std::size_t each = posterior.draws.count() / chainCount;
    Chains chains(chainCount), squares(chainCount);
    double mean = 0;
    for (std::size_t i = 0; i < posterior.draws.count(); ++i)
        mean += value(i) / static_cast<double>(posterior.draws.count());
    double variance = 0;
    for (std::size_t i = 0; i < posterior.draws.count(); ++i) {
        const double square = (value(i) - mean) * (value(i) - mean);
        chains[i / each].push_back(value(i));
        squares[i / each].push_back(square);
        variance += square / static_cast<double>(posterior.draws.count());
    }
    const double deviation = std::sqrt(variance);
    const double deviationMcse = meanMcse(squares) / (2 * deviation);
    const double meanError = std::hypot(meanMcse(chains), fit.at("mean_mcse").at(index).get<double>());
    EXPECT_LT(meanError, 0.05 * deviation); // else agreement would mean nothing
    EXPECT_NEAR(mean, fit.at("mean").at(index).get<double>(), 4 * meanError);
    EXPECT_NEAR(deviation, fit.at("sd").at(index).get<double>(),
                4 * std::hypot(deviationMcse, fit.at("sd_mcse").at(index).get<double>()));
}

void expectWeightsAgree(const Posterior& posterior, const json& fit) {
    EXPECT_TRUE(posterior.converged);
    for (std::size_t j = 0; j < posterior.draws.weights.columns; ++j) {
        SCOPED_TRACE("weight " + std::to_string(j + 1));
        expectAgreement(
            posterior, [&](std::size_t i) { return posterior.draws.weights(i, j); }, fit, j);
    }
}

std::vector<Response> bankResponses(const Table& table, const json& fit, const std::string& id) {
    std::vector<Response> responses;
    for (std::size_t row = 0; row < table.rows(); ++row) {
        if (!id.empty() && table.text(row, "id") != id)
            continue;
        Response response{.answer = table.number(row, "choice") > 0.5 ? 1 : -1};
        for (const std::string column : fit.at("names"))
            response.difference.push_back(table.number(row, column));
        responses.push_back(response);
    }
    return responses;
}

ResponseModel choiceModel(double weightDeviation) {
    return {.dimension = 14,
            .levels = 1,
            .lapse = 0,
            .weightDeviation = weightDeviation,
            .scaleDeviation = 0,
            .sideBiasDeviation = 0};
}

TEST(PosteriorReference, PooledChoicesEqualBayesianLogit) {
    const json fit = reference::fits("bayes_logit_bank_open100.json").at("importance_sampling");
    const auto responses = bankResponses(Table("bank_open100.csv"), fit, "");
    ASSERT_EQ(responses.size(), 1567u);
    const auto posterior = samplePosterior(choiceModel(2), responses, longRun());
    ASSERT_TRUE(posterior);
    expectWeightsAgree(*posterior, fit);
}

class OnePerson : public testing::TestWithParam<const char*> {};
INSTANTIATE_TEST_SUITE_P(Bank, OnePerson, testing::Values("1", "2", "80", "482"));

TEST_P(OnePerson, SixteenChoicesEqualBayesianLogit) {
    const json fit = reference::fits("bayes_individual_bank_open.json").at(std::string("id_") + GetParam());
    const auto responses = bankResponses(Table("bank_open.csv"), fit, GetParam());
    ASSERT_GE(responses.size(), 14u);
    const auto posterior = samplePosterior(choiceModel(1), responses, longRun());
    ASSERT_TRUE(posterior);
    expectWeightsAgree(*posterior, fit);
}

std::vector<Response> simulatedConfidence() {
    const Table table("sim_ordinal_open.csv");
    std::vector<Response> responses;
    for (std::size_t row = 0; row < table.rows(); ++row) {
        Response response{.answer = static_cast<int>(table.number(row, "y")) - 3};
        for (const char* column : {"dx1", "dx2", "dx3", "dx4"})
            response.difference.push_back(table.number(row, column));
        responses.push_back(response);
    }
    return responses;
}

TEST(PosteriorReference, ConfidenceWithKnownCutsEqualsImportanceSampling) {
    const ResponseModel model{.dimension = 4,
                              .levels = 2,
                              .cannotTell = true,
                              .lapse = 0,
                              .weightDeviation = 2,
                              .scaleDeviation = 0,
                              .sideBiasDeviation = 0,
                              .firstGapMedian = 1.4, // cuts at 0.4 and 1.8
                              .zeroCutMedian = 0.4,
                              .gapDeviation = 0};
    const auto posterior = samplePosterior(model, simulatedConfidence(), longRun());
    ASSERT_TRUE(posterior);
    EXPECT_DOUBLE_EQ(posterior->draws.cuts(0, 1), 1.8);
    expectWeightsAgree(*posterior, reference::fits("ordinal_sim_open.json").at("bayes_fixed_thresholds"));
}

TEST(PosteriorReference, ConfidenceWithFreeCutsEqualsImportanceSampling) {
    const ResponseModel model{.dimension = 4,
                              .levels = 2,
                              .cannotTell = true,
                              .lapse = 0,
                              .weightDeviation = 2,
                              .scaleDeviation = 0,
                              .sideBiasDeviation = 0,
                              .firstGapMedian = 1, // logarithms of the gaps ~ N(0, 1)
                              .zeroCutMedian = 1,
                              .gapDeviation = 1};
    // The smallest cut mixes slowly on its logarithm: a shorter run does not know its own error well.
    SamplerSettings settings = longRun();
    settings.drawsPerChain = 16000;
    const auto posterior = samplePosterior(model, simulatedConfidence(), settings);
    ASSERT_TRUE(posterior);
    const json fit = reference::fits("ordinal_sim_open.json").at("bayes_free_symmetric");
    expectWeightsAgree(*posterior, fit);
    const Matrix& cuts = posterior->draws.cuts;
    expectAgreement(
        *posterior, [&](std::size_t i) { return std::log(cuts(i, 0)); }, fit, 4);
    expectAgreement(
        *posterior, [&](std::size_t i) { return std::log(cuts(i, 1) - cuts(i, 0)); }, fit, 5);
}

} // namespace
} // namespace whichway
