// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/response_model.h"

#include <cstddef>
#include <span>
#include <vector>

namespace whichway {

/// The likelihood of a list of answers as a function of the natural parameters, in this order:
///     w_1 … w_d, delta, c_0 … c_{K-1}   with   0 <= c_0 < c_1 < … < c_{K-1}.
/// Where the model has no "cannot tell", c_0 is 0 and its derivative is to be left alone. Nothing cancels or
/// overflows however large the utilities; without a lapse the log likelihood goes on falling linearly where
/// the probability itself is no longer a number. Immutable; safe from any thread as long as each brings its
/// own scratch space. The order of the answers may change the last bits of a value.
class ResponseLikelihood {
public:
    /// @throws std::invalid_argument if the model or a response is out of range or not finite.
    ResponseLikelihood(const ResponseModel& model, std::span<const Response> responses);

    struct Scratch {
        std::vector<double> eta, up, down, share, factor, slope;
    };

    std::size_t parameters() const { return static_cast<std::size_t>(model_.dimension + 1 + model_.levels); }
    std::size_t responses() const { return count_; }
    const ResponseModel& model() const { return model_; }

    /// Log likelihood; `gradient` (length `parameters()`) is overwritten. Cost O(n (d + 1)).
    double evaluate(std::span<const double> natural, std::span<double> gradient, Scratch& scratch) const;

    /// The expected (Fisher) information of the natural parameters. Cost O(n (d^2 + K^3)).
    Matrix expectedInformation(std::span<const double> natural) const;

    /// The observed information, minus the matrix of second derivatives of the log likelihood. Cost O(n d^2).
    Matrix observedInformation(std::span<const double> natural) const;

private:
    /// Answers of one level: with x = eta times the answered side, P_ord = S(x - lower) - S(x - upper).
    struct Group {
        std::size_t level = 0, begin = 0, end = 0;
    };
    /// The cuts of a level, and what depends on their gap g = upper - lower alone.
    struct Step {
        double lower = 0, upper = 0;
        double between = 1; ///< 1 - e^-g
        double slope = 0;   ///< d ln(1 - e^-g) / d g
    };
    Step stepOf(std::size_t level, std::span<const double> cuts) const;
    bool isLast(std::size_t level) const { return level == static_cast<std::size_t>(model_.levels); }

    ResponseModel model_;
    std::size_t count_ = 0;
    std::size_t stride_ = 0;    ///< the count rounded up to a multiple of 4, the rest filled with zeros
    std::vector<Group> groups_; ///< the answers stand sorted by level, so that loops over a level vectorise
    std::vector<double>
        signed_; ///< (d + 1) x stride: the differences, and 1 for delta, times the answered side
    double floorPart_ = 0, kept_ = 1;
    bool mixture_ = false;    ///< has a lapse
    std::size_t perLog_ = 32; ///< factors whose product cannot underflow, a multiple of 4
};

} // namespace whichway
