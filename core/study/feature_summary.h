// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/study/protocol.h"

#include <vector>

namespace whichway {

/// How one feature is spread over the main library.
struct FeatureSpread {
    double least = 0, median = 0, greatest = 0; ///< in the feature's unit
    double mean = 0, deviation = 0;             ///< in the feature's unit (divisor n), before its scale
    double skewness = 0;                        ///< of z, third moment (divisor n); 0 is even
    double lowestZ = 0, highestZ = 0;           ///< dimensionless
    double mostSharedPart = 0; ///< part of the motions that share one value, to 1e-6 of the range, in (0, 1]
    double inflation =
        1; ///< variance inflation factor of z against all others; infinite if it follows from them
};

struct FeatureSummary {
    std::vector<FeatureSpread> features = {}; ///< in the order of the table's columns
    Matrix correlation = {};                  ///< of z (product moment), d x d, ones on the diagonal
};

/// Describes a standardised table with at least 2 motions. The variance inflation factor of a feature is
/// 1 / (1 - R^2) of its linear regression on the others: the diagonal of the inverse correlation matrix.
/// Cost: O(n d^2 + n d log n + d^3).
/// @throws std::invalid_argument if the table is not whole.
FeatureSummary summarise(const FeatureTable& table);

} // namespace whichway
