// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/response_model.h"

#include <cstddef>
#include <span>
#include <vector>

namespace whichway {

/// The likelihood of a list of answers as a function of the natural parameters, in this order:
///     w_1 … w_d, delta, c_0 … c_{K-1}.
/// Where the model has no "cannot tell", c_0 is 0 and its derivative is to be left alone. Immutable and cheap
/// to evaluate; safe from any thread as long as each brings its own scratch space.
class ResponseLikelihood {
public:
    /// @throws std::invalid_argument if the model or a response is out of range or not finite.
    ResponseLikelihood(const ResponseModel& model, std::span<const Response> responses);

    struct Scratch {
        std::vector<double> upper, lower, slopeUpper, slopeLower, probability;
    };

    std::size_t parameters() const { return static_cast<std::size_t>(model_.dimension + 1 + model_.levels); }
    std::size_t responses() const { return count_; }
    const ResponseModel& model() const { return model_; }

    /// Log likelihood; `gradient` (length `parameters()`) is overwritten. Cost O(n (d + 1)).
    double evaluate(std::span<const double> natural, std::span<double> gradient, Scratch& scratch) const;

    /// The expected (Fisher) information of the natural parameters. Cost O(n (d^2 + K^3)).
    Matrix expectedInformation(std::span<const double> natural) const;

private:
    ResponseModel model_;
    std::size_t count_ = 0;
    // Column by column, so that loops over the responses vectorise. The rows of `signed_` are the differences
    // times the answered side: every answer then reads "at least so sure, less than the next level".
    std::vector<double> signed_;     ///< (d + 1) x n; the last row is the side itself, the factor of delta
    std::vector<double> byResponse_; ///< n x (d + 1), the same
    std::vector<std::size_t> lowerCut_, upperCut_; ///< index into the extended cuts
    std::size_t perLog_ = 1;                       ///< probabilities whose product cannot underflow
};

} // namespace whichway
