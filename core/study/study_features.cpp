// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/study_features.h"

#include "core/motion/measures.h"
#include "core/study/table_columns.h"
#include "core/study/units.h"

#include <algorithm>
#include <fmt/format.h>
#include <limits>

namespace whichway {

namespace {

constexpr std::size_t kFeatures = 32;

using Need = StudySection::Need;

bool isFeatureName(const std::string& name) {
    return !name.empty() && name.size() <= 64 && std::all_of(name.begin(), name.end(), [](char c) {
        return (c >= 'a' && c <= 'z') || (c >= '0' && c <= '9') || c == '_';
    });
}

void readSetting(StudySection& section, const StudySection& settings, const std::string& name, double value,
                 FeatureDefinition& feature) {
    if (const auto fault = faultOfSetting(name, value))
        section.report("study.setting-range", settings.placeOf(name),
                       fmt::format("“{}” cannot be {} here. {}", name, value, *fault),
                       "Leave it out for the measure's own value.", {name});
    else
        feature.settings[name] = value;
}

void readSettings(StudySection& section, const Measure* measure, FeatureDefinition& feature) {
    StudySection settings = section.table("settings", Need::Optional);
    if (!settings.exists())
        return;
    std::vector<std::string> known;
    if (measure != nullptr)
        for (const auto& [name, standard] : measure->settings)
            known.push_back(name);
    for (const std::string& name : settings.keysInOrder()) {
        const double value = settings.number(name, 0, std::numeric_limits<double>::lowest(),
                                             std::numeric_limits<double>::max());
        if (std::find(known.begin(), known.end(), name) != known.end())
            readSetting(section, settings, name, value, feature);
        else if (feature.measure.empty())
            section.report("study.unknown-setting", settings.keyPlaceOf(name),
                           "Settings are of a measure, and this feature is given in features.csv.",
                           "Take them out, or name the measure.", {name});
        else if (measure != nullptr)
            section.report("study.unknown-setting", settings.keyPlaceOf(name),
                           fmt::format("“{}” is not a setting of “{}”.", name, feature.measure),
                           didYouMean(name, known), {name, feature.measure});
    }
}

const Measure* readMeasure(StudySection& section, FeatureDefinition& feature) {
    feature.measure = section.text("measure", Need::Optional);
    if (!section.isText("measure"))
        return nullptr;
    const Measure* measure = findMeasure(feature.measure);
    if (measure == nullptr) {
        std::vector<std::string> known;
        for (const Measure& candidate : measures())
            known.push_back(candidate.phrase);
        section.report("study.unknown-measure", section.placeOf("measure"),
                       fmt::format("“{}” is not a measure.", feature.measure),
                       didYouMean(feature.measure, known), {feature.measure});
    }
    return measure;
}

void checkUnit(StudySection& section, const FeatureDefinition& feature, const Measure* measure) {
    if (!section.isText("unit"))
        return;
    if (measure != nullptr && feature.unit != measure->unit)
        section.report("study.unit-of-measure", section.placeOf("unit"),
                       fmt::format("“{}” is measured in {}, not in “{}”.", measure->phrase,
                                   measure->unit == "1" ? "no unit (“1”)" : "“" + measure->unit + "”",
                                   feature.unit),
                       fmt::format("Write unit = \"{}\".", measure->unit), {feature.unit, measure->unit});
    else if (measure == nullptr && !isUnit(feature.unit))
        section.report("study.unit", section.placeOf("unit"),
                       fmt::format("“{}” is not a unit that this program knows.", feature.unit), kUnitRemedy,
                       {feature.unit});
}

void readSpeech(StudySection& section, FeatureDefinition& feature) {
    feature.speakPer = section.number("speak_per", 1, std::numeric_limits<double>::lowest(),
                                      std::numeric_limits<double>::max());
    if (section.isFaulty("speak_per") || !section.has("speak_per"))
        return;
    if (!(feature.speakPer > 0))
        section.report("study.speak-per", section.placeOf("speak_per"),
                       fmt::format("Trade-offs cannot be said per {} {}.", feature.speakPer, feature.unit),
                       "Write a number above 0.", {fmt::format("{}", feature.speakPer)});
    else if (feature.scale == FeatureScale::Log)
        section.report("study.speak-per", section.placeOf("speak_per"),
                       "On a logarithmic scale trade-offs are said per doubling.", "Take speak_per out.");
}

} // namespace

std::vector<FeatureDefinition> readFeatures(StudySection& root) {
    StudySection tables = root.table("features", Need::Required);
    if (!tables.exists())
        return {};
    const std::vector<std::string> names = tables.keysInOrder();
    if (names.empty() || names.size() > kFeatures) {
        tables.report(names.empty() ? "study.no-features" : "study.too-many", tables.place(),
                      fmt::format("There are {} features.", names.size()),
                      fmt::format("Write a table [features.NAME] for each of 1 to {} features.", kFeatures),
                      {std::to_string(names.size()), std::to_string(kFeatures)});
        return {};
    }
    std::vector<FeatureDefinition> features;
    for (const std::string& name : names) {
        StudySection section = tables.table(name, Need::Required);
        if (!section.exists())
            continue;
        FeatureDefinition feature;
        feature.name = name;
        if (!isFeatureName(name))
            section.report("study.name", section.place(), fmt::format("“{}” cannot name a feature.", name),
                           "Use 1 to 64 of the letters a to z, digits and “_”.", {name});
        feature.label = section.text("label", Need::Required);
        section.checkText("label");
        feature.unit = section.text("unit", Need::Required);
        const Measure* measure = readMeasure(section, feature);
        checkUnit(section, feature, measure);
        readSettings(section, measure, feature);
        constexpr FeatureScale kScales[] = {FeatureScale::Plain, FeatureScale::Log, FeatureScale::Capped};
        feature.scale = kScales[section.choice("scale", {"plain", "log", "capped"})];
        readSpeech(section, feature);
        section.refuseUnknownKeys();
        features.push_back(std::move(feature));
    }
    return features;
}

} // namespace whichway
