// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/hamiltonian.h"

#include "core/numbers/exp_log.h"

#include <algorithm>
#include <cmath>

namespace whichway {

HamiltonianChain::HamiltonianChain(const LogDensity& density, std::span<const double> centre,
                                   const Matrix& factor, std::span<const double> start, std::uint64_t seed,
                                   const Settings& settings)
    : density_(density), centre_(centre.begin(), centre.end()), factor_(factor), settings_(settings),
      random_(seed) {
    const std::size_t p = centre_.size();
    whitened_.resize(p);
    for (std::size_t i = 0; i < p; ++i)
        whitened_[i] = start[i] - centre_[i];
    solveLower(factor_, whitened_);
    for (auto* list :
         {&gradient_, &position_, &trial_, &trialGradient_, &momentum_, &trialPosition_, &slope_})
        list->resize(p);
    value_ = evaluate(whitened_, gradient_);
    position_ = trialPosition_;
    step_ =
        settings_.firstStep > 0 ? settings_.firstStep : 1.2 / std::sqrt(std::sqrt(static_cast<double>(p)));
    shrinkPoint_ = exactLog(step_);
    logStepMean_ = shrinkPoint_;
}

double HamiltonianChain::evaluate(std::span<const double> whitened, std::span<double> gradient) {
    const std::size_t p = whitened.size();
    for (std::size_t i = 0; i < p; ++i) {
        double sum = centre_[i];
        for (std::size_t j = 0; j <= i; ++j)
            sum += factor_(i, j) * whitened[j];
        trialPosition_[i] = sum;
    }
    const double value = density_(trialPosition_, slope_);
    std::fill(gradient.begin(), gradient.end(), 0.0);
    for (std::size_t i = 0; i < p; ++i) {
        const double slope = slope_[i];
        for (std::size_t j = 0; j <= i; ++j)
            gradient[j] += factor_(i, j) * slope;
    }
    return value;
}

void HamiltonianChain::move(bool adapting) {
    const std::size_t p = whitened_.size();
    double energy = -value_;
    for (std::size_t i = 0; i < p; ++i) {
        momentum_[i] = random_.normal();
        energy += 0.5 * momentum_[i] * momentum_[i];
    }
    const double length = settings_.trajectory * (0.7 + 0.6 * random_.uniform());
    const double step = step_ * (0.8 + 0.4 * random_.uniform());
    const int steps = std::clamp(static_cast<int>(std::ceil(length / step)), 1, settings_.mostSteps);

    trial_ = whitened_;
    trialGradient_ = gradient_;
    double value = value_;
    for (int k = 0; k < steps; ++k) {
        for (std::size_t i = 0; i < p; ++i) {
            momentum_[i] += 0.5 * step * trialGradient_[i];
            trial_[i] += step * momentum_[i];
        }
        value = evaluate(trial_, trialGradient_);
        for (std::size_t i = 0; i < p; ++i)
            momentum_[i] += 0.5 * step * trialGradient_[i];
        if (!(value > -1e12)) // left the region where numbers mean anything
            break;
    }
    double trialEnergy = -value;
    for (std::size_t i = 0; i < p; ++i)
        trialEnergy += 0.5 * momentum_[i] * momentum_[i];
    const double change = energy - trialEnergy;
    const bool sound = change > -1000 && change < 1e12;
    const double probability = sound ? (change >= 0 ? 1.0 : exactExp(change)) : 0.0;
    if (random_.uniform() < probability) {
        whitened_.swap(trial_);
        gradient_.swap(trialGradient_);
        position_ = trialPosition_;
        value_ = value;
    }
    if (!adapting)
        return;
    // Dual averaging with the constants of its paper: gamma .05, t0 10, kappa .75.
    ++adapted_;
    const double t = adapted_;
    averageError_ += (settings_.acceptance - probability - averageError_) / (t + 10);
    const double logStep =
        std::clamp(shrinkPoint_ - std::sqrt(t) / 0.05 * averageError_, exactLog(1e-4), exactLog(3.0));
    const double weight = exactExp(-0.75 * exactLog(t));
    logStepMean_ += weight * (logStep - logStepMean_);
    step_ = exactExp(logStep);
}

void HamiltonianChain::endWarmUp() {
    if (adapted_ > 0)
        step_ = exactExp(logStepMean_);
}

} // namespace whichway
