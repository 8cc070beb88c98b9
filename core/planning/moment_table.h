// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/preference/posterior.h"

#include <cstddef>
#include <vector>

namespace whichway {

/// The information of a pair as a function of the posterior mean and standard deviation of eta = w .
/// difference + delta alone, eta taken as normal and the cut points at draws of theirs: what screens a whole
/// library in a moment. Bits, bilinear between the points of a grid.
class MomentTable {
public:
    /// Covers |mean| <= `largestMean` and deviation <= `largestDeviation`; beyond, the edge's value.
    MomentTable(const ResponseModel& model, const Matrix& cutDraws, double largestMean,
                double largestDeviation);

    float at(float mean, float deviation) const {
        const float m = clampTo((mean < 0 ? -mean : mean) * perMean_, kPoints - 1.001f);
        const float s = clampTo(deviation * perDeviation_, kPoints - 1.001f);
        const int i = static_cast<int>(m), j = static_cast<int>(s);
        const float a = m - static_cast<float>(i), b = s - static_cast<float>(j);
        const float* const row = values_.data() + i * kPoints + j;
        return (1 - a) * ((1 - b) * row[0] + b * row[1]) +
               a * ((1 - b) * row[kPoints] + b * row[kPoints + 1]);
    }

private:
    static constexpr int kPoints = 32;
    static float clampTo(float value, float most) { return value < most ? value : most; }

    float perMean_ = 0, perDeviation_ = 0;
    std::vector<float> values_; ///< mean by deviation
};

} // namespace whichway
