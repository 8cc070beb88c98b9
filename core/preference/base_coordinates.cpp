// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/base_coordinates.h"

#include "core/numbers/exp_log.h"

#include <cmath>

namespace whichway {

BaseCoordinates::BaseCoordinates(const ResponseModel& model)
    : model_(model), hasScale_(model.scaleDeviation > 0), hasSideBias_(model.sideBiasDeviation > 0),
      freeCuts_(model.gapDeviation > 0), firstLevel_(model.cannotTell ? 0 : 1) {
    requireSound(model);
    const auto levels = static_cast<std::size_t>(model.levels);
    firstCut_ = static_cast<std::size_t>(model.dimension) + (hasScale_ ? 1 : 0) + (hasSideBias_ ? 1 : 0);
    size_ = firstCut_ + (freeCuts_ ? levels - firstLevel_ : 0);
    for (std::size_t k = 0; k < levels; ++k)
        logGapMedian_.push_back(exactLog(k == 0   ? model.zeroCutMedian
                                         : k == 1 ? model.firstGapMedian
                                                  : model.laterGapMedian));
}

double BaseCoordinates::weightUnit(std::span<const double> u) const {
    const double s = model_.weightScale();
    return hasScale_ ? s * exactExp(model_.scaleDeviation * u[scaleIndex()]) : s;
}

void BaseCoordinates::toNatural(std::span<const double> u, std::span<double> natural) const {
    const auto d = static_cast<std::size_t>(model_.dimension);
    const double unit = weightUnit(u);
    for (std::size_t j = 0; j < d; ++j)
        natural[j] = unit * u[j];
    natural[d] = hasSideBias_ ? model_.sideBiasDeviation * u[d + (hasScale_ ? 1 : 0)] : 0.0;
    natural[d + 1] = 0;
    double cut = 0;
    for (std::size_t k = firstLevel_; k < logGapMedian_.size(); ++k) {
        const double spread = freeCuts_ ? model_.gapDeviation * u[firstCut_ + k - firstLevel_] : 0.0;
        cut += exactExp(logGapMedian_[k] + spread);
        natural[d + 1 + k] = cut;
    }
}

Matrix BaseCoordinates::jacobian(std::span<const double> u) const {
    const auto d = static_cast<std::size_t>(model_.dimension),
               levels = static_cast<std::size_t>(model_.levels);
    std::vector<double> natural(d + 1 + levels);
    toNatural(u, natural);
    Matrix jacobian(natural.size(), size_);
    const double unit = weightUnit(u);
    for (std::size_t j = 0; j < d; ++j) {
        jacobian(j, j) = unit;
        if (hasScale_)
            jacobian(j, scaleIndex()) = model_.scaleDeviation * natural[j];
    }
    if (hasSideBias_)
        jacobian(d, d + (hasScale_ ? 1 : 0)) = model_.sideBiasDeviation;
    std::size_t coordinate = firstCut_;
    for (std::size_t k = firstLevel_; k < levels && freeCuts_; ++k, ++coordinate) {
        const double gap = natural[d + 1 + k] - (k > 0 ? natural[d + k] : 0.0);
        for (std::size_t later = k; later < levels; ++later)
            jacobian(d + 1 + later, coordinate) = model_.gapDeviation * gap;
    }
    return jacobian;
}

LogPosterior::LogPosterior(const ResponseLikelihood& likelihood, const BaseCoordinates& coordinates)
    : likelihood_(likelihood), coordinates_(coordinates), natural_(likelihood.parameters()),
      slope_(likelihood.parameters()) {}

double LogPosterior::operator()(std::span<const double> u, std::span<double> gradient) {
    coordinates_.toNatural(u, natural_);
    double value = likelihood_.evaluate(natural_, slope_, scratch_);
    coordinates_.pullBack(u, natural_, slope_, gradient);
    for (std::size_t i = 0; i < u.size(); ++i) {
        value -= 0.5 * u[i] * u[i];
        gradient[i] -= u[i];
    }
    return value;
}

void BaseCoordinates::pullBack(std::span<const double> u, std::span<const double> natural,
                               std::span<const double> slope, std::span<double> gradient) const {
    const auto d = static_cast<std::size_t>(model_.dimension),
               levels = static_cast<std::size_t>(model_.levels);
    const double unit = weightUnit(u);
    double alongWeights = 0;
    for (std::size_t j = 0; j < d; ++j) {
        gradient[j] = unit * slope[j];
        alongWeights += natural[j] * slope[j];
    }
    if (hasScale_)
        gradient[scaleIndex()] = model_.scaleDeviation * alongWeights;
    if (hasSideBias_)
        gradient[d + (hasScale_ ? 1 : 0)] = model_.sideBiasDeviation * slope[d];
    // A gap moves its own cut point and every later one.
    double later = 0;
    std::size_t coordinate = size_;
    for (std::size_t k = levels; freeCuts_ && k-- > firstLevel_;) {
        later += slope[d + 1 + k];
        const double gap = natural[d + 1 + k] - (k > 0 ? natural[d + k] : 0.0);
        gradient[--coordinate] = model_.gapDeviation * gap * later;
    }
}

} // namespace whichway
