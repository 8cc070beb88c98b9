// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/estimates.h"

#include "core/findings/words.h"
#include "core/preference/diagnostics.h"

#include <algorithm>
#include <cmath>
#include <fmt/core.h>
#include <limits>
#include <numbers>
#include <stdexcept>

namespace whichway {
namespace {

constexpr double kNumeraireCertain = 0.99;
constexpr double kSignDetermined = 0.95; // only marks; nothing is hidden

std::vector<double> column(const Matrix& matrix, std::size_t index) {
    std::vector<double> values(matrix.rows);
    for (std::size_t i = 0; i < matrix.rows; ++i)
        values[i] = matrix(i, index);
    return values;
}

/// Percentile of sorted values.
double percentile(const std::vector<double>& sorted, double p) {
    const double position = p * static_cast<double>(sorted.size() - 1);
    const auto below = static_cast<std::size_t>(position);
    const double part = position - static_cast<double>(below);
    if (part == 0 || below + 1 == sorted.size() || sorted[below] == sorted[below + 1])
        return sorted[below];
    const double between = (1 - part) * sorted[below] + part * sorted[below + 1];
    return std::isnan(between) ? sorted[below] : between; // between the two infinities
}

bool isLog(const FeatureDefinition& feature) {
    return feature.scale == FeatureScale::Log;
}

/// The change of a feature that a trade-off speaks of, on the scale that was standardised.
double stepOf(const FeatureDefinition& feature) {
    return isLog(feature) ? std::numbers::ln2 : feature.speakPer;
}

/// "0.1 m more closest distance", "twice the roughness".
std::string stepText(const FeatureDefinition& feature, bool more) {
    if (isLog(feature))
        return fmt::format("{} the {}", more ? "twice" : "half", inSentence(feature.label));
    return fmt::format("{} {} {}", spokenQuantity(spokenNumber(feature.speakPer), feature.unit),
                       more ? "more" : "less", inSentence(feature.label));
}

/// A change of the numeraire; a numeraire of no weight at all pays for nothing.
double changeOf(double featureSlope, double numeraireSlope) {
    if (numeraireSlope == 0)
        return featureSlope == 0 ? 0 : std::copysign(std::numeric_limits<double>::infinity(), -featureSlope);
    return -featureSlope / numeraireSlope;
}

void putIntoWords(TradeOff& found, const FeatureDefinition& feature, const FeatureDefinition& numeraire,
                  bool numeraireLiked) {
    // Giving up means more of a numeraire that is disliked, less of one that is liked.
    const double payment = numeraireLiked ? -1 : 1;
    const bool more = found.change.median * payment >= 0;
    const double turn = more ? payment : -payment;
    double low = turn * found.change.low, high = turn * found.change.high;
    if (turn < 0)
        std::swap(low, high);
    const int decimals = decimalsFor(high - low);
    const std::string unit = isLog(numeraire) ? "doublings" : numeraire.unit;
    found.give = spokenQuantity(spokenNumber(turn * found.change.median, decimals), unit);
    found.giveWhat = fmt::format("{} {}", numeraireLiked ? "less" : "more", inSentence(numeraire.label));
    found.forWhat = stepText(feature, more);
    found.range = spokenRange(low, high, decimals, unit);
    found.sentence = fmt::format("For {}, this person accepts {} {} (90\u00a0% interval {}).", found.forWhat,
                                 found.give, found.giveWhat, found.range);
    if (found.featureSignProbability < kSignDetermined)
        found.sentence += fmt::format(" That {} of it is liked is certain only to {:.2f}.",
                                      more ? "more" : "less", found.featureSignProbability);
}

std::string undeterminedSentence(const TradeOff& found, const FeatureDefinition& numeraire) {
    return fmt::format(
        "What {} is worth is not determined: whether more or less {} is liked is certain only to "
        "{:.2f}, and {:.2f} is asked for.",
        found.forWhat, inSentence(numeraire.label), std::floor(100 * found.signProbability) / 100,
        kNumeraireCertain);
}

} // namespace

Interval intervalOf(std::vector<double> values) {
    if (values.empty())
        throw std::invalid_argument("an interval needs values");
    if (std::any_of(values.begin(), values.end(), [](double value) { return std::isnan(value); }))
        throw std::invalid_argument("a value is not a number");
    std::sort(values.begin(), values.end());
    return {
        .median = percentile(values, 0.5), .low = percentile(values, 0.05), .high = percentile(values, 0.95)};
}

double probabilityPositive(const std::vector<double>& values) {
    if (values.empty())
        throw std::invalid_argument("a probability needs values");
    double positive = 0;
    for (const double value : values)
        positive += value > 0 ? 1 : (value == 0 ? 0.5 : 0);
    return positive / static_cast<double>(values.size());
}

WeightFindings findWeights(const Protocol& protocol, const Draws& draws) {
    const std::size_t n = draws.count(), d = draws.weights.columns;
    Matrix directions(n, d);
    std::vector<double> lengths(n);
    WeightFindings findings{.meanDirection = std::vector<double>(d, 0.0), .covariance = Matrix(d, d)};
    std::vector<double> mean(d, 0.0);
    for (std::size_t i = 0; i < n; ++i) {
        lengths[i] = std::sqrt(dot(draws.weights.row(i), draws.weights.row(i)));
        for (std::size_t j = 0; j < d; ++j) {
            directions(i, j) = lengths[i] > 0 ? draws.weights(i, j) / lengths[i] : 0;
            findings.meanDirection[j] += directions(i, j);
            mean[j] += draws.weights(i, j) / static_cast<double>(n);
        }
    }
    const double length = std::sqrt(dot(findings.meanDirection, findings.meanDirection));
    for (double& component : findings.meanDirection)
        component = length > 0 ? component / length : 0;
    std::vector<double> cosines(n);
    for (std::size_t i = 0; i < n; ++i) {
        cosines[i] = dot(directions.row(i), findings.meanDirection);
        for (std::size_t a = 0; a < d; ++a)
            for (std::size_t b = 0; b < d; ++b)
                findings.covariance(a, b) += (draws.weights(i, a) - mean[a]) *
                                             (draws.weights(i, b) - mean[b]) / static_cast<double>(n - 1);
    }
    findings.directionPrecision = quantileOf(cosines, 0.05);
    findings.sensitivity = intervalOf(lengths);
    for (std::size_t j = 0; j < d; ++j) {
        const std::vector<double> weights = column(draws.weights, j);
        std::vector<double> perUnit = weights;
        for (double& value : perUnit)
            value /= protocol.table.standardisation[j].deviation;
        findings.features.push_back({.feature = protocol.features[j].name,
                                     .direction = intervalOf(column(directions, j)),
                                     .standardised = intervalOf(weights),
                                     .perUnit = intervalOf(perUnit),
                                     .positive = probabilityPositive(weights)});
    }
    return findings;
}

std::vector<TradeOff> findTradeOffs(const Protocol& protocol, const Draws& draws) {
    const auto numeraire =
        std::find_if(protocol.features.begin(), protocol.features.end(),
                     [&](const FeatureDefinition& feature) { return feature.name == protocol.numeraire; });
    if (numeraire == protocol.features.end())
        throw std::invalid_argument("findTradeOffs: the protocol has no such numeraire");
    const auto n = static_cast<std::size_t>(numeraire - protocol.features.begin());
    if (draws.count() == 0 || draws.weights.columns != protocol.features.size() ||
        protocol.table.standardisation.size() != protocol.features.size())
        throw std::invalid_argument("findTradeOffs: the draws do not fit the protocol");
    const double liked = probabilityPositive(column(draws.weights, n));
    const double numeraireStep = isLog(*numeraire) ? std::numbers::ln2 : 1.0;
    const auto slope = [&](std::size_t draw, std::size_t feature, double step) {
        return draws.weights(draw, feature) / protocol.table.standardisation[feature].deviation * step;
    };

    std::vector<TradeOff> tradeOffs;
    for (std::size_t j = 0; j < protocol.features.size(); ++j) {
        if (j == n)
            continue;
        const FeatureDefinition& feature = protocol.features[j];
        const double positive = probabilityPositive(column(draws.weights, j));
        TradeOff tradeOff{.feature = feature.name,
                          .signProbability = std::max(liked, 1 - liked),
                          .featureSignProbability = std::max(positive, 1 - positive),
                          .forWhat = stepText(feature, true)};
        tradeOff.determined = tradeOff.signProbability >= kNumeraireCertain;
        std::vector<double> changes(draws.count());
        for (std::size_t i = 0; i < changes.size(); ++i)
            changes[i] = changeOf(slope(i, j, stepOf(feature)), slope(i, n, numeraireStep));
        tradeOff.change = intervalOf(std::move(changes));
        if (tradeOff.determined)
            putIntoWords(tradeOff, feature, *numeraire, liked > 0.5);
        else
            tradeOff.sentence = undeterminedSentence(tradeOff, *numeraire);
        tradeOffs.push_back(std::move(tradeOff));
    }
    return tradeOffs;
}

BestMotions findBestMotions(const Protocol& protocol, const Draws& draws) {
    const Matrix& features = protocol.table.standardised;
    std::vector<double> mean(features.rows, 0.0), utility(features.rows);
    std::vector<int> best(features.rows, 0), worst(features.rows, 0);
    double sumOfMax = 0, sumOfMean = 0;
    for (std::size_t i = 0; i < draws.count(); ++i) {
        double total = 0;
        for (std::size_t m = 0; m < features.rows; ++m) {
            utility[m] = dot(draws.weights.row(i), features.row(m));
            mean[m] += utility[m];
            total += utility[m];
        }
        const auto [low, high] = std::minmax_element(utility.begin(), utility.end());
        ++best[static_cast<std::size_t>(high - utility.begin())];
        ++worst[static_cast<std::size_t>(low - utility.begin())];
        sumOfMax += *high;
        sumOfMean += total / static_cast<double>(features.rows);
    }
    const auto [low, high] = std::minmax_element(mean.begin(), mean.end());
    const auto b = static_cast<std::size_t>(high - mean.begin()),
               w = static_cast<std::size_t>(low - mean.begin());
    const auto count = static_cast<double>(draws.count());
    BestMotions found;
    found.best = {.motion = protocol.table.motions[b], .probability = best[b] / count};
    found.worst = {.motion = protocol.table.motions[w], .probability = worst[w] / count};
    if (sumOfMax > sumOfMean) // else all motions are alike
        found.expectedRegret = std::max(0.0, (sumOfMax - mean[b]) / (sumOfMax - sumOfMean));
    return found;
}

} // namespace whichway
