// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/numbers/linear_algebra.h"
#include "core/preference/response_model.h"
#include "core/result.h"

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

namespace whichway {

/// The truth about a simulated person: parameters of the response model. A value.
struct SimulatedPerson {
    std::vector<double> weights = {}; ///< per standard deviation of the features, length d
    double sideBias = 0;              ///< delta; positive leans left
    std::vector<double> cuts = {};    ///< c_0 … c_{K-1}
    double lapse = 0;                 ///< in [0, 1)
    bool operator==(const SimulatedPerson&) const = default;
};

struct PersonSettings {
    /// Share of random pairs of the library on which the person's two answers name the same motion, in
    /// (0.5, 1); none: the weights keep the length that they have.
    std::optional<double> agreement = 0.85;
    std::vector<double> weights = {}; ///< length d, not all 0; empty: drawn from the model's prior
    double sideBias = 0;
    double lapse = 0; ///< in [0, 1)
};

/// A person for this library. The direction of the weights is given or drawn from the prior; their length is
/// found by bisection so that selfAgreement is `agreement`. The cut points are quantiles of the person's own
/// |w . difference| over random pairs, so that each confidence level is meant for an equal share of them; c_0
/// is their tenth percentile where "cannot tell" is allowed.
/// @return "rehearsal.agreement" if no length reaches the agreement (too many lapses, or motions that do not
/// differ).
/// @throws std::invalid_argument if the settings do not fit the features or the model.
/// Cost: O(pairs d), pairs as in selfAgreement.
Result<SimulatedPerson> makePerson(const Matrix& features, const ResponseModel& model,
                                   const PersonSettings& settings, std::uint64_t seed);

/// E[p^2 + (1 - p)^2] over random pairs of rows, p = lapse / 2 + (1 - lapse) logistic(w . difference): how
/// often two answers to the same pair agree, for a forced choice without side bias. All pairs are taken up to
/// 50 000 of them, beyond that a fixed sample of that size.
/// @throws std::invalid_argument if there are fewer than two rows or the lengths differ.
double selfAgreement(const Matrix& features, const SimulatedPerson& person);

/// Gives a person's answers. The answer to a trial depends on the seed, the trial's number and the pair
/// alone, so that a session taken up again goes on as it would have. A value; safe to read from any thread.
class SimulatedParticipant {
public:
    /// @throws std::invalid_argument if the person does not fit the model.
    SimulatedParticipant(SimulatedPerson person, ResponseModel model, std::uint64_t seed);

    const SimulatedPerson& person() const { return person_; }

    /// An answer of the model, drawn with the person's parameters.
    /// @param difference z_left - z_right, length d
    int answer(std::span<const double> difference, std::uint64_t trial) const;

private:
    SimulatedPerson person_;
    ResponseModel model_;
    std::vector<int> answers_;
    std::uint64_t seed_;
};

} // namespace whichway
