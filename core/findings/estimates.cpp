// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/findings/estimates.h"

#include "core/findings/words.h"
#include "core/preference/diagnostics.h"

#include <algorithm>
#include <cmath>
#include <fmt/core.h>
#include <numbers>
#include <stdexcept>

namespace whichway {
namespace {

constexpr double kSignCertainty = 0.99;

std::vector<double> column(const Matrix& matrix, std::size_t index) {
    std::vector<double> values(matrix.rows);
    for (std::size_t i = 0; i < matrix.rows; ++i)
        values[i] = matrix(i, index);
    return values;
}

double shareAboveZero(const std::vector<double>& values) {
    return static_cast<double>(std::count_if(values.begin(), values.end(), [](double v) { return v > 0; })) /
           static_cast<double>(values.size());
}

/// The change of a feature that a trade-off speaks of, on the scale that was standardised.
double stepOf(const FeatureDefinition& feature) {
    return feature.scale == FeatureScale::Log ? std::numbers::ln2 : feature.speakPer;
}

std::string sentenceFor(const FeatureDefinition& feature, const FeatureDefinition& numeraire,
                        const TradeOff& tradeOff) {
    const std::string change =
        feature.scale == FeatureScale::Log
            ? fmt::format("Twice as much {}", inSentence(feature.label))
            : fmt::format("{} more {}", withUnit(feature.speakPer, feature.unit), inSentence(feature.label));
    if (!tradeOff.determined)
        return fmt::format("{}: not determined, because the sign of {} is only {:.0f} % certain.", change,
                           inSentence(numeraire.label), 100 * tradeOff.signProbability);
    const std::string unit = numeraire.scale == FeatureScale::Log ? "doublings" : numeraire.unit;
    return fmt::format("{} is balanced by {} {} {} (90 % interval {}).", change,
                       withUnit(std::abs(tradeOff.change.median), unit),
                       tradeOff.change.median < 0 ? "less" : "more", inSentence(numeraire.label),
                       rangeWithUnit(tradeOff.change.low, tradeOff.change.high, unit));
}

} // namespace

Interval intervalOf(std::vector<double> values) {
    return {
        .median = quantileOf(values, 0.5), .low = quantileOf(values, 0.05), .high = quantileOf(values, 0.95)};
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
            directions(i, j) = draws.weights(i, j) / lengths[i];
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
                                     .positive = shareAboveZero(weights)});
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
    const double above = shareAboveZero(column(draws.weights, n));
    const double perNumeraire = numeraire->scale == FeatureScale::Log ? std::numbers::ln2 : 1.0;

    std::vector<TradeOff> tradeOffs;
    for (std::size_t j = 0; j < protocol.features.size(); ++j) {
        if (j == n)
            continue;
        TradeOff tradeOff{.feature = protocol.features[j].name,
                          .signProbability = std::max(above, 1 - above)};
        tradeOff.determined = tradeOff.signProbability >= kSignCertainty;
        const double scale = stepOf(protocol.features[j]) * protocol.table.standardisation[n].deviation /
                             protocol.table.standardisation[j].deviation / perNumeraire;
        std::vector<double> changes(draws.count());
        for (std::size_t i = 0; i < changes.size(); ++i)
            changes[i] = -draws.weights(i, j) / draws.weights(i, n) * scale;
        tradeOff.change = intervalOf(std::move(changes));
        tradeOff.sentence = sentenceFor(protocol.features[j], *numeraire, tradeOff);
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
    found.expectedRegret = (sumOfMax - mean[b]) / (sumOfMax - sumOfMean);
    return found;
}

} // namespace whichway
