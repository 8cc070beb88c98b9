// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/likelihood.h"

#include "core/preference/base_coordinates.h"
#include "core/preference/posterior.h"
#include "core/random.h"

#include <cmath>
#include <gtest/gtest.h>
#include <limits>
#include <numeric>
#include <string>

namespace whichway {
namespace {

struct Case {
    ResponseModel model = {};
    std::string name = {};
};

std::vector<Case> allModels() {
    std::vector<Case> cases;
    for (int levels = 1; levels <= 7; ++levels)
        for (const bool cannotTell : {false, true})
            for (const double lapse : {0.0, 0.05})
                cases.push_back({{.dimension = 3, .levels = levels, .cannotTell = cannotTell, .lapse = lapse},
                                 "K" + std::to_string(levels) + (cannotTell ? "WithZero" : "") +
                                     (lapse > 0 ? "Lapse" : "")});
    return cases;
}

std::vector<Response> someResponses(const ResponseModel& model, int count, std::uint64_t seed) {
    Random random(seed);
    const std::vector<int> answers = answersOf(model);
    std::vector<Response> responses;
    for (int i = 0; i < count; ++i) {
        Response response{.answer = answers[random.below(answers.size())]};
        for (int j = 0; j < model.dimension; ++j)
            response.difference.push_back(1.5 * random.normal());
        responses.push_back(response);
    }
    return responses;
}

/// w, delta, then cuts with gaps of 0.1 to 1.
std::vector<double> somePoint(const ResponseModel& model, std::uint64_t seed) {
    Random random(seed);
    std::vector<double> natural;
    for (int j = 0; j <= model.dimension; ++j)
        natural.push_back(random.normal());
    double cut = 0;
    for (int k = 0; k < model.levels; ++k) {
        if (k > 0 || model.cannotTell)
            cut += 0.1 + 0.9 * random.uniform();
        natural.push_back(cut);
    }
    return natural;
}

double etaOf(const Response& response, const std::vector<double>& natural) {
    double eta = natural[response.difference.size()];
    for (std::size_t j = 0; j < response.difference.size(); ++j)
        eta += natural[j] * response.difference[j];
    return eta;
}

/// Five-point central difference, error of the order of 1e-11 here.
template <typename Function>
double slopeOf(Function function, double at) {
    const double h = 1e-3;
    return (function(at - 2 * h) - 8 * function(at - h) + 8 * function(at + h) - function(at + 2 * h)) /
           (12 * h);
}

class EveryModel : public testing::TestWithParam<Case> {};
INSTANTIATE_TEST_SUITE_P(Models, EveryModel, testing::ValuesIn(allModels()),
                         [](const auto& each) { return each.param.name; });

TEST_P(EveryModel, ProbabilitiesOfAllAnswersAddToOne) {
    const ResponseModel& model = GetParam().model;
    const std::vector<double> natural = somePoint(model, 3);
    const std::span<const double> cuts = std::span(natural).subspan(4);
    for (const double eta : {-800.0, -30.0, -2.0, 0.0, 0.7, 12.0, 1e6}) {
        double sum = 0;
        for (const int answer : answersOf(model)) {
            const double p = responseProbability(model, eta, cuts, answer);
            EXPECT_GE(p, model.lapse / model.categories());
            sum += p;
        }
        EXPECT_NEAR(sum, 1, 1e-14) << eta;
    }
}

TEST_P(EveryModel, ProbabilityIsTheDifferenceOfTheDocumentedLogistics) {
    const ResponseModel& model = GetParam().model;
    const std::vector<double> natural = somePoint(model, 4);
    const std::span<const double> cuts = std::span(natural).subspan(4);
    const auto atLeast = [&](double x, int level) { // P_ord(at least `level` on the side of x)
        return level > model.levels ? 0 : 1 / (1 + std::exp(cuts[static_cast<std::size_t>(level - 1)] - x));
    };
    for (const double eta : {-3.0, -0.2, 0.0, 1.0, 4.0})
        for (const int answer : answersOf(model)) {
            const double ordinal = answer == 0 ? 1 - atLeast(eta, 1) - atLeast(-eta, 1)
                                               : atLeast(answer > 0 ? eta : -eta, std::abs(answer)) -
                                                     atLeast(answer > 0 ? eta : -eta, std::abs(answer) + 1);
            EXPECT_NEAR(responseProbability(model, eta, cuts, answer),
                        model.lapse / model.categories() + (1 - model.lapse) * ordinal, 1e-14)
                << eta << " " << answer;
        }
}

TEST_P(EveryModel, LogLikelihoodIsTheSumOfLogProbabilities) {
    const ResponseModel& model = GetParam().model;
    for (const int count : {1, 2, 7, 150}) {
        const auto responses = someResponses(model, count, 5);
        const auto natural = somePoint(model, 6);
        double sum = 0;
        for (const Response& response : responses)
            sum += std::log(responseProbability(model, etaOf(response, natural),
                                                std::span(natural).subspan(4), response.answer));
        const ResponseLikelihood likelihood(model, responses);
        ResponseLikelihood::Scratch scratch;
        std::vector<double> gradient(natural.size());
        EXPECT_NEAR(likelihood.evaluate(natural, gradient, scratch), sum, 1e-12 * std::abs(sum) + 1e-13);
    }
}

TEST_P(EveryModel, GradientEqualsFiniteDifferences) {
    const ResponseModel& model = GetParam().model;
    const ResponseLikelihood likelihood(model, someResponses(model, 37, 7));
    ResponseLikelihood::Scratch scratch;
    std::vector<double> natural = somePoint(model, 8), gradient(natural.size()), ignored(natural.size());
    likelihood.evaluate(natural, gradient, scratch);
    for (std::size_t i = 0; i < natural.size(); ++i) {
        if (i == 4 && !model.cannotTell)
            continue; // c_0 is not a parameter
        const double slope = slopeOf(
            [&](double value) {
                std::vector<double> moved = natural;
                moved[i] = value;
                return likelihood.evaluate(moved, ignored, scratch);
            },
            natural[i]);
        EXPECT_NEAR(gradient[i], slope, 1e-7 * (1 + std::abs(slope))) << i;
    }
}

TEST_P(EveryModel, ObservedInformationEqualsFiniteDifferencesOfTheGradient) {
    const ResponseModel& model = GetParam().model;
    const ResponseLikelihood likelihood(model, someResponses(model, 23, 9));
    ResponseLikelihood::Scratch scratch;
    const std::vector<double> natural = somePoint(model, 10);
    const Matrix information = likelihood.observedInformation(natural);
    const std::size_t skipped = model.cannotTell ? natural.size() : 4;
    for (std::size_t i = 0; i < natural.size(); ++i)
        for (std::size_t j = 0; j < natural.size(); ++j) {
            if (i == skipped || j == skipped)
                continue;
            const double slope = slopeOf(
                [&](double value) {
                    std::vector<double> moved = natural, gradient(natural.size());
                    moved[i] = value;
                    likelihood.evaluate(moved, gradient, scratch);
                    return gradient[j];
                },
                natural[i]);
            EXPECT_NEAR(information(i, j), -slope, 1e-6 * (1 + std::abs(slope))) << i << " " << j;
        }
}

// E[score score'] over the model's own answers, by enumeration.
TEST_P(EveryModel, ExpectedInformationIsTheMeanSquareOfTheScore) {
    const ResponseModel& model = GetParam().model;
    const std::vector<double> natural = somePoint(model, 11);
    const auto asked = someResponses(model, 5, 12);
    const Matrix information = ResponseLikelihood(model, asked).expectedInformation(natural);
    Matrix expected(natural.size(), natural.size());
    ResponseLikelihood::Scratch scratch;
    std::vector<double> score(natural.size());
    for (Response response : asked)
        for (const int answer : answersOf(model)) {
            response.answer = answer;
            const double p =
                responseProbability(model, etaOf(response, natural), std::span(natural).subspan(4), answer);
            ResponseLikelihood(model, std::span(&response, 1)).evaluate(natural, score, scratch);
            for (std::size_t i = 0; i < score.size(); ++i)
                for (std::size_t j = 0; j < score.size(); ++j)
                    expected(i, j) += p * score[i] * score[j];
        }
    for (std::size_t i = 0; i < natural.size(); ++i)
        for (std::size_t j = 0; j < natural.size(); ++j)
            if (model.cannotTell || (i != 4 && j != 4)) {
                EXPECT_NEAR(information(i, j), expected(i, j), 1e-9) << i << " " << j;
            }
}

TEST_P(EveryModel, GradientInBaseCoordinatesEqualsFiniteDifferences) {
    const ResponseModel& model = GetParam().model;
    const ResponseLikelihood likelihood(model, someResponses(model, 19, 13));
    const BaseCoordinates coordinates(model);
    LogPosterior density(likelihood, coordinates);
    Random random(14);
    std::vector<double> u(density.size()), gradient(u.size()), ignored(u.size());
    for (double& value : u)
        value = random.normal();
    density(u, gradient);
    for (std::size_t i = 0; i < u.size(); ++i) {
        const double slope = slopeOf(
            [&](double value) {
                std::vector<double> moved = u;
                moved[i] = value;
                return density(moved, ignored);
            },
            u[i]);
        EXPECT_NEAR(gradient[i], slope, 1e-7 * (1 + std::abs(slope))) << i;
    }
}

TEST_P(EveryModel, JacobianEqualsFiniteDifferences) {
    const BaseCoordinates coordinates(GetParam().model);
    Random random(15);
    std::vector<double> u(coordinates.size());
    for (double& value : u)
        value = random.normal();
    const Matrix jacobian = coordinates.jacobian(u);
    std::vector<double> natural(jacobian.rows);
    for (std::size_t i = 0; i < u.size(); ++i)
        for (std::size_t r = 0; r < natural.size(); ++r) {
            const double slope = slopeOf(
                [&](double value) {
                    std::vector<double> moved = u;
                    moved[i] = value;
                    coordinates.toNatural(moved, natural);
                    return natural[r];
                },
                u[i]);
            EXPECT_NEAR(jacobian(r, i), slope, 1e-8 * (1 + std::abs(slope))) << r << " " << i;
        }
}

// At such utilities the probability of an unexpected answer is no longer a double; its logarithm is, and
// falls by |eta - cut|.
TEST_P(EveryModel, ExtremeUtilitiesGiveFiniteValues) {
    const ResponseModel& model = GetParam().model;
    std::vector<double> natural = somePoint(model, 16), gradient(natural.size());
    natural[0] = 1;
    natural[1] = natural[2] = natural[3] = 0;
    ResponseLikelihood::Scratch scratch;
    for (const double eta : {50.0, 700.0, 2e4, 1e9, 1e150})
        for (const int answer : answersOf(model)) {
            const Response response{.difference = {eta, 0, 0}, .answer = answer};
            const double value =
                ResponseLikelihood(model, std::span(&response, 1)).evaluate(natural, gradient, scratch);
            for (const double slope : gradient)
                ASSERT_TRUE(std::isfinite(slope)) << eta << " " << answer;
            if (answer == model.levels) {
                EXPECT_NEAR(value, std::log1p(-model.lapse * (1 - 1.0 / model.categories())), 1e-12);
            } else if (model.lapse > 0) {
                EXPECT_NEAR(value, std::log(model.lapse / model.categories()), 1e-12);
            } else if (answer == -model.levels) {
                EXPECT_NEAR(value, -eta - natural.back(), 1e-12 * eta);
                EXPECT_NEAR(gradient[0], -eta, 1e-12 * eta);
            } else {
                EXPECT_LT(value, 0);
                EXPECT_NEAR(value / eta, -1, 0.2);
            }
        }
}

TEST(ResponseLikelihood, TinyGapsDoNotCancel) {
    const ResponseModel model{.dimension = 1, .levels = 2, .lapse = 0};
    const Response response{.difference = {0.3}, .answer = 1};
    const ResponseLikelihood likelihood(model, std::span(&response, 1));
    ResponseLikelihood::Scratch scratch;
    std::vector<double> gradient(4);
    for (const double gap : {1e-3, 1e-8, 1e-15, 1e-100}) {
        // P = S(0.3) - S(0.3 - gap) is gap S'(0.3) to first order; the gap's derivative of the logarithm 1 /
        // gap.
        const double s = 1 / (1 + std::exp(-0.3));
        const double value = likelihood.evaluate(std::vector<double>{1, 0, 0, gap}, gradient, scratch);
        EXPECT_NEAR(value, std::log(gap) + std::log(s * (1 - s)), gap + 1e-13 * std::abs(std::log(gap)));
        EXPECT_NEAR(gradient[3] * gap, 1, gap + 1e-13);
    }
}

TEST(ResponseLikelihood, ALapseTooSmallToMatterIsLikeNone) {
    const auto valueWith = [](double lapse) {
        const ResponseModel model{.dimension = 1, .levels = 3, .lapse = lapse};
        const auto responses = someResponses(model, 20, 21);
        std::vector<double> gradient(5);
        ResponseLikelihood::Scratch scratch;
        return ResponseLikelihood(model, responses)
            .evaluate(std::vector<double>{0.8, 0.1, 0, 0.5, 1.2}, gradient, scratch);
    };
    for (const double lapse : {1e-300, 1e-60, 1e-30, 1e-14})
        EXPECT_NEAR(valueWith(lapse), valueWith(0), 1e-11) << lapse;
}

TEST(ResponseLikelihood, RefusesWhatDoesNotFitTheModel) {
    const ResponseModel model{.dimension = 2, .levels = 3};
    const auto build = [&](const ResponseModel& m, std::vector<double> difference, int answer) {
        const Response response{.difference = std::move(difference), .answer = answer};
        (void)ResponseLikelihood(m, std::span(&response, 1));
    };
    EXPECT_NO_THROW(build(model, {1, 2}, -3));
    EXPECT_THROW(build(model, {1}, 1), std::invalid_argument);
    EXPECT_THROW(build(model, {1, 2}, 4), std::invalid_argument);
    EXPECT_THROW(build(model, {1, 2}, 0), std::invalid_argument);
    EXPECT_THROW(build(model, {1, std::numeric_limits<double>::quiet_NaN()}, 1), std::invalid_argument);
    EXPECT_THROW(build(model, {1, std::numeric_limits<double>::infinity()}, 1), std::invalid_argument);
    EXPECT_THROW(build({.dimension = 0}, {}, 1), std::invalid_argument);
    EXPECT_THROW(build({.dimension = 2, .levels = 8}, {1, 2}, 1), std::invalid_argument);
    EXPECT_THROW(build({.dimension = 2, .lapse = 0.3}, {1, 2}, 1), std::invalid_argument);
    EXPECT_THROW(build({.dimension = 2, .weightDeviation = -1}, {1, 2}, 1), std::invalid_argument);
    EXPECT_THROW(build({.dimension = 2, .gapDeviation = std::numeric_limits<double>::quiet_NaN()}, {1, 2}, 1),
                 std::invalid_argument);
}

TEST(ResponseProbability, RefusesAnAnswerThatTheModelLacks) {
    const ResponseModel model{.dimension = 1, .levels = 2};
    const std::vector<double> cuts{0, 1};
    EXPECT_THROW(responseProbability(model, 0, cuts, 0), std::invalid_argument);
    EXPECT_THROW(responseProbability(model, 0, cuts, 3), std::invalid_argument);
    EXPECT_THROW(responseProbability(model, 0, std::vector<double>{0}, 1), std::invalid_argument);
}

TEST(ResponseModel, ListsItsAnswersInOrder) {
    EXPECT_EQ(answersOf({.dimension = 1, .levels = 2}), (std::vector<int>{-2, -1, 1, 2}));
    EXPECT_EQ(answersOf({.dimension = 1, .levels = 1, .cannotTell = true}), (std::vector<int>{-1, 0, 1}));
}

} // namespace
} // namespace whichway
