// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/posterior.h"

#include "core/preference/base_coordinates.h"
#include "core/preference/diagnostics.h"
#include "core/preference/hamiltonian.h"
#include "core/preference/laplace.h"
#include "core/preference/likelihood.h"
#include "core/random.h"

#include <algorithm>
#include <cmath>
#include <stdexcept>

namespace whichway {
namespace {

constexpr int kPilotWarmUp = 60;
constexpr int kPilotDraws = 150;
constexpr int kMostLengthenings = 3; // each doubles the draws

/// Points in base coordinates, one list a chain.
using Positions = std::vector<std::vector<std::vector<double>>>;

class Sampler {
public:
    Sampler(const ResponseModel& model, std::span<const Response> responses, const SamplerSettings& settings,
            std::stop_token stop)
        : likelihood_(model, responses), coordinates_(model), posterior_(likelihood_, coordinates_),
          density_([this](std::span<const double> u, std::span<double> gradient) {
              return posterior_(u, gradient);
          }),
          settings_(settings), stop_(std::move(stop)) {}

    bool stopped() const { return stop_.stop_requested(); }

    /// Laplace fit, pilot, then chains whose metric comes from the pilot and that have finished their
    /// warm-up.
    void start() {
        const LaplaceFit fit = fitLaplace(likelihood_, coordinates_);
        Matrix factor;
        if (!cholesky(fit.covariance, factor))
            throw std::logic_error("samplePosterior: the Laplace covariance is not positive definite");
        std::vector<HamiltonianChain> pilots;
        for (int chain = 0; chain < settings_.chains; ++chain)
            pilots.push_back(startChain(fit.centre, factor, factor, fit.centre, 1.5, 100 + chain, 0));
        const Positions points = run(pilots, kPilotWarmUp, kPilotDraws);
        if (stopped())
            return;

        const std::size_t p = coordinates_.size();
        std::vector<double> mean(p, 0.0);
        double count = 0;
        for (const auto& chain : points)
            for (const auto& u : chain) {
                ++count;
                for (std::size_t i = 0; i < p; ++i)
                    mean[i] += u[i];
            }
        for (double& value : mean)
            value /= count;
        Matrix metric(p, p);
        for (const auto& chain : points)
            for (const auto& u : chain)
                for (std::size_t i = 0; i < p; ++i)
                    for (std::size_t j = 0; j <= i; ++j)
                        metric(i, j) += (u[i] - mean[i]) * (u[j] - mean[j]) / count;
        for (std::size_t i = 0; i < p; ++i)
            for (std::size_t j = 0; j <= i; ++j)
                metric(i, j) = 0.9 * metric(i, j) + 0.1 * fit.covariance(i, j);
        Matrix pilotFactor;
        if (!cholesky(metric, pilotFactor))
            pilotFactor = factor;
        double step = 0;
        for (const HamiltonianChain& pilot : pilots)
            step += pilot.stepSize() / static_cast<double>(pilots.size());
        for (int chain = 0; chain < settings_.chains; ++chain) {
            const auto& last = points[static_cast<std::size_t>(chain)].back();
            chains_.push_back(startChain(mean, pilotFactor, factor, last, 0.0, 200 + chain, step));
        }
        (void)run(chains_, settings_.warmUp, 0);
    }

    Positions draw(int perChain) { return run(chains_, 0, perChain); }

    /// The natural parameters of all points, chain after chain, every `stride`-th of each chain.
    Draws toDraws(const Positions& points, std::size_t stride) const {
        const ResponseModel& model = likelihood_.model();
        const auto d = static_cast<std::size_t>(model.dimension), k = static_cast<std::size_t>(model.levels);
        std::size_t count = 0;
        for (const auto& chain : points)
            count += chain.size() / stride;
        Draws draws{
            .weights = Matrix(count, d), .sideBias = std::vector<double>(count), .cuts = Matrix(count, k)};
        std::vector<double> natural(likelihood_.parameters());
        std::size_t row = 0;
        for (const auto& chain : points)
            for (std::size_t i = stride - 1; i < chain.size(); i += stride, ++row) {
                coordinates_.toNatural(chain[i], natural);
                std::copy_n(natural.begin(), d, draws.weights.row(row).begin());
                draws.sideBias[row] = natural[d];
                std::copy_n(natural.begin() + static_cast<std::ptrdiff_t>(d) + 1, k,
                            draws.cuts.row(row).begin());
            }
        return draws;
    }

private:
    HamiltonianChain startChain(const std::vector<double>& centre, const Matrix& metric, const Matrix& spread,
                                const std::vector<double>& around, double factor, int part,
                                double firstStep) const {
        Random random(deriveSeed(settings_.seed, static_cast<std::uint64_t>(part)));
        std::vector<double> start = around;
        std::vector<double> normals(start.size());
        for (double& value : normals)
            value = factor * random.normal();
        for (std::size_t i = 0; i < start.size(); ++i)
            for (std::size_t j = 0; j <= i; ++j)
                start[i] += spread(i, j) * normals[j];
        return HamiltonianChain(density_, centre, metric, start, random.bits(), {.firstStep = firstStep});
    }

    Positions run(std::vector<HamiltonianChain>& chains, int warmUp, int draws) const {
        Positions points(chains.size());
        for (std::size_t c = 0; c < chains.size(); ++c) {
            for (int i = 0; i < warmUp && !stopped(); ++i)
                chains[c].move(true);
            if (warmUp > 0)
                chains[c].endWarmUp();
            for (int i = 0; i < draws && !stopped(); ++i) {
                chains[c].move(false);
                points[c].emplace_back(chains[c].position().begin(), chains[c].position().end());
            }
        }
        return points;
    }

    ResponseLikelihood likelihood_;
    BaseCoordinates coordinates_;
    LogPosterior posterior_;
    LogDensity density_;
    SamplerSettings settings_;
    std::stop_token stop_;
    std::vector<HamiltonianChain> chains_;
};

ScalarSummary summarise(const std::string& name, const Chains& chains) {
    ScalarSummary summary{.name = name};
    std::vector<double> all;
    for (const auto& chain : chains)
        all.insert(all.end(), chain.begin(), chain.end());
    const auto n = static_cast<double>(all.size());
    for (const double value : all)
        summary.mean += value / n;
    double square = 0;
    for (const double value : all)
        square += (value - summary.mean) * (value - summary.mean);
    summary.deviation = std::sqrt(square / (n - 1));
    summary.median = quantileOf(all, 0.5);
    summary.low = quantileOf(all, 0.05);
    summary.high = quantileOf(all, 0.95);
    summary.rHat = rHat(chains);
    summary.bulkEss = bulkEss(chains);
    summary.tailEss = tailEss(chains);
    summary.mcse = meanMcse(chains);
    return summary;
}

/// One scalar of draws that stand chain after chain.
template <typename Value>
Chains chainsOf(std::size_t count, int chains, Value value) {
    const std::size_t each = count / static_cast<std::size_t>(chains);
    Chains lists(static_cast<std::size_t>(chains));
    for (std::size_t c = 0; c < lists.size(); ++c)
        for (std::size_t i = 0; i < each; ++i)
            lists[c].push_back(value(c * each + i));
    return lists;
}

std::vector<ScalarSummary> summariesOf(const ResponseModel& model, const Draws& draws, int chains) {
    std::vector<ScalarSummary> summaries;
    const std::size_t n = draws.count();
    for (std::size_t j = 0; j < draws.weights.columns; ++j)
        summaries.push_back(
            summarise("weight " + std::to_string(j + 1),
                      chainsOf(n, chains, [&](std::size_t i) { return draws.weights(i, j); })));
    summaries.push_back(summarise("sensitivity", chainsOf(n, chains, [&](std::size_t i) {
                                      return std::sqrt(dot(draws.weights.row(i), draws.weights.row(i)));
                                  })));
    if (model.sideBiasDeviation > 0)
        summaries.push_back(
            summarise("side bias", chainsOf(n, chains, [&](std::size_t i) { return draws.sideBias[i]; })));
    for (std::size_t k = model.cannotTell ? 0 : 1; k < draws.cuts.columns && model.gapDeviation > 0; ++k)
        summaries.push_back(summarise("cut " + std::to_string(k),
                                      chainsOf(n, chains, [&](std::size_t i) { return draws.cuts(i, k); })));
    return summaries;
}

bool allConverged(const std::vector<ScalarSummary>& summaries) {
    return std::all_of(summaries.begin(), summaries.end(), [](const ScalarSummary& summary) {
        return summary.rHat < 1.01 && summary.bulkEss >= 400 && summary.tailEss >= 400;
    });
}

} // namespace

Result<Posterior> samplePosterior(const ResponseModel& model, std::span<const Response> responses,
                                  const SamplerSettings& settings, std::stop_token stop) {
    if (settings.chains < 1 || settings.drawsPerChain < 1 || settings.warmUp < 0)
        throw std::invalid_argument("samplePosterior: chains, draws and warm-up must be positive");
    Posterior posterior{.chains = settings.chains};
    if (responses.empty()) {
        posterior.draws = drawPrior(model, settings.chains * settings.drawsPerChain, settings.seed);
        if (settings.diagnose) {
            posterior.summaries = summariesOf(model, posterior.draws, settings.chains);
            posterior.converged = allConverged(posterior.summaries);
        }
        return posterior;
    }
    const Error cancelled{.code = kCancelled, .place = {}, .message = "Stopped.", .remedy = ""};
    Sampler sampler(model, responses, settings, stop);
    sampler.start();
    if (sampler.stopped())
        return cancelled;
    Positions points = sampler.draw(settings.drawsPerChain);
    if (sampler.stopped())
        return cancelled;
    std::size_t stride = 1;
    if (settings.diagnose) {
        for (int lengthening = 0;; ++lengthening) {
            posterior.summaries = summariesOf(model, sampler.toDraws(points, 1), settings.chains);
            posterior.converged = allConverged(posterior.summaries);
            if (posterior.converged || lengthening == kMostLengthenings)
                break;
            const Positions more = sampler.draw(static_cast<int>(points.front().size()));
            if (sampler.stopped())
                return cancelled;
            for (std::size_t c = 0; c < points.size(); ++c)
                points[c].insert(points[c].end(), more[c].begin(), more[c].end());
            stride *= 2;
        }
    }
    posterior.draws = sampler.toDraws(points, stride);
    return posterior;
}

Draws drawPrior(const ResponseModel& model, int count, std::uint64_t seed) {
    if (count < 1)
        throw std::invalid_argument("drawPrior: at least one draw");
    const BaseCoordinates coordinates(model);
    const auto d = static_cast<std::size_t>(model.dimension), k = static_cast<std::size_t>(model.levels);
    const auto n = static_cast<std::size_t>(count);
    Draws draws{.weights = Matrix(n, d), .sideBias = std::vector<double>(n), .cuts = Matrix(n, k)};
    Random random(seed);
    std::vector<double> u(coordinates.size()), natural(d + 1 + k);
    for (std::size_t i = 0; i < n; ++i) {
        for (double& value : u)
            value = random.normal();
        coordinates.toNatural(u, natural);
        std::copy_n(natural.begin(), d, draws.weights.row(i).begin());
        draws.sideBias[i] = natural[d];
        std::copy_n(natural.begin() + static_cast<std::ptrdiff_t>(d) + 1, k, draws.cuts.row(i).begin());
    }
    return draws;
}

std::vector<double> meanDirection(const Draws& draws) {
    std::vector<double> mean(draws.weights.columns, 0.0);
    for (std::size_t i = 0; i < draws.count(); ++i) {
        const auto row = draws.weights.row(i);
        const double length = std::sqrt(dot(row, row));
        for (std::size_t j = 0; j < mean.size() && length > 0; ++j)
            mean[j] += row[j] / length;
    }
    const double length = std::sqrt(dot(mean, mean));
    for (double& value : mean)
        value = length > 0 ? value / length : 0.0;
    return mean;
}

} // namespace whichway
