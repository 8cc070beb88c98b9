// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/preference/response_model.h"

#include "core/numbers/special_functions.h"

#include <cmath>
#include <cstdlib>
#include <stdexcept>

namespace whichway {

double ResponseModel::weightScale() const {
    return weightDeviation > 0 ? weightDeviation : 2.45 / std::sqrt(static_cast<double>(dimension));
}

void requireSound(const ResponseModel& model) {
    const auto within = [](double value, double low, double high) { return value >= low && value <= high; };
    if (model.dimension < 1 || model.levels < 1 || model.levels > 7)
        throw std::invalid_argument("ResponseModel: needs at least 1 feature and 1 to 7 levels");
    if (!within(model.lapse, 0, 0.2))
        throw std::invalid_argument("ResponseModel: the lapse must lie in [0, 0.2]");
    if (!within(model.weightDeviation, 0, 1e6) || !within(model.scaleDeviation, 0, 10) ||
        !within(model.sideBiasDeviation, 0, 1e6) || !within(model.gapDeviation, 0, 10))
        throw std::invalid_argument("ResponseModel: a prior deviation is out of range");
    for (const double median : {model.firstGapMedian, model.laterGapMedian, model.zeroCutMedian})
        if (!within(median, 1e-6, 1e6))
            throw std::invalid_argument("ResponseModel: a prior median is out of range");
}

double responseProbability(const ResponseModel& model, double eta, std::span<const double> cuts, int answer) {
    const int level = std::abs(answer);
    if (level > model.levels || (level == 0 && !model.cannotTell) ||
        cuts.size() != static_cast<std::size_t>(model.levels))
        throw std::invalid_argument("responseProbability: the model has no such answer");
    double upper = 0, lower = 0, gap = 0; // P = S(upper) - S(lower), upper - lower = gap
    bool last = false;
    if (level == 0) {
        upper = eta + cuts[0];
        lower = eta - cuts[0];
        gap = 2 * cuts[0];
    } else {
        const double x = answer > 0 ? eta : -eta;
        const auto index = static_cast<std::size_t>(level);
        upper = x - cuts[index - 1];
        last = level == model.levels;
        if (!last) {
            lower = x - cuts[index];
            gap = cuts[index] - cuts[index - 1];
        }
    }
    const double ordinal =
        last ? logistic(upper) : logistic(upper) * logistic(-lower) * (1.0 - exactExp(-gap));
    return model.lapse / model.categories() + (1.0 - model.lapse) * ordinal;
}

std::vector<int> answersOf(const ResponseModel& model) {
    std::vector<int> answers;
    for (int answer = -model.levels; answer <= model.levels; ++answer)
        if (answer != 0 || model.cannotTell)
            answers.push_back(answer);
    return answers;
}

} // namespace whichway
