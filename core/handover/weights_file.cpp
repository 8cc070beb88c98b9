// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/handover/weights_file.h"

#include "core/handover/cautions.h"

#include <cmath>
#include <nlohmann/json.hpp>

namespace whichway {
namespace {

using Json = nlohmann::ordered_json;

Json numberOrNull(double value) {
    return std::isfinite(value) ? Json(value) : Json(nullptr);
}

Json toJson(const Interval& interval) {
    return {{"median", numberOrNull(interval.median)},
            {"low", numberOrNull(interval.low)},
            {"high", numberOrNull(interval.high)}};
}

const char* wordFor(FeatureScale scale) {
    static constexpr const char* kWords[] = {"plain", "log", "capped"};
    return kWords[static_cast<int>(scale)];
}

} // namespace

std::string weightsFile(const SessionState& state, const SessionFindings& findings) {
    const Protocol& protocol = state.began.protocol;
    const std::size_t d = protocol.features.size();
    Json json;
    json["format"] = 1;
    json["study"] = protocol.name;
    json["protocol_version"] = protocol.version;
    json["protocol_hash"] = protocol.hash;
    json["invented"] = protocol.invented;
    json["pilot"] = state.began.kind != SessionKind::Participant;
    json["program"] = state.began.program;
    json["main_answers"] = findings.mainAnswers;
    json["interval"] = "90 % posterior interval, 5th to 95th percentile";
    Json features = Json::array();
    for (std::size_t j = 0; j < d; ++j) {
        const FeatureDefinition& feature = protocol.features[j];
        const Standardisation& scale = protocol.table.standardisation[j];
        const WeightFinding& weight = findings.weights.features[j];
        Json one = {{"name", feature.name},         {"label", feature.label},
                    {"unit", feature.unit},         {"measure", feature.measure},
                    {"settings", feature.settings}, {"transform", wordFor(feature.scale)},
                    {"mean", scale.mean},           {"deviation", scale.deviation}};
        if (feature.scale == FeatureScale::Capped) {
            one["low"] = scale.low;
            one["high"] = scale.high;
        }
        one["direction"] = toJson(weight.direction);
        one["standardised"] = toJson(weight.standardised);
        one["per_unit"] = toJson(weight.perUnit);
        one["probability_above_0"] = weight.positive;
        features.push_back(std::move(one));
    }
    json["features"] = std::move(features);
    json["sensitivity"] = toJson(findings.weights.sensitivity);
    json["direction_precision"] = findings.weights.directionPrecision;
    json["side_bias"] = toJson(findings.sideBias);
    Json covariance = Json::array();
    for (std::size_t r = 0; r < d; ++r) {
        Json row = Json::array();
        for (std::size_t c = 0; c < d; ++c)
            row.push_back(findings.weights.covariance(r, c));
        covariance.push_back(std::move(row));
    }
    json["covariance_standardised"] = std::move(covariance);
    Json tradeOffs = Json::array();
    for (const TradeOff& tradeOff : findings.tradeOffs)
        tradeOffs.push_back({{"feature", tradeOff.feature},
                             {"paid_in", protocol.numeraire},
                             {"determined", tradeOff.determined},
                             {"change", tradeOff.determined ? toJson(tradeOff.change) : Json(nullptr)},
                             {"sentence", tradeOff.sentence}});
    json["trade_offs"] = std::move(tradeOffs);
    Json course = Json::array();
    for (const CoursePoint& point : findings.course) {
        Json direction = Json::array();
        for (const Interval& component : point.direction)
            direction.push_back(component.median);
        course.push_back({{"main_answers", point.answers},
                          {"direction", std::move(direction)},
                          {"direction_precision", point.directionPrecision},
                          {"sensitivity", toJson(point.sensitivity)}});
    }
    json["course"] = std::move(course);
    double worst = 0;
    for (const ScalarSummary& summary : findings.posterior.summaries)
        worst = std::isnan(worst) || std::isnan(summary.rHat) ? std::nan("") : std::max(worst, summary.rHat);
    json["sampling"] = {{"converged", findings.posterior.converged},
                        {"draws", findings.posterior.draws.count()},
                        {"largest_r_hat", numberOrNull(worst)},
                        {"seed", findings.sampler.seed}};
    json["cautions"] = cautions();
    return json.dump(2) + "\n";
}

} // namespace whichway
