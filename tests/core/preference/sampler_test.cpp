// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/base_coordinates.h"
#include "core/preference/hamiltonian.h"
#include "core/preference/laplace.h"
#include "core/preference/likelihood.h"
#include "core/random.h"

#include <cmath>
#include <gtest/gtest.h>
#include <limits>

namespace whichway {
namespace {

Matrix identity(std::size_t size) {
    Matrix matrix(size, size);
    for (std::size_t i = 0; i < size; ++i)
        matrix(i, i) = 1;
    return matrix;
}

// A normal distribution with correlation 0.9 and unequal scales, sampled with a metric that knows neither.
TEST(HamiltonianChain, SamplesACorrelatedNormal) {
    const double rho = 0.9, scale = 2;
    const LogDensity density = [&](std::span<const double> x, std::span<double> gradient) {
        const double a = x[0], b = x[1] / scale, det = 1 - rho * rho;
        gradient[0] = -(a - rho * b) / det;
        gradient[1] = -(b - rho * a) / det / scale;
        return -0.5 * (a * a - 2 * rho * a * b + b * b) / det;
    };
    HamiltonianChain chain(density, std::vector<double>{0, 0}, identity(2), std::vector<double>{3, -3}, 5,
                           {});
    for (int i = 0; i < 500; ++i)
        chain.move(true);
    chain.endWarmUp();
    constexpr int kDraws = 100000;
    double aa = 0, bb = 0, ab = 0, meanA = 0;
    for (int i = 0; i < kDraws; ++i) {
        chain.move(false);
        const auto x = chain.position();
        aa += x[0] * x[0] / kDraws;
        bb += x[1] * x[1] / kDraws;
        ab += x[0] * x[1] / kDraws;
        meanA += x[0] / kDraws;
    }
    EXPECT_NEAR(meanA, 0, 0.03);
    EXPECT_NEAR(aa, 1, 0.04);
    EXPECT_NEAR(bb, scale * scale, 0.16);
    EXPECT_NEAR(ab, rho * scale, 0.08);
}

// Outside the unit square the density is not a number: the chain must stay inside, where it is uniform.
TEST(HamiltonianChain, NeverAcceptsWhatIsNotANumber) {
    const LogDensity density = [](std::span<const double> x, std::span<double> gradient) {
        const bool inside = std::abs(x[0]) < 1 && std::abs(x[1]) < 1;
        const double value = inside ? 0.0 : std::numeric_limits<double>::quiet_NaN();
        gradient[0] = gradient[1] = value;
        return value;
    };
    HamiltonianChain chain(density, std::vector<double>{0, 0}, identity(2), std::vector<double>{0, 0}, 6, {});
    for (int i = 0; i < 300; ++i)
        chain.move(true);
    chain.endWarmUp();
    double square = 0;
    constexpr int kDraws = 20000;
    for (int i = 0; i < kDraws; ++i) {
        chain.move(false);
        ASSERT_LT(std::abs(chain.position()[0]), 1);
        ASSERT_LT(std::abs(chain.position()[1]), 1);
        square += chain.position()[0] * chain.position()[0] / kDraws;
    }
    EXPECT_NEAR(square, 1.0 / 3, 0.04);
}

std::vector<Response> someResponses(int count) {
    Random random(31);
    std::vector<Response> responses;
    for (int i = 0; i < count; ++i) {
        Response response{.difference = {random.normal(), random.normal()}};
        const double x = response.difference[0] - 0.5 * response.difference[1] + random.normal();
        response.answer = (x > 0 ? 1 : -1) * (std::abs(x) > 1 ? 2 : 1);
        responses.push_back(response);
    }
    return responses;
}

TEST(LaplaceFit, WithAFixedScaleIsTheMode) {
    for (const double lapse : {0.0, 0.05}) {
        const ResponseModel model{.dimension = 2, .levels = 2, .lapse = lapse, .scaleDeviation = 0};
        const ResponseLikelihood likelihood(model, someResponses(40));
        const BaseCoordinates coordinates(model);
        const LaplaceFit fit = fitLaplace(likelihood, coordinates);
        LogPosterior density(likelihood, coordinates);
        std::vector<double> gradient(fit.centre.size());
        density(fit.centre, gradient);
        for (const double slope : gradient)
            EXPECT_NEAR(slope, 0, 1e-2);
        Matrix lower;
        EXPECT_TRUE(cholesky(fit.covariance, lower));
        for (std::size_t i = 0; i < fit.centre.size(); ++i) // no wider than the prior
            EXPECT_LE(fit.covariance(i, i), 1 + 1e-12);
    }
}

TEST(LaplaceFit, WithoutAnswersIsThePrior) {
    const ResponseModel model{.dimension = 3};
    const ResponseLikelihood likelihood(model, {});
    const LaplaceFit fit = fitLaplace(likelihood, BaseCoordinates(model));
    for (std::size_t i = 0; i < fit.centre.size(); ++i) {
        EXPECT_NEAR(fit.centre[i], 0, 1e-6);
        EXPECT_NEAR(fit.covariance(i, i), 1, 1e-12);
    }
}

} // namespace
} // namespace whichway
