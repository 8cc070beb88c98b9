// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/laplace.h"

#include "core/numbers/exp_log.h"

#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

/// J' F J + I: expected information in base coordinates plus the prior's.
Matrix informationInBase(const Matrix& natural, const Matrix& jacobian) {
    const std::size_t p = jacobian.columns, q = jacobian.rows;
    Matrix half(q, p);
    for (std::size_t i = 0; i < q; ++i)
        for (std::size_t k = 0; k < q; ++k) {
            const double value = natural(i, k);
            if (value != 0)
                for (std::size_t j = 0; j < p; ++j)
                    half(i, j) += value * jacobian(k, j);
        }
    Matrix information(p, p);
    for (std::size_t k = 0; k < q; ++k)
        for (std::size_t i = 0; i < p; ++i) {
            const double value = jacobian(k, i);
            if (value != 0)
                for (std::size_t j = 0; j < p; ++j)
                    information(i, j) += value * half(k, j);
        }
    for (std::size_t i = 0; i < p; ++i)
        information(i, i) += 1;
    return information;
}

/// Where -d h - E/(2 s^2 e^{2h}) - h^2/(2 t^2) is largest: its slope falls, so bisection finds the zero.
double bestScale(double dimension, double expectedSquare, double s, double deviation) {
    double low = -5, high = 5;
    for (int i = 0; i < 50; ++i) {
        const double h = 0.5 * (low + high);
        const double slope =
            -dimension + expectedSquare / (s * s * exactExp(2 * h)) - h / (deviation * deviation);
        (slope > 0 ? low : high) = h;
    }
    return 0.5 * (low + high);
}

class LaplaceFitter {
public:
    LaplaceFitter(const ResponseLikelihood& likelihood, const BaseCoordinates& coordinates)
        : likelihood_(likelihood), coordinates_(coordinates), density_(likelihood, coordinates),
          natural_(likelihood.parameters()), u_(coordinates.size(), 0.0) {}

    LaplaceFit fit() {
        const ResponseModel& model = likelihood_.model();
        const auto d = static_cast<std::size_t>(model.dimension);
        for (int round = 0; round < (coordinates_.hasScale() ? 6 : 1); ++round) {
            newton();
            if (!coordinates_.hasScale())
                break;
            const double unit = coordinates_.weightUnit(u_);
            const Matrix covariance = inverseFromCholesky(factor_);
            double expectedSquare = 0;
            for (std::size_t j = 0; j < d; ++j)
                expectedSquare += unit * unit * (u_[j] * u_[j] + covariance(j, j));
            const double before = u_[coordinates_.scaleIndex()];
            const double h =
                bestScale(model.dimension, expectedSquare, model.weightScale(), model.scaleDeviation);
            u_[coordinates_.scaleIndex()] = h / model.scaleDeviation;
            const double rescale = unit / coordinates_.weightUnit(u_);
            for (std::size_t j = 0; j < d; ++j)
                u_[j] *= rescale;
            if (std::abs(u_[coordinates_.scaleIndex()] - before) < 1e-3)
                break;
        }
        coordinates_.toNatural(u_, natural_);
        const Matrix information =
            informationInBase(likelihood_.expectedInformation(natural_), coordinates_.jacobian(u_));
        Matrix lower;
        LaplaceFit result{.centre = u_};
        // The prior's share keeps the information positive definite; only overflow could break it.
        if (cholesky(information, lower)) {
            result.covariance = inverseFromCholesky(lower);
        } else {
            result.covariance = Matrix(u_.size(), u_.size());
            for (std::size_t i = 0; i < u_.size(); ++i)
                result.covariance(i, i) = 1;
        }
        return result;
    }

private:
    /// Newton steps for everything but the scale.
    void newton() {
        std::vector<double> gradient(u_.size()), step(u_.size()), tried(u_.size());
        double value = density_(u_, gradient);
        for (int iteration = 0; iteration < 25; ++iteration) {
            coordinates_.toNatural(u_, natural_);
            Matrix jacobian = coordinates_.jacobian(u_);
            if (coordinates_.hasScale())
                for (std::size_t r = 0; r < jacobian.rows; ++r)
                    jacobian(r, coordinates_.scaleIndex()) = 0;
            if (!cholesky(informationInBase(likelihood_.expectedInformation(natural_), jacobian), factor_))
                return;
            step = gradient;
            if (coordinates_.hasScale())
                step[coordinates_.scaleIndex()] = 0;
            solveLower(factor_, step);
            solveLowerTransposed(factor_, step);
            double size = 0;
            for (const double s : step)
                size = std::max(size, std::abs(s));
            double share = 1;
            double next = value;
            for (int halving = 0; halving < 12; ++halving, share *= 0.5) {
                for (std::size_t i = 0; i < u_.size(); ++i)
                    tried[i] = u_[i] + share * step[i];
                next = density_(tried, gradient);
                if (next >= value)
                    break;
            }
            if (!(next >= value)) {
                (void)density_(u_, gradient);
                return;
            }
            u_ = tried;
            value = next;
            if (size * share < 1e-4)
                return;
        }
    }

    const ResponseLikelihood& likelihood_;
    const BaseCoordinates& coordinates_;
    LogPosterior density_;
    std::vector<double> natural_;
    std::vector<double> u_;
    Matrix factor_;
};

} // namespace

LaplaceFit fitLaplace(const ResponseLikelihood& likelihood, const BaseCoordinates& coordinates) {
    return LaplaceFitter(likelihood, coordinates).fit();
}

} // namespace whichway
