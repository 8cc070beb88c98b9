// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/rehearsal/simulated_participant.h"

#include "core/numbers/special_functions.h"
#include "core/random.h"

#include <algorithm>
#include <cmath>
#include <numeric>
#include <stdexcept>
#include <utility>

namespace whichway {
namespace {

constexpr std::size_t kMostPairs = 50000;

/// |w . (z_i - z_j)| over the pairs that agreement is measured on.
std::vector<double> utilityGaps(const Matrix& features, std::span<const double> weights) {
    if (features.rows < 2)
        throw std::invalid_argument("selfAgreement: fewer than two motions");
    if (features.columns != weights.size())
        throw std::invalid_argument("selfAgreement: weights and features differ in length");
    std::vector<double> utility(features.rows);
    for (std::size_t i = 0; i < features.rows; ++i)
        utility[i] = dot(features.row(i), weights);
    std::vector<double> gaps;
    if (features.rows * (features.rows - 1) / 2 <= kMostPairs) {
        for (std::size_t i = 0; i < features.rows; ++i)
            for (std::size_t j = i + 1; j < features.rows; ++j)
                gaps.push_back(std::abs(utility[i] - utility[j]));
        return gaps;
    }
    Random random(1);
    while (gaps.size() < kMostPairs) {
        const std::size_t i = random.below(features.rows);
        const std::size_t j = random.below(features.rows);
        if (i != j)
            gaps.push_back(std::abs(utility[i] - utility[j]));
    }
    return gaps;
}

/// Agreement of a person whose utility differences are `length` times `gaps`.
double agreementAt(std::span<const double> gaps, double length, double lapse) {
    double sum = 0;
    for (const double gap : gaps) {
        const double p = lapse / 2 + (1 - lapse) * logistic(length * gap);
        sum += p * p + (1 - p) * (1 - p);
    }
    return sum / static_cast<double>(gaps.size());
}

double quantileOfSorted(std::span<const double> sorted, double share) {
    const auto index = static_cast<std::size_t>(share * static_cast<double>(sorted.size()));
    return sorted[std::min(index, sorted.size() - 1)];
}

/// A weight vector of the prior: scale first, then the weights.
std::vector<double> drawWeights(const ResponseModel& model, std::uint64_t seed) {
    Random random(seed);
    const double scale = model.weightScale() * exactExp(model.scaleDeviation * random.normal());
    std::vector<double> weights(static_cast<std::size_t>(model.dimension));
    for (double& weight : weights)
        weight = scale * random.normal();
    return weights;
}

} // namespace

double selfAgreement(const Matrix& features, const SimulatedPerson& person) {
    return agreementAt(utilityGaps(features, person.weights), 1, person.lapse);
}

Result<SimulatedPerson> makePerson(const Matrix& features, const ResponseModel& model,
                                   const PersonSettings& settings, std::uint64_t seed) {
    const auto dimension = static_cast<std::size_t>(model.dimension);
    if (features.columns != dimension || (!settings.weights.empty() && settings.weights.size() != dimension))
        throw std::invalid_argument("makePerson: weights, features and model differ in length");
    if (settings.agreement && !(*settings.agreement > 0.5 && *settings.agreement < 1))
        throw std::invalid_argument("makePerson: agreement is not between 0.5 and 1");
    if (!(settings.lapse >= 0 && settings.lapse < 1) || !std::isfinite(settings.sideBias))
        throw std::invalid_argument("makePerson: lapse or side bias out of range");
    SimulatedPerson person{.weights = settings.weights.empty() ? drawWeights(model, seed) : settings.weights,
                           .sideBias = settings.sideBias,
                           .cuts = {},
                           .lapse = settings.lapse};
    std::vector<double> gaps = utilityGaps(features, person.weights);
    if (settings.agreement) {
        double low = 0, high = 1;
        while (agreementAt(gaps, high, person.lapse) < *settings.agreement) {
            high *= 2;
            if (high > 1e9)
                return Error{.code = "rehearsal.agreement",
                             .place = {},
                             .message = "No person of these weights agrees with themselves on " +
                                        std::to_string(std::lround(*settings.agreement * 100)) +
                                        " % of the random pairs of this library.",
                             .remedy = "Ask for less agreement, or for fewer lapses.",
                             .values = {}};
        }
        for (int step = 0; step < 80; ++step) {
            const double middle = low + (high - low) / 2;
            (agreementAt(gaps, middle, person.lapse) < *settings.agreement ? low : high) = middle;
        }
        for (double& weight : person.weights)
            weight *= high;
        for (double& gap : gaps)
            gap *= high;
    }
    std::sort(gaps.begin(), gaps.end());
    const double unsure = model.cannotTell ? 0.1 : 0;
    for (int level = 0; level < model.levels; ++level) {
        const double share = unsure + (1 - unsure) * level / model.levels;
        const double cut = share > 0 ? quantileOfSorted(gaps, share) : 0;
        // Cut points rise, also where many pairs have the very same utility difference.
        const double least = person.cuts.empty() ? (model.cannotTell ? 1e-6 : 0) : person.cuts.back() + 1e-6;
        person.cuts.push_back(std::max(cut, least));
    }
    return person;
}

SimulatedParticipant::SimulatedParticipant(SimulatedPerson person, ResponseModel model, std::uint64_t seed)
    : person_(std::move(person)), model_(model), answers_(answersOf(model)), seed_(seed) {
    if (person_.weights.size() != static_cast<std::size_t>(model_.dimension) ||
        person_.cuts.size() != static_cast<std::size_t>(model_.levels))
        throw std::invalid_argument("SimulatedParticipant: person and model differ in length");
    model_.lapse = person_.lapse;
}

int SimulatedParticipant::answer(std::span<const double> difference, std::uint64_t trial) const {
    const double eta = dot(person_.weights, difference) + person_.sideBias;
    Random random(deriveSeed(seed_, trial));
    double left = random.uniform();
    for (const int answer : answers_) {
        left -= responseProbability(model_, eta, person_.cuts, answer);
        if (left < 0)
            return answer;
    }
    return answers_.back();
}

} // namespace whichway
