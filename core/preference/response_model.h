// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include <span>
#include <vector>

namespace whichway {

/// An answer: the sign is the side (positive: left), the size the confidence level 1 … K; 0 is "cannot tell".
struct Response {
    std::vector<double> difference =
        {}; ///< z_left - z_right, standardised features in presented order, length d
    int answer = 0;
    bool operator==(const Response&) const = default;
};

/// The symmetric cumulative logit of paired comparison (Agresti 1992, "Analysis of ordinal paired comparison
/// data") with a lapse and a side bias. With eta = w . difference + delta and cut points 0 = c_0 < c_1 < … <
/// c_{K-1} (c_0 > 0 where "cannot tell" is allowed):
///     P_ord(y >= k) = logistic(eta - c_{k-1}),  P_ord(y <= -k) = logistic(-eta - c_{k-1}),
///     P(y) = lapse / categories + (1 - lapse) P_ord(y).
/// Priors: w | h ~ N(0, s^2 e^{2h} I), h ~ N(0, scaleDeviation^2) (h = 0 for a fixed scale), delta ~ N(0,
/// sideBiasDeviation^2), log(c_1 - c_0) ~ N(ln 0.8, 0.7^2), later log gaps ~ N(ln 1.4, 0.7^2), log c_0 ~ N(ln
/// 0.3, 0.7^2).
struct ResponseModel {
    int dimension = 1;            ///< d >= 1
    int levels = 3;               ///< K, 1 to 7
    bool cannotTell = false;      ///< needs levels >= 1; adds the category 0
    double lapse = 0.05;          ///< in [0, 0.2]
    double weightDeviation = 0;   ///< s > 0; 0 means 2.45 / sqrt(d)
    double scaleDeviation = 0.6;  ///< of h; 0 fixes the scale
    double sideBiasDeviation = 1; ///< of delta; 0 leaves the side bias out
    double firstGapMedian = 0.8, laterGapMedian = 1.4, zeroCutMedian = 0.3;
    double gapDeviation = 0.7; ///< of the logarithms of c_0 and of the gaps; 0 fixes the cut points

    int categories() const { return 2 * levels + (cannotTell ? 1 : 0); }
    double weightScale() const; ///< s
    bool operator==(const ResponseModel&) const = default;
};

/// @throws std::invalid_argument if a member of the model is out of its range or not finite.
void requireSound(const ResponseModel& model);

/// P(answer | eta, cuts) with the lapse. `cuts` holds c_0 … c_{K-1}.
/// @throws std::invalid_argument if the answer is not one of the model's.
double responseProbability(const ResponseModel& model, double eta, std::span<const double> cuts, int answer);

/// The model's answers in ascending order: -K … -1, (0), 1 … K.
std::vector<int> answersOf(const ResponseModel& model);

} // namespace whichway
