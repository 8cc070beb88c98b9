// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/planning/belief.h"

#include "core/numbers/exp_log.h"

#include <algorithm>
#include <cmath>

namespace whichway {
namespace {

std::vector<double> meanOf(const Draws& draws) {
    std::vector<double> mean(draws.weights.columns, 0.0);
    for (std::size_t m = 0; m < draws.count(); ++m)
        for (std::size_t j = 0; j < mean.size(); ++j)
            mean[j] += draws.weights(m, j) / static_cast<double>(draws.count());
    return mean;
}

Matrix covarianceOf(const Draws& draws, const std::vector<double>& mean) {
    Matrix covariance(mean.size(), mean.size());
    for (std::size_t m = 0; m < draws.count(); ++m)
        for (std::size_t i = 0; i < mean.size(); ++i)
            for (std::size_t j = 0; j < mean.size(); ++j)
                covariance(i, j) += (draws.weights(m, i) - mean[i]) * (draws.weights(m, j) - mean[j]) /
                                    static_cast<double>(draws.count());
    return covariance;
}

double varianceOf(const std::vector<double>& values) {
    double mean = 0, square = 0;
    for (const double value : values)
        mean += value / static_cast<double>(values.size());
    for (const double value : values)
        square += (value - mean) * (value - mean) / static_cast<double>(values.size());
    return square;
}

/// The widest that a table must reach: the range of mean utilities, and twice the largest deviation of one
/// motion.
MomentTable tableFor(const PlanningProblem& problem, const Draws& draws, const std::vector<double>& mean,
                     const Matrix& covariance, double sideVariance) {
    double low = 1e300, high = -1e300, widest = 0;
    for (std::size_t i = 0; i < problem.features.rows; ++i) {
        const auto z = problem.features.row(i);
        const double utility = dot(mean, z);
        low = std::min(low, utility);
        high = std::max(high, utility);
        double variance = 0;
        for (std::size_t r = 0; r < z.size(); ++r)
            variance += z[r] * dot(covariance.row(r), z);
        widest = std::max(widest, variance);
    }
    return MomentTable(problem.model, draws.cuts, high - low, std::sqrt(4 * widest + sideVariance));
}

} // namespace

Belief::Belief(const PlanningProblem& problem, const Draws& draws)
    : problem_(problem), sideVariance_(varianceOf(draws.sideBias)), mean_(meanOf(draws)),
      covariance_(covarianceOf(draws, mean_)),
      table_(tableFor(problem, draws, mean_, covariance_, sideVariance_)) {
    for (std::size_t i = 0; i < problem.features.rows; ++i)
        utility_.push_back(static_cast<float>(dot(mean_, problem.features.row(i))));
    whitened_.resize(problem.features.rows * problem.features.columns);
    whiten();
}

void Belief::whiten() {
    const std::size_t n = problem_.features.rows, d = problem_.features.columns;
    Matrix jittered = covariance_, lower;
    double trace = 0;
    for (std::size_t j = 0; j < d; ++j)
        trace += covariance_(j, j);
    for (double jitter = 1e-12;; jitter *= 100) {
        for (std::size_t j = 0; j < d; ++j)
            jittered(j, j) = covariance_(j, j) + jitter * (trace + 1e-12);
        if (cholesky(jittered, lower))
            break;
    }
    for (std::size_t i = 0; i < n; ++i) {
        const auto z = problem_.features.row(i);
        for (std::size_t j = 0; j < d; ++j) {
            double sum = 0;
            for (std::size_t r = j; r < d; ++r)
                sum += lower(r, j) * z[r];
            whitened_[j * n + i] = static_cast<float>(sum);
        }
    }
}

std::vector<double> Belief::difference(Pair pair) const {
    const auto a = problem_.features.row(static_cast<std::size_t>(pair.left));
    const auto b = problem_.features.row(static_cast<std::size_t>(pair.right));
    std::vector<double> difference(a.size());
    for (std::size_t j = 0; j < a.size(); ++j)
        difference[j] = a[j] - b[j];
    return difference;
}

void Belief::expectAnswer(Pair pair) {
    const std::vector<double> psi = difference(pair);
    const std::size_t d = psi.size();
    std::vector<double> along(d);
    for (std::size_t i = 0; i < d; ++i)
        along[i] = dot(covariance_.row(i), psi);
    const double variance = dot(along, psi);
    if (!(variance > 0))
        return;
    // A normal observation of eta that would carry the same information: precision lambda with
    // information = 1/2 ln(1 + lambda variance).
    const double bits = table_.at(static_cast<float>(dot(mean_, psi)),
                                  static_cast<float>(std::sqrt(variance + sideVariance_)));
    const double lambda = (exactExp(2 * bits / 1.4426950408889634) - 1) / variance;
    const double factor = lambda / (1 + lambda * variance);
    for (std::size_t i = 0; i < d; ++i)
        for (std::size_t j = 0; j < d; ++j)
            covariance_(i, j) -= factor * along[i] * along[j];
    whiten();
}

double Belief::alignment(Pair a, Pair b) const {
    const std::vector<double> x = difference(a), y = difference(b);
    double xy = 0, xx = 0, yy = 0;
    for (std::size_t i = 0; i < x.size(); ++i) {
        const double cx = dot(covariance_.row(i), x), cy = dot(covariance_.row(i), y);
        xx += x[i] * cx;
        xy += x[i] * cy;
        yy += y[i] * cy;
    }
    return xx > 0 && yy > 0 ? std::abs(xy) / std::sqrt(xx * yy) : 0;
}

std::vector<ScreenedPair> Belief::screen(const PairRules& rules, std::size_t most) const {
    const std::size_t n = problem_.features.rows, d = problem_.features.columns;
    const auto better = [](const ScreenedPair& a, const ScreenedPair& b) {
        return a.score != b.score ? a.score > b.score : a.pair < b.pair;
    };
    std::vector<ScreenedPair> best;
    std::vector<float> variance(n), score(n);
    float threshold = -1; // once full, the score that a newcomer must beat
    for (std::size_t i = 0; i + 1 < n; ++i) {
        std::fill(variance.begin(), variance.end(), static_cast<float>(sideVariance_));
        for (std::size_t j = 0; j < d; ++j) {
            const float* const row = whitened_.data() + j * n;
            const float here = row[i];
            for (std::size_t k = i + 1; k < n; ++k)
                variance[k] += (here - row[k]) * (here - row[k]);
        }
        for (std::size_t k = i + 1; k < n; ++k)
            score[k] = table_.at(utility_[i] - utility_[k], std::sqrt(variance[k]));
        for (std::size_t k = i + 1; k < n; ++k) {
            if (score[k] < threshold || !rules.allows(static_cast<int>(i), static_cast<int>(k)))
                continue;
            best.push_back({.pair = {static_cast<int>(i), static_cast<int>(k)}, .score = score[k]});
            if (best.size() >= 2 * most) {
                std::nth_element(best.begin(), best.begin() + static_cast<std::ptrdiff_t>(most), best.end(),
                                 better);
                best.resize(most);
                threshold = std::min_element(best.begin(), best.end(), [&](const auto& a, const auto& b) {
                                return a.score < b.score;
                            })->score;
            }
        }
    }
    std::sort(best.begin(), best.end(), better);
    if (best.size() > most)
        best.resize(most);
    return best;
}

} // namespace whichway
