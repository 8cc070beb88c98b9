// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/diagnostics.h"

#include "core/numbers/special_functions.h"

#include <Eigen/Core>
#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>
#include <stdexcept>
#include <unsupported/Eigen/FFT>

namespace whichway {
namespace {

constexpr double kUndefined = std::numeric_limits<double>::quiet_NaN();

/// Each chain in two halves; a middle draw of an odd length is left out.
Chains split(const Chains& chains) {
    Chains halves;
    for (const auto& chain : chains) {
        const auto half = static_cast<std::ptrdiff_t>(chain.size() / 2);
        halves.emplace_back(chain.begin(), chain.begin() + half);
        halves.emplace_back(chain.end() - half, chain.end());
    }
    return halves;
}

std::vector<double> pooled(const Chains& chains) {
    std::vector<double> all;
    for (const auto& chain : chains)
        all.insert(all.end(), chain.begin(), chain.end());
    return all;
}

bool usable(const Chains& chains) {
    if (chains.empty() || chains.front().size() < 3)
        return false;
    const std::vector<double> all = pooled(chains);
    if (!std::all_of(all.begin(), all.end(), [](double value) { return std::isfinite(value); }))
        return false;
    const auto [low, high] = std::minmax_element(all.begin(), all.end());
    return *high - *low > 1e-15 * std::max(std::abs(*low), std::abs(*high));
}

/// Ranks (ties share their average), turned into normal scores by Blom's offsets.
Chains rankNormalised(const Chains& chains) {
    const std::vector<double> all = pooled(chains);
    const std::size_t size = all.size();
    std::vector<std::size_t> order(size);
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) { return all[a] < all[b]; });
    std::vector<double> score(size);
    for (std::size_t first = 0; first < size;) {
        std::size_t last = first;
        while (last + 1 < size && all[order[last + 1]] == all[order[first]])
            ++last;
        const double rank = 0.5 * static_cast<double>(first + last) + 1;
        const double value = normalQuantile((rank - 0.375) / (static_cast<double>(size) + 0.25));
        for (std::size_t i = first; i <= last; ++i)
            score[order[i]] = value;
        first = last + 1;
    }
    Chains scores;
    std::size_t next = 0;
    for (const auto& chain : chains) {
        scores.emplace_back(score.begin() + static_cast<std::ptrdiff_t>(next),
                            score.begin() + static_cast<std::ptrdiff_t>(next + chain.size()));
        next += chain.size();
    }
    return scores;
}

double meanOf(const std::vector<double>& values) {
    return std::accumulate(values.begin(), values.end(), 0.0) / static_cast<double>(values.size());
}

double varianceOf(const std::vector<double>& values) {
    const double mean = meanOf(values);
    double sum = 0;
    for (const double value : values)
        sum += (value - mean) * (value - mean);
    return sum / (static_cast<double>(values.size()) - 1);
}

double basicRHat(const Chains& chains) {
    if (!usable(chains))
        return kUndefined;
    const auto n = static_cast<double>(chains.front().size());
    std::vector<double> means;
    double within = 0;
    for (const auto& chain : chains) {
        means.push_back(meanOf(chain));
        within += varianceOf(chain) / static_cast<double>(chains.size());
    }
    const double between = n * varianceOf(means);
    return std::sqrt((between / within + n - 1) / n);
}

/// Autocovariances at every lag (divisor n), by the fast Fourier transform.
std::vector<double> autocovariance(const std::vector<double>& chain) {
    const std::size_t n = chain.size();
    std::size_t padded = 1;
    while (padded < 2 * n)
        padded *= 2;
    const double mean = meanOf(chain);
    std::vector<double> centred(padded, 0.0);
    for (std::size_t i = 0; i < n; ++i)
        centred[i] = chain[i] - mean;
    Eigen::FFT<double> transform;
    std::vector<std::complex<double>> spectrum;
    transform.fwd(spectrum, centred);
    for (auto& value : spectrum)
        value = std::norm(value);
    std::vector<double> covariance;
    transform.inv(covariance, spectrum);
    covariance.resize(n);
    for (double& value : covariance)
        value /= static_cast<double>(n);
    return covariance;
}

/// Effective sample size by Geyer's initial monotone sequence (Geyer 1992; the combination over chains of the
/// paper named in the header).
double basicEss(const Chains& chains) {
    if (!usable(chains))
        return kUndefined;
    const std::size_t n = chains.front().size();
    const auto count = static_cast<double>(n), chainCount = static_cast<double>(chains.size());
    std::vector<double> lag(n, 0.0), means;
    for (const auto& chain : chains) {
        const std::vector<double> covariance = autocovariance(chain);
        for (std::size_t t = 0; t < n; ++t)
            lag[t] += covariance[t] / chainCount;
        means.push_back(meanOf(chain));
    }
    const double meanVariance = lag[0] * count / (count - 1);
    double variance = meanVariance * (count - 1) / count;
    if (chains.size() > 1)
        variance += varianceOf(means);
    const auto correlation = [&](std::size_t t) { return 1 - (meanVariance - lag[t]) / variance; };

    std::vector<double> rho(n + 2, 0.0);
    double even = 1, odd = correlation(1);
    rho[0] = even;
    rho[1] = odd;
    std::size_t t = 0;
    while (t + 5 < n && !std::isnan(even + odd) && even + odd > 0) {
        t += 2;
        even = correlation(t);
        odd = correlation(t + 1);
        if (even + odd >= 0) {
            rho[t] = even;
            rho[t + 1] = odd;
        }
    }
    const std::size_t last = t;
    if (even > 0)
        rho[last] = even;
    for (t = 0; t + 4 <= last;) {
        t += 2;
        if (rho[t] + rho[t + 1] > rho[t - 2] + rho[t - 1])
            rho[t] = rho[t + 1] = 0.5 * (rho[t - 2] + rho[t - 1]);
    }
    double tau = -1 + rho[last];
    for (std::size_t i = 0; i < last; ++i)
        tau += 2 * rho[i];
    const double draws = count * chainCount;
    return draws / std::max(tau, 1 / std::log10(draws));
}

double quantileEss(const Chains& chains, double p) {
    const double threshold = quantileOf(pooled(chains), p);
    Chains below = chains;
    for (auto& chain : below)
        for (double& value : chain)
            value = value <= threshold ? 1 : 0;
    return basicEss(split(below));
}

} // namespace

double quantileOf(std::vector<double> values, double p) {
    if (values.empty() || !(p >= 0 && p <= 1))
        throw std::invalid_argument("quantileOf: no values, or p outside [0, 1]");
    std::sort(values.begin(), values.end());
    const double at = p * static_cast<double>(values.size() - 1);
    const auto below = static_cast<std::size_t>(at);
    const double share = at - static_cast<double>(below);
    return below + 1 < values.size() ? values[below] + share * (values[below + 1] - values[below])
                                     : values[below];
}

double rHat(const Chains& chains) {
    const Chains halves = split(chains);
    if (!usable(halves))
        return kUndefined;
    const double median = quantileOf(pooled(halves), 0.5);
    Chains folded = halves;
    for (auto& chain : folded)
        for (double& value : chain)
            value = std::abs(value - median);
    return std::max(basicRHat(rankNormalised(halves)), basicRHat(rankNormalised(folded)));
}

double bulkEss(const Chains& chains) {
    const Chains halves = split(chains);
    return usable(halves) ? basicEss(rankNormalised(halves)) : kUndefined;
}

double tailEss(const Chains& chains) {
    if (!usable(split(chains)))
        return kUndefined;
    return std::min(quantileEss(chains, 0.05), quantileEss(chains, 0.95));
}

double meanEss(const Chains& chains) {
    return basicEss(split(chains));
}

double meanMcse(const Chains& chains) {
    return std::sqrt(varianceOf(pooled(chains)) / meanEss(chains));
}

} // namespace whichway
