// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/journal/json.h"

namespace whichway {

namespace {

constexpr EnumWord<FeatureScale> kFeatureScales[] = {
    {FeatureScale::Plain, "plain"}, {FeatureScale::Log, "log"}, {FeatureScale::Capped, "capped"}};
constexpr EnumWord<WeightScale> kWeightScales[] = {{WeightScale::Hierarchical, "hierarchical"},
                                                   {WeightScale::Fixed, "fixed"}};
constexpr EnumWord<PlanSchedule> kPlanSchedules[] = {{PlanSchedule::Rolling, "rolling"},
                                                     {PlanSchedule::Fixed, "fixed"}};

} // namespace

static void to_json(Json& json, const FeatureScale& value) {
    json = enumToJson(value, kFeatureScales);
}
static void from_json(const Json& json, FeatureScale& value) {
    value = enumFromJson(json, kFeatureScales);
}
static void to_json(Json& json, const WeightScale& value) {
    json = enumToJson(value, kWeightScales);
}
static void from_json(const Json& json, WeightScale& value) {
    value = enumFromJson(json, kWeightScales);
}
static void to_json(Json& json, const PlanSchedule& value) {
    json = enumToJson(value, kPlanSchedules);
}
static void from_json(const Json& json, PlanSchedule& value) {
    value = enumFromJson(json, kPlanSchedules);
}

static void to_json(Json& json, const Matrix& matrix) {
    json = {{"rows", matrix.rows}, {"columns", matrix.columns}, {"values", matrix.values}};
}
static void from_json(const Json& json, Matrix& matrix) {
    json.at("rows").get_to(matrix.rows);
    json.at("columns").get_to(matrix.columns);
    json.at("values").get_to(matrix.values);
    if (matrix.columns > 4096 || matrix.rows > 1000000 ||
        matrix.values.size() != matrix.rows * matrix.columns)
        throw std::invalid_argument("a matrix does not have its rows times columns values");
}

// Each line below names every field of its struct; a missing field or one of another type is an error on
// reading.
#define WHICHWAY_JSON(Type, ...)                                                                             \
    [[maybe_unused]] static void to_json(Json& nlohmann_json_j, const Type& nlohmann_json_t) {               \
        NLOHMANN_JSON_EXPAND(NLOHMANN_JSON_PASTE(NLOHMANN_JSON_TO, __VA_ARGS__))                             \
    }                                                                                                        \
    [[maybe_unused]] static void from_json(const Json& nlohmann_json_j, Type& nlohmann_json_t) {             \
        NLOHMANN_JSON_EXPAND(NLOHMANN_JSON_PASTE(NLOHMANN_JSON_FROM, __VA_ARGS__))                           \
    }

WHICHWAY_JSON(Segment, x1, y1, x2, y2)
WHICHWAY_JSON(Rectangle, x, y, width, height)
WHICHWAY_JSON(Door, x, y, width, closed, open)
WHICHWAY_JSON(Scene, name, bounds, floor, walls, doors, furniture, goal, robotLength, robotWidth, robotRadius,
              personRadius, keepRightAxis)
WHICHWAY_JSON(FeatureDefinition, name, label, unit, measure, settings, scale, speakPer)
WHICHWAY_JSON(Standardisation, mean, deviation, low, high)
WHICHWAY_JSON(FeatureTable, motions, raw, standardised, standardisation)
WHICHWAY_JSON(Texts, language, question, instructions, left, right, sureness, confidence, cannotTell,
              practiceEnds, breakText, end)
WHICHWAY_JSON(ModelSettings, lapse, scale, sideBias)
WHICHWAY_JSON(PlanningSettings, schedule, batch, choose, worth)
WHICHWAY_JSON(TrialSettings, practice, main, heldOut, repeat, catchTrials, identical, breakAfter,
              greyInterval)
WHICHWAY_JSON(CatchPair, better, worse)
WHICHWAY_JSON(PracticePair, left, right)

#undef WHICHWAY_JSON

void to_json(Json& json, const Protocol& p) {
    json = {{"name", p.name},
            {"title", p.title},
            {"version", p.version},
            {"invented", p.invented},
            {"hash", p.hash},
            {"features", p.features},
            {"table", p.table},
            {"numeraire", p.numeraire},
            {"levels", p.levels},
            {"cannotTell", p.cannotTell},
            {"texts", p.texts},
            {"model", p.model},
            {"planning", p.planning},
            {"trials", p.trials},
            {"practicePairs", p.practicePairs},
            {"catchPairs", p.catchPairs},
            {"scenes", p.scenes}};
}

void from_json(const Json& json, Protocol& p) {
    json.at("name").get_to(p.name);
    json.at("title").get_to(p.title);
    json.at("version").get_to(p.version);
    json.at("invented").get_to(p.invented);
    json.at("hash").get_to(p.hash);
    json.at("features").get_to(p.features);
    json.at("table").get_to(p.table);
    json.at("numeraire").get_to(p.numeraire);
    json.at("levels").get_to(p.levels);
    json.at("cannotTell").get_to(p.cannotTell);
    json.at("texts").get_to(p.texts);
    json.at("model").get_to(p.model);
    json.at("planning").get_to(p.planning);
    json.at("trials").get_to(p.trials);
    json.at("practicePairs").get_to(p.practicePairs);
    json.at("catchPairs").get_to(p.catchPairs);
    json.at("scenes").get_to(p.scenes);
    if (p.levels < 1 || p.levels > 7)
        throw std::invalid_argument("the protocol has " + std::to_string(p.levels) + " confidence levels");
    for (const Texts& texts : p.texts)
        if (texts.confidence.size() != static_cast<std::size_t>(p.levels))
            throw std::invalid_argument("the protocol's texts do not have one word per confidence level");
    const std::size_t d = p.features.size();
    if (p.texts.empty())
        throw std::invalid_argument("the protocol has no texts");
    if (p.table.raw.columns != d || p.table.standardised.columns != d ||
        p.table.standardisation.size() != d || p.table.raw.rows != p.table.motions.size() ||
        p.table.standardised.rows != p.table.motions.size())
        throw std::invalid_argument("the protocol's feature table does not fit its features and motions");
}

} // namespace whichway
