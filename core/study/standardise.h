// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/protocol.h"

#include <cstddef>
#include <span>
#include <string>
#include <vector>

namespace whichway {

/// Why a feature cannot be standardised.
struct StandardisationFault {
    enum class Kind {
        OneMotion,         ///< fewer than two motions: nothing varies; `feature` and `motion` are 0
        NotPositive,       ///< FeatureScale::Log and a value <= 0, of `motion`
        Constant,          ///< all values the same, to 1e-9 of the largest
        ConstantWhenCapped ///< FeatureScale::Capped and the 5th to 95th percentile are one value
    };
    Kind kind = Kind::Constant;
    std::size_t feature = 0; ///< column of the table
    std::size_t motion = 0;  ///< row of the table, where one motion is at fault
    double value = 0;        ///< the value at fault, or the value that all motions share
    bool operator==(const StandardisationFault&) const = default;
};

struct StandardisedTable {
    FeatureTable table = {};                       ///< whole only if `faults` is empty
    std::vector<StandardisationFault> faults = {}; ///< all of them, by feature, then by motion
};

/// Transforms each feature by its scale (plain, natural logarithm, or capped to its 5th to 95th percentile,
/// the percentiles by linear interpolation between order statistics) and standardises it:
///     z = (t - mean) / deviation,   deviation = sqrt(sum (t - mean)^2 / n).
/// The same bits on every machine. Cost: O(n d log n).
/// @param raw one row a motion, one column a feature, finite, in the features' units.
/// @throws std::invalid_argument if the sizes disagree or a value is not finite (a caller's bug).
StandardisedTable standardise(std::vector<std::string> motions, Matrix raw,
                              std::span<const FeatureDefinition> features);

/// The standardised value of one more motion, by the frozen numbers of the main library.
/// @throws std::invalid_argument if FeatureScale::Log meets a value <= 0.
double standardisedValue(double value, FeatureScale scale, const Standardisation& standardisation);

/// The quantile of `sorted` (ascending, not empty) at p in [0, 1], by linear interpolation between order
/// statistics: at position p (n - 1), counted from 0 (definition 7 of Hyndman and Fan 1996).
double quantileOfSorted(std::span<const double> sorted, double p);

} // namespace whichway
