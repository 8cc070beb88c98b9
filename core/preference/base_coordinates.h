// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/likelihood.h"

#include <cstddef>
#include <span>
#include <vector>

namespace whichway {

/// Coordinates u in which the whole prior is N(0, I), so that every scale of the model is of order one
/// ("non-centred"):
///     w = s e^{scaleDeviation u_h} v,  delta = sideBiasDeviation u_delta,
///     c_0 = exp(ln zeroCutMedian + gapDeviation u_0),  later cut points by gaps exp(ln median + gapDeviation
///     u).
/// Order of u: v_1 … v_d, then u_h, u_delta, u_0, the gaps; those that the model fixes are left out.
class BaseCoordinates {
public:
    /// @throws std::invalid_argument if the model is not sound.
    explicit BaseCoordinates(const ResponseModel& model);

    std::size_t size() const { return size_; }
    bool hasScale() const { return hasScale_; }
    std::size_t scaleIndex() const { return static_cast<std::size_t>(model_.dimension); }

    /// The natural parameters (see ResponseLikelihood) of u.
    void toNatural(std::span<const double> u, std::span<double> natural) const;
    /// The gradient in u of a function whose gradient in the natural parameters is `slope`.
    void pullBack(std::span<const double> u, std::span<const double> natural, std::span<const double> slope,
                  std::span<double> gradient) const;
    /// The matrix of d natural / d u at u, natural x u.
    Matrix jacobian(std::span<const double> u) const;
    /// e^{scaleDeviation u_h} s: what a unit of v is worth in w.
    double weightUnit(std::span<const double> u) const;

private:
    ResponseModel model_;
    std::size_t size_ = 0;
    bool hasScale_ = false, hasSideBias_ = false;
    bool freeCuts_ = false;
    std::size_t firstCut_ = 0;              ///< index of the first cut coordinate in u
    std::size_t firstLevel_ = 0;            ///< 1 where c_0 is fixed at 0
    std::vector<double> logGapMedian_ = {}; ///< of c_0 and the later gaps
};

/// The log posterior density of u up to a constant, with its gradient.
class LogPosterior {
public:
    /// Both must outlive it. Not safe from two threads at once: it keeps scratch space.
    LogPosterior(const ResponseLikelihood& likelihood, const BaseCoordinates& coordinates);
    std::size_t size() const { return coordinates_.size(); }
    double operator()(std::span<const double> u, std::span<double> gradient);

private:
    const ResponseLikelihood& likelihood_;
    const BaseCoordinates& coordinates_;
    ResponseLikelihood::Scratch scratch_;
    std::vector<double> natural_, slope_;
};

} // namespace whichway
