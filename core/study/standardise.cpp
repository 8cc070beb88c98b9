// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/standardise.h"

#include "core/numbers/exp_log.h"

#include <algorithm>
#include <cmath>
#include <limits>
#include <stdexcept>

namespace whichway {

namespace {

constexpr double kLowCap = 0.05;
constexpr double kHighCap = 0.95;
/// Measured features that ought to be equal differ by rounding.
constexpr double kSameWithin = 1e-9;

double transformed(double value, FeatureScale scale, const Standardisation& standardisation) {
    switch (scale) {
    case FeatureScale::Plain:
        return value;
    case FeatureScale::Log:
        // exactLog is for normal numbers; a subnormal feature is as good as the smallest of them.
        return exactLog(std::max(value, std::numeric_limits<double>::min()));
    case FeatureScale::Capped:
        return std::clamp(value, standardisation.low, standardisation.high);
    }
    return value;
}

struct Range {
    double low = 0, high = 0;
};

Range rangeOf(std::span<const double> values) {
    const auto [low, high] = std::minmax_element(values.begin(), values.end());
    return {*low, *high};
}

bool isOneValue(const Range& range) {
    // Halves, because the difference of two large numbers may overflow.
    return 0.5 * range.high - 0.5 * range.low <=
           0.5 * kSameWithin * std::max(std::fabs(range.low), std::fabs(range.high));
}

/// Mean and deviation of `values`, which the largest magnitude scales so that no square overflows.
void setMoments(std::span<const double> values, Standardisation& standardisation) {
    const Range range = rangeOf(values);
    const double scale = std::max({std::fabs(range.low), std::fabs(range.high), 1e-300});
    const double count = static_cast<double>(values.size());
    double sum = 0;
    for (const double value : values)
        sum += value / scale;
    const double mean = sum / count;
    double squares = 0;
    for (const double value : values)
        squares += (value / scale - mean) * (value / scale - mean);
    standardisation.mean = mean * scale;
    standardisation.deviation = std::sqrt(squares / count) * scale;
}

} // namespace

double quantileOfSorted(std::span<const double> sorted, double p) {
    if (sorted.empty() || !(p >= 0 && p <= 1))
        throw std::invalid_argument("a quantile needs values and a probability");
    const double position = p * static_cast<double>(sorted.size() - 1);
    const auto below = std::min(static_cast<std::size_t>(position), sorted.size() - 1);
    const auto above = std::min(below + 1, sorted.size() - 1);
    const double share = position - static_cast<double>(below);
    return sorted[below] + share * (sorted[above] - sorted[below]);
}

double standardisedValue(double value, FeatureScale scale, const Standardisation& standardisation) {
    if (scale == FeatureScale::Log && !(value > 0))
        throw std::invalid_argument("a feature on a logarithmic scale must be positive");
    return (transformed(value, scale, standardisation) - standardisation.mean) / standardisation.deviation;
}

StandardisedTable standardise(std::vector<std::string> motions, Matrix raw,
                              std::span<const FeatureDefinition> features) {
    if (raw.rows != motions.size() || raw.columns != features.size())
        throw std::invalid_argument("the feature table has not one row a motion and one column a feature");
    if (!std::all_of(raw.values.begin(), raw.values.end(), [](double x) { return std::isfinite(x); }))
        throw std::invalid_argument("a feature is not finite");

    StandardisedTable result;
    if (raw.rows < 2) {
        result.faults.push_back({StandardisationFault::Kind::OneMotion, 0, 0, 0});
        return result;
    }
    std::vector<Standardisation> standardisation(features.size());
    Matrix standardised(raw.rows, raw.columns);
    std::vector<double> column(raw.rows);
    for (std::size_t j = 0; j < features.size(); ++j) {
        const FeatureScale scale = features[j].scale;
        bool positive = true;
        for (std::size_t i = 0; i < raw.rows; ++i) {
            column[i] = raw(i, j);
            if (scale == FeatureScale::Log && !(column[i] > 0)) {
                result.faults.push_back({StandardisationFault::Kind::NotPositive, j, i, column[i]});
                positive = false;
            }
        }
        if (!positive)
            continue;
        if (isOneValue(rangeOf(column))) {
            result.faults.push_back({StandardisationFault::Kind::Constant, j, 0, column[0]});
            continue;
        }
        if (scale == FeatureScale::Capped) {
            std::vector<double> sorted = column;
            std::sort(sorted.begin(), sorted.end());
            standardisation[j].low = quantileOfSorted(sorted, kLowCap);
            standardisation[j].high = quantileOfSorted(sorted, kHighCap);
            if (isOneValue({standardisation[j].low, standardisation[j].high})) {
                result.faults.push_back(
                    {StandardisationFault::Kind::ConstantWhenCapped, j, 0, standardisation[j].low});
                continue;
            }
        }
        for (double& value : column)
            value = transformed(value, scale, standardisation[j]);
        setMoments(column, standardisation[j]);
        for (std::size_t i = 0; i < raw.rows; ++i)
            standardised(i, j) = (column[i] - standardisation[j].mean) / standardisation[j].deviation;
    }
    if (result.faults.empty())
        result.table = {std::move(motions), std::move(raw), std::move(standardised),
                        std::move(standardisation)};
    return result;
}

} // namespace whichway
