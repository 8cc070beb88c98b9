// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/feature_summary.h"

#include "core/study/standardise.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <stdexcept>

namespace whichway {

namespace {

/// A factor above this is one that rounding made of infinity.
constexpr double kInfinite = 1e9;

double mostSharedPart(std::span<const double> sorted) {
    const double width = 1e-6 * (sorted.back() - sorted.front());
    std::size_t most = 1;
    std::size_t first = 0;
    for (std::size_t last = 0; last < sorted.size(); ++last) {
        while (sorted[last] - sorted[first] > width)
            ++first;
        most = std::max(most, last - first + 1);
    }
    return static_cast<double>(most) / static_cast<double>(sorted.size());
}

void setInflation(const Matrix& correlation, std::vector<FeatureSpread>& features) {
    // A tiny ridge lets exactly collinear features through; their factors then come out enormous.
    Matrix ridged = correlation;
    for (std::size_t j = 0; j < ridged.rows; ++j)
        ridged(j, j) += 1e-12;
    Matrix lower;
    bool found = cholesky(ridged, lower);
    for (double ridge = 1e-11; !found && ridge < 1e-6; ridge *= 10) {
        for (std::size_t j = 0; j < ridged.rows; ++j)
            ridged(j, j) = 1 + ridge;
        found = cholesky(ridged, lower);
    }
    if (!found)
        throw std::logic_error("a correlation matrix with a ridge is positive definite");
    const Matrix inverse = inverseFromCholesky(lower);
    for (std::size_t j = 0; j < features.size(); ++j)
        features[j].inflation = inverse(j, j) > kInfinite ? std::numeric_limits<double>::infinity()
                                                          : std::max(1.0, inverse(j, j));
}

} // namespace

FeatureSummary summarise(const FeatureTable& table) {
    const std::size_t n = table.standardised.rows;
    const std::size_t d = table.standardised.columns;
    if (n < 2 || table.raw.rows != n || table.raw.columns != d || table.motions.size() != n)
        throw std::invalid_argument("a feature table needs at least two motions and values for all");

    FeatureSummary summary;
    summary.features.resize(d);
    summary.correlation = Matrix(d, d);
    const double count = static_cast<double>(n);
    std::vector<double> column(n);
    for (std::size_t j = 0; j < d; ++j) {
        FeatureSpread& spread = summary.features[j];
        for (std::size_t i = 0; i < n; ++i)
            column[i] = table.raw(i, j);
        for (const double value : column)
            spread.mean += value / count;
        double squares = 0;
        for (const double value : column)
            squares += (value - spread.mean) * (value - spread.mean);
        spread.deviation = std::sqrt(squares / count);
        std::sort(column.begin(), column.end());
        spread.least = column.front();
        spread.median = quantileOfSorted(column, 0.5);
        spread.greatest = column.back();
        spread.mostSharedPart = mostSharedPart(column);

        spread.lowestZ = spread.highestZ = table.standardised(0, j);
        for (std::size_t i = 0; i < n; ++i) {
            const double z = table.standardised(i, j);
            spread.skewness += z * z * z / count;
            spread.lowestZ = std::min(spread.lowestZ, z);
            spread.highestZ = std::max(spread.highestZ, z);
        }
        for (std::size_t k = 0; k < j; ++k) {
            double sum = 0;
            for (std::size_t i = 0; i < n; ++i)
                sum += table.standardised(i, j) * table.standardised(i, k);
            summary.correlation(j, k) = summary.correlation(k, j) = std::clamp(sum / count, -1.0, 1.0);
        }
        summary.correlation(j, j) = 1;
    }
    if (d > 0)
        setInflation(summary.correlation, summary.features);
    return summary;
}

} // namespace whichway
