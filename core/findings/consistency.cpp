// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/consistency.h"

#include "core/findings/session_posterior.h"
#include "core/preference/diagnostics.h"

#include <algorithm>
#include <boost/math/distributions/binomial.hpp>
#include <cmath>
#include <stdexcept>

namespace whichway {
namespace {

bool counts(TrialKind kind) {
    return kind != TrialKind::Practice && kind != TrialKind::Identical;
}

const AnsweredTrial* answerTo(const SessionState& state, int trial) {
    const auto found = std::find_if(state.answers.begin(), state.answers.end(),
                                    [&](const AnsweredTrial& answer) { return answer.trial == trial; });
    return found == state.answers.end() ? nullptr : &*found;
}

void add(Share& share, int answer, bool success) {
    if (answer == 0) {
        ++share.cannotTell;
    } else {
        ++share.of;
        share.count += success ? 1 : 0;
    }
}

/// Probability that the left side is chosen (given that a side is), averaged over the draws.
double leftProbabilityOf(const Draws& draws, std::span<const double> difference) {
    double sum = 0;
    for (std::size_t i = 0; i < draws.count(); ++i) {
        const double eta = dot(draws.weights.row(i), difference) + draws.sideBias[i];
        sum += 1 / (1 + std::exp(-eta));
    }
    return sum / static_cast<double>(draws.count());
}

} // namespace

Interval exactProportion(int count, int of, double level) {
    if (of < 1 || count < 0 || count > of || !(level > 0 && level < 1))
        throw std::invalid_argument("exactProportion: 0 <= count <= of, of >= 1, 0 < level < 1");
    using Binomial = boost::math::binomial_distribution<double>;
    const double tail = (1 - level) / 2;
    return {.median = static_cast<double>(count) / of,
            .low = Binomial::find_lower_bound_on_p(of, count, tail, Binomial::clopper_pearson_exact_interval),
            .high =
                Binomial::find_upper_bound_on_p(of, count, tail, Binomial::clopper_pearson_exact_interval)};
}

double evenSplitProbability(int count, int of) {
    if (of < 1)
        return 1;
    const int larger = std::max(count, of - count);
    if (2 * larger == of)
        return 1;
    const boost::math::binomial_distribution<double> even(of, 0.5);
    return std::min(1.0, 2 * boost::math::cdf(boost::math::complement(even, larger - 1)));
}

Consistency findConsistency(const SessionState& state, const Draws& draws) {
    Consistency found;
    found.confidence.assign(static_cast<std::size_t>(state.began.protocol.levels), 0);
    std::vector<double> times;
    std::vector<double> predicted; // 1 where the estimate agrees, in the order of the answers
    for (const AnsweredTrial& answer : state.answers) {
        const ScheduledTrial& scheduled = state.began.schedule[static_cast<std::size_t>(answer.trial - 1)];
        if (answer.responseTime >= 0 && answer.kind != TrialKind::Practice) {
            times.push_back(answer.responseTime);
            found.quick += answer.responseTime < found.quickBelow ? 1 : 0;
        }
        if (answer.kind == TrialKind::Identical)
            add(found.identicalLeft, answer.answer, answer.answer > 0);
        if (answer.kind == TrialKind::Catch)
            add(found.catches, answer.answer, (answer.answer > 0) == (scheduled.expected == Side::Left));
        if (answer.kind == TrialKind::Repeat)
            if (const AnsweredTrial* first = answerTo(state, scheduled.repeatOf)) {
                // The sides were swapped: the same motion means the other sign.
                const bool either = answer.answer == 0 || first->answer == 0;
                add(found.repeats, either ? 0 : answer.answer, (answer.answer > 0) != (first->answer > 0));
            }
        if (!counts(answer.kind))
            continue;
        add(found.left, answer.answer, answer.answer > 0);
        if (answer.answer != 0)
            ++found.confidence[static_cast<std::size_t>(std::abs(answer.answer) - 1)];
        const std::vector<double> difference =
            standardisedDifference(state.began.protocol, answer.left, answer.right);
        if (answer.answer != 0 && !difference.empty())
            predicted.push_back((leftProbabilityOf(draws, difference) > 0.5) == (answer.answer > 0) ? 1 : 0);
    }
    found.leftProbability = evenSplitProbability(found.left.count, found.left.of);
    int all = 0, most = 0;
    for (const int used : found.confidence) {
        all += used;
        most = std::max(most, used);
    }
    found.oneWord = all >= 15 && 10 * most >= 9 * all && found.confidence.size() > 1;
    if (!times.empty())
        found.medianResponseTime = quantileOf(times, 0.5);
    if (const std::size_t third = predicted.size() / 3; third >= 5) {
        double first = 0, last = 0;
        for (std::size_t i = 0; i < third; ++i) {
            first += predicted[i];
            last += predicted[predicted.size() - 1 - i];
        }
        found.drift = 100 * (last - first) / static_cast<double>(third);
    }
    return found;
}

Prediction findPrediction(const SessionState& state, const ResponseModel& model, const Draws& draws,
                          const Share& repeats) {
    Prediction found;
    double logScore = 0;
    int scored = 0;
    for (const AnsweredTrial& answer : state.answers) {
        if (answer.kind != TrialKind::HeldOut)
            continue;
        const std::vector<double> difference =
            standardisedDifference(state.began.protocol, answer.left, answer.right);
        add(found.heldOut, answer.answer,
            (leftProbabilityOf(draws, difference) > 0.5) == (answer.answer > 0));
        double probability = 0;
        for (std::size_t i = 0; i < draws.count(); ++i)
            probability +=
                responseProbability(model, dot(draws.weights.row(i), difference) + draws.sideBias[i],
                                    draws.cuts.row(i), answer.answer) /
                static_cast<double>(draws.count());
        logScore += std::log(probability);
        ++scored;
    }
    found.tooFew = found.heldOut.of < 10;
    if (found.heldOut.of > 0)
        found.accuracy = exactProportion(found.heldOut.count, found.heldOut.of);
    if (scored > 0)
        found.logScore = logScore / scored;
    if (repeats.of > 0 && 2 * repeats.count > repeats.of) {
        const double a = static_cast<double>(repeats.count) / repeats.of;
        found.reachable = Interval{.median = a, .low = a, .high = 0.5 * (1 + std::sqrt(2 * a - 1))};
    }
    return found;
}

} // namespace whichway
