// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/numbers/special_functions.h"
#include "core/random.h"
#include "core/study/library_check.h"
#include "core/study/standardise.h"

#include <algorithm>
#include <stdexcept>

namespace whichway {

SelfAgreement impliedSelfAgreement(const Matrix& standardised, const PriorOfPeople& prior, std::uint64_t seed,
                                   std::size_t people, std::size_t pairs) {
    if (standardised.rows < 2 || standardised.columns < 1 || people < 1 || pairs < 1)
        throw std::invalid_argument("self-agreement needs two motions, one feature, one person and one pair");
    if (!(prior.weightDeviation > 0) || !(prior.logScaleDeviation >= 0) ||
        !(prior.lapse >= 0 && prior.lapse < 1))
        throw std::invalid_argument("the prior of people is out of range");

    const std::size_t d = standardised.columns;
    Random random(seed);
    std::vector<double> weights(d);
    std::vector<double> agreement(people);
    double sum = 0;
    for (double& person : agreement) {
        const double scale = prior.weightDeviation * exactExp(prior.logScaleDeviation * random.normal());
        for (double& weight : weights)
            weight = scale * random.normal();
        for (std::size_t k = 0; k < pairs; ++k) {
            const std::size_t left = random.below(standardised.rows);
            std::size_t right = random.below(standardised.rows - 1);
            right += right >= left ? 1 : 0;
            const double utility =
                dot(weights, standardised.row(left)) - dot(weights, standardised.row(right));
            const double p = 0.5 * prior.lapse + (1 - prior.lapse) * logistic(utility);
            person += p * p + (1 - p) * (1 - p);
        }
        person /= static_cast<double>(pairs);
        sum += person;
    }
    std::sort(agreement.begin(), agreement.end());
    return {sum / static_cast<double>(people), quantileOfSorted(agreement, 0.05),
            quantileOfSorted(agreement, 0.95)};
}

} // namespace whichway
