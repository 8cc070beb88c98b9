// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/random.h"

#include <functional>
#include <span>
#include <stop_token>
#include <vector>

namespace whichway {

/// Log density up to a constant; writes its gradient.
using LogDensity = std::function<double(std::span<const double>, std::span<double>)>;

/// One chain of Hamiltonian Monte Carlo (Neal 2011) in coordinates whitened by a centre and a covariance
/// factor, with jittered trajectory lengths and a step size set by dual averaging (Hoffman and Gelman 2014)
/// during warm-up. Deterministic given its seed.
class HamiltonianChain {
public:
    struct Settings {
        double trajectory = 1.8;  ///< in whitened units, times U(0.7, 1.3)
        double acceptance = 0.85; ///< target of the step size
        int mostSteps = 32;       ///< of one trajectory
        double firstStep = 0;     ///< of the adaptation; 0: 1.2 over the fourth root of the dimension
    };

    /// `density` must outlive it. `factor`: lower Cholesky factor of the covariance. Starts at `start`.
    HamiltonianChain(const LogDensity& density, std::span<const double> centre, const Matrix& factor,
                     std::span<const double> start, std::uint64_t seed, const Settings& settings);

    /// Moves once; while `adapting`, the step size learns from the move.
    void move(bool adapting);
    /// Fixes the step size to its average.
    void endWarmUp();
    std::span<const double> position() const { return position_; }
    double stepSize() const { return step_; } ///< in whitened units

private:
    double evaluate(std::span<const double> whitened, std::span<double> gradient);

    const LogDensity& density_;
    std::vector<double> centre_;
    Matrix factor_;
    Settings settings_;
    Random random_;
    std::vector<double> whitened_, gradient_, position_;
    double value_ = 0;
    double step_ = 0, logStepMean_ = 0, averageError_ = 0, shrinkPoint_ = 0;
    int adapted_ = 0;
    // scratch
    std::vector<double> trial_, trialGradient_, momentum_, trialPosition_, slope_;
};

} // namespace whichway
