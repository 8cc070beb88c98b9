// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/likelihood_maximum.h"

#include <algorithm>
#include <cmath>
#include <optional>
#include <span>
#include <utility>

namespace whichway {
namespace {

constexpr int kMostSteps = 100;
constexpr int kMostHalvings = 40;
constexpr double kConverged = 1e-10; ///< of the last step, relative: the next would be about its square
constexpr double kLeastPivot = 1e-12;

Error noMaximum() {
    return {.code = "preference.no-maximum",
            .place = {},
            .message =
                "The likelihood has no maximum: the answers separate perfectly, a confidence level was never "
                "used, or a feature never varied.",
            .remedy = "Use a prior."};
}

/// A matrix and its Cholesky factor after scaling to a unit diagonal, which is what tells a nearly singular
/// one.
struct Scaled {
    Matrix lower = {};
    std::vector<double> scale = {};

    std::vector<double> solve(std::vector<double> b) const {
        for (std::size_t i = 0; i < b.size(); ++i)
            b[i] *= scale[i];
        solveLower(lower, b);
        solveLowerTransposed(lower, b);
        for (std::size_t i = 0; i < b.size(); ++i)
            b[i] *= scale[i];
        return b;
    }
};

std::optional<Scaled> factorise(const Matrix& full, const std::vector<std::size_t>& free) {
    Scaled result;
    for (const std::size_t i : free) {
        if (!(full(i, i) > 0))
            return std::nullopt;
        result.scale.push_back(1 / std::sqrt(full(i, i)));
    }
    Matrix scaled(free.size(), free.size());
    for (std::size_t r = 0; r < free.size(); ++r)
        for (std::size_t c = 0; c < free.size(); ++c)
            scaled(r, c) = full(free[r], free[c]) * result.scale[r] * result.scale[c];
    if (!cholesky(scaled, result.lower))
        return std::nullopt;
    for (std::size_t r = 0; r < free.size(); ++r)
        if (!(result.lower(r, r) * result.lower(r, r) > kLeastPivot))
            return std::nullopt;
    return result;
}

bool inOrder(std::span<const double> cuts, bool cannotTell) {
    if (cannotTell && !(cuts[0] > 0))
        return false;
    return std::adjacent_find(cuts.begin(), cuts.end(), [](double a, double b) { return !(a < b); }) ==
           cuts.end();
}

} // namespace

Result<LikelihoodMaximum> maximiseLikelihood(const ResponseLikelihood& likelihood) {
    const ResponseModel& model = likelihood.model();
    const auto d = static_cast<std::size_t>(model.dimension), k = static_cast<std::size_t>(model.levels);
    std::vector<std::size_t> free;
    for (std::size_t j = 0; j < d; ++j)
        free.push_back(j);
    if (model.sideBiasDeviation > 0)
        free.push_back(d);
    for (std::size_t j = model.cannotTell ? 0 : 1; j < k && model.gapDeviation > 0; ++j)
        free.push_back(d + 1 + j);

    LikelihoodMaximum best;
    best.natural.assign(likelihood.parameters(), 0.0);
    for (std::size_t j = model.cannotTell ? 0 : 1; j < k; ++j)
        best.natural[d + 1 + j] = (j > 0 ? best.natural[d + j] : 0.0) + (j == 0   ? model.zeroCutMedian
                                                                         : j == 1 ? model.firstGapMedian
                                                                                  : model.laterGapMedian);
    ResponseLikelihood::Scratch scratch;
    std::vector<double> gradient(best.natural.size()), trialGradient(best.natural.size());
    best.logLikelihood = likelihood.evaluate(best.natural, gradient, scratch);
    for (; best.iterations < kMostSteps; ++best.iterations) {
        std::optional<Scaled> factor = factorise(likelihood.observedInformation(best.natural), free);
        const bool observed = factor.has_value();
        if (!observed)
            factor = factorise(likelihood.expectedInformation(best.natural), free);
        if (!factor)
            return noMaximum();
        std::vector<double> step;
        for (const std::size_t i : free)
            step.push_back(gradient[i]);
        step = factor->solve(std::move(step));

        double share = 1, size = 0;
        std::vector<double> tried = best.natural;
        bool improved = false, whole = true;
        for (int halving = 0; halving < kMostHalvings && !improved; ++halving, share *= 0.5) {
            whole = halving == 0;
            size = 0;
            for (std::size_t r = 0; r < free.size(); ++r) {
                tried[free[r]] = best.natural[free[r]] + share * step[r];
                size = std::max(size, std::abs(share * step[r]) / (std::abs(best.natural[free[r]]) + 1e-3));
            }
            if (!inOrder(std::span(tried).subspan(d + 1), model.cannotTell))
                continue;
            const double value = likelihood.evaluate(tried, trialGradient, scratch);
            // Next to the maximum the value cannot tell a step from rounding.
            improved = value >= best.logLikelihood - 1e-13 * (1 + std::abs(best.logLikelihood));
            if (improved)
                best.logLikelihood = value;
        }
        if (!improved)
            return noMaximum();
        best.natural.swap(tried);
        gradient.swap(trialGradient);
        if (size < kConverged && observed && whole) {
            factor = factorise(likelihood.observedInformation(best.natural), free);
            if (!factor)
                return noMaximum();
            best.covariance = Matrix(best.natural.size(), best.natural.size());
            for (std::size_t c = 0; c < free.size(); ++c) {
                std::vector<double> unit(free.size(), 0.0);
                unit[c] = 1;
                unit = factor->solve(std::move(unit));
                for (std::size_t r = 0; r < free.size(); ++r)
                    best.covariance(free[r], free[c]) = unit[r];
            }
            return best;
        }
    }
    return noMaximum();
}

} // namespace whichway
