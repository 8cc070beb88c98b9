// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/study_file.h"

#include "core/study/study_features.h"
#include "core/study/study_folder.h"
#include "core/study/study_section.h"
#include "core/study/table_columns.h"

#include <algorithm>
#include <fmt/format.h>

namespace whichway {

namespace {

constexpr std::size_t kLanguages = 50;
constexpr std::size_t kPages = 20;
constexpr std::size_t kScenes = 100;
constexpr std::size_t kPairs = 1000;

using Need = StudySection::Need;

std::string readText(StudySection& section, const std::string& key, Need need) {
    const std::string text = section.text(key, need);
    section.checkText(key);
    return text;
}

std::vector<std::string> readTextList(StudySection& section, const std::string& key, Need need) {
    std::vector<Place> places;
    std::vector<std::string> texts = section.textList(key, need, places);
    for (std::size_t i = 0; i < texts.size() && !section.isFaulty(key); ++i)
        section.checkText(texts[i], places[i]);
    return texts;
}

bool isLanguage(const std::string& tag) {
    std::size_t part = 0;
    for (std::size_t start = 0; start <= tag.size(); ++part) {
        const std::size_t end = std::min(tag.find('-', start), tag.size());
        const std::string_view subtag = std::string_view(tag).substr(start, end - start);
        const bool plain = std::all_of(subtag.begin(), subtag.end(), [&](char c) {
            return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (part > 0 && c >= '0' && c <= '9');
        });
        if (!plain || subtag.size() < (part == 0 ? 2u : 1u) || subtag.size() > 8)
            return false;
        start = end + 1;
    }
    return part <= 5;
}

/// Plain relative paths to TOML files: "scenes/ward.toml".
bool isScenePath(const std::string& path) {
    constexpr std::string_view kEnding = ".toml";
    if (!path.ends_with(kEnding) || path.size() > 200)
        return false;
    const std::string_view stem = std::string_view(path).substr(0, path.size() - kEnding.size());
    for (std::size_t start = 0; start <= stem.size();) {
        const std::size_t end = std::min(stem.find('/', start), stem.size());
        if (!isName(stem.substr(start, end - start)))
            return false;
        start = end + 1;
    }
    return true;
}

void readHead(StudySection& root, StudyFile& study) {
    const long long format = root.integer("format", Need::Required, 1, 1, 1000000);
    if (format != 1)
        root.report(
            "study.format", root.placeOf("format"),
            fmt::format("This study file has format {}, and this program reads format 1.", format),
            "Use a program of the study's time, or write format = 1 after bringing the file up to it.",
            {std::to_string(format)});
    Protocol& protocol = study.protocol;
    protocol.name = root.text("name", Need::Required);
    if (root.isText("name") && !isName(protocol.name))
        root.report("study.name", root.placeOf("name"),
                    fmt::format("“{}” cannot name a study.", protocol.name),
                    "Use 1 to 64 of the letters A to Z and a to z, digits, “_” and “-”.", {protocol.name});
    protocol.title = readText(root, "title", Need::Required);
    protocol.version = readText(root, "version", Need::Required);
    protocol.invented = root.flag("invented", false);
    protocol.numeraire = root.text("numeraire", Need::Required);

    std::vector<Place> places;
    study.scenePaths = root.textList("scenes", Need::Optional, places);
    if (study.scenePaths.size() > kScenes) {
        root.report("study.too-many", root.placeOf("scenes"),
                    fmt::format("There are more than {} scenes.", kScenes), "Keep fewer.",
                    {std::to_string(kScenes)});
        study.scenePaths.clear();
    }
    for (std::size_t i = 0; i < study.scenePaths.size(); ++i) {
        if (!isScenePath(study.scenePaths[i]))
            root.report(
                "study.path", places[i],
                fmt::format("“{}” is not a plain path to a scene within the study folder.",
                            study.scenePaths[i]),
                "Write names of folders and of a “.toml” file, such as “scenes/ward.toml”, without “..”, a "
                "leading “/” or characters other than letters, digits, “_” and “-”.",
                {study.scenePaths[i]});
        study.places.set(fmt::format("scenes.{}", i), places[i]);
    }
    study.scenesKnown =
        std::erase_if(study.scenePaths, [](const std::string& path) { return !isScenePath(path); }) == 0;
}

void readAnswers(StudySection& root, Protocol& protocol) {
    StudySection answers = root.table("answers", Need::Required);
    protocol.levels = 0; // unknown
    if (!answers.exists())
        return;
    protocol.levels = static_cast<int>(answers.integer("levels", Need::Required, 3, 1, 7));
    if (answers.isFaulty("levels"))
        protocol.levels = 0;
    protocol.cannotTell = answers.flag("cannot_tell", false);
    if (protocol.cannotTell && protocol.levels == 1)
        answers.report("study.cannot-tell", answers.placeOf("cannot_tell"),
                       "“Cannot tell” needs answers in grades, and levels = 1 asks for the choice alone.",
                       "Set levels to 2 or more, or cannot_tell = false.");
    answers.refuseUnknownKeys();
}

void readConfidence(StudySection& section, const Protocol& protocol, Texts& texts) {
    if (protocol.levels == 1) {
        for (const char* key : {"sureness", "confidence"})
            if (section.has(key))
                section.report(
                    "study.words", section.keyPlaceOf(key),
                    fmt::format("With levels = 1 nobody is asked how sure they are, but “{}” is here.", key),
                    "Take it out, or set levels to 2 or more.", {key});
        return;
    }
    texts.sureness = readText(section, "sureness", Need::Required);
    texts.confidence = readTextList(section, "confidence", Need::Required);
    const std::size_t levels = static_cast<std::size_t>(protocol.levels);
    if (section.isList("confidence") && levels > 0 && texts.confidence.size() != levels)
        section.report(
            "study.words", section.placeOf("confidence"),
            fmt::format("There are {} words for {} confidence levels.", texts.confidence.size(), levels),
            "Write one word for each level, from least to most sure.",
            {std::to_string(texts.confidence.size()), std::to_string(levels)});
    for (std::size_t i = 0; i < texts.confidence.size(); ++i)
        if (std::count(texts.confidence.begin(), texts.confidence.end(), texts.confidence[i]) > 1) {
            section.report("study.words", section.placeOf("confidence"),
                           fmt::format("“{}” stands for two confidence levels.", texts.confidence[i]),
                           "Give each level a word of its own.", {texts.confidence[i]});
            break;
        }
}

void readTexts(StudySection& root, Protocol& protocol) {
    StudySection languages = root.table("texts", Need::Required);
    if (!languages.exists())
        return;
    const std::vector<std::string> keys = languages.keysInOrder();
    if (keys.empty() || keys.size() > kLanguages)
        languages.report(
            "study.language", languages.place(), fmt::format("There are texts in {} languages.", keys.size()),
            fmt::format("Write a table such as [texts.en] for each of 1 to {} languages.", kLanguages));
    if (keys.size() > kLanguages)
        return;
    for (const std::string& language : keys) {
        StudySection section = languages.table(language, Need::Required);
        if (!section.exists())
            continue;
        if (!isLanguage(language))
            languages.report("study.language", section.place(),
                             fmt::format("“{}” is not the tag of a language.", language),
                             "Write a BCP 47 tag such as “en”, “de” or “pt-BR”.", {language});
        Texts texts;
        texts.language = language;
        texts.question = readText(section, "question", Need::Required);
        texts.instructions = readTextList(section, "instructions", Need::Required);
        if (section.isList("instructions") &&
            (texts.instructions.empty() || texts.instructions.size() > kPages))
            section.report("study.text", section.placeOf("instructions"),
                           fmt::format("There are {} pages of instructions.", texts.instructions.size()),
                           fmt::format("Write 1 to {} pages.", kPages));
        texts.left = readText(section, "left", Need::Required);
        texts.right = readText(section, "right", Need::Required);
        readConfidence(section, protocol, texts);
        const auto needIf = [](bool needed) { return needed ? Need::Required : Need::Optional; };
        texts.cannotTell = readText(section, "cannot_tell", needIf(protocol.cannotTell));
        texts.practiceEnds = readText(section, "practice_ends", needIf(protocol.trials.practice > 0));
        texts.breakText = readText(section, "break", needIf(protocol.trials.breakAfter > 0));
        texts.end = readText(section, "end", Need::Required);
        section.alsoKnows("sureness");
        section.alsoKnows("confidence");
        section.refuseUnknownKeys();
        protocol.texts.push_back(std::move(texts));
    }
}

void readModel(StudySection& root, ModelSettings& model) {
    StudySection section = root.table("model", Need::Optional);
    if (!section.exists())
        return;
    model.lapse = section.number("lapse", model.lapse, 0, 0.2);
    model.scale = section.choice("scale", {"hierarchical", "fixed"}) == 1 ? WeightScale::Fixed
                                                                          : WeightScale::Hierarchical;
    model.sideBias = section.flag("side_bias", model.sideBias);
    section.refuseUnknownKeys();
}

void readPlanning(StudySection& root, PlanningSettings& planning) {
    StudySection section = root.table("planning", Need::Optional);
    if (!section.exists())
        return;
    const std::vector<std::string> choose = {"jointly informative", "at random"};
    planning.schedule =
        section.choice("schedule", {"rolling", "fixed"}) == 1 ? PlanSchedule::Fixed : PlanSchedule::Rolling;
    planning.batch = static_cast<int>(section.integer("batch", Need::Optional, planning.batch, 1, 50));
    planning.choose = choose[section.choice("choose", choose)];
    section.choice("worth", {"information"});
    section.refuseUnknownKeys();
}

void readTrials(StudySection& root, TrialSettings& trials) {
    StudySection section = root.table("trials", Need::Optional);
    if (!section.exists())
        return;
    const auto countOf = [&](const char* key, int standard, int low, int high) {
        return static_cast<int>(section.integer(key, Need::Optional, standard, low, high));
    };
    trials.practice = countOf("practice", trials.practice, 0, 50);
    trials.main = countOf("main", trials.main, 1, 1000);
    trials.heldOut = countOf("held_out", trials.heldOut, 0, 500);
    trials.repeat = countOf("repeat", trials.repeat, 0, 500);
    trials.catchTrials = countOf("catch", trials.catchTrials, 0, 50);
    trials.identical = countOf("identical", trials.identical, 0, 50);
    trials.breakAfter = countOf("break_after", trials.breakAfter, 0, 1000);
    trials.greyInterval = section.number("grey_interval_s", trials.greyInterval, 0, 10);
    if (trials.repeat > trials.heldOut && !section.isFaulty("held_out") && !section.isFaulty("repeat"))
        section.report(
            "study.repeats", section.placeOf("repeat"),
            fmt::format("{} repeats are asked for, but repeats are of the {} held-out pairs, each at most "
                        "once.",
                        trials.repeat, trials.heldOut),
            "Raise held_out or lower repeat.",
            {std::to_string(trials.repeat), std::to_string(trials.heldOut)});
    // What is at fault needs nothing else to go with it.
    for (const auto& [key, count] :
         {std::pair("practice", &trials.practice), std::pair("main", &trials.main),
          std::pair("held_out", &trials.heldOut), std::pair("catch", &trials.catchTrials)})
        if (section.isFaulty(key))
            *count = 0;
    section.refuseUnknownKeys();
}

/// The tables [[key]], each with the names of two motions.
std::vector<std::pair<std::string, std::string>>
readPairs(StudySection& root, const std::string& key, const char* first, const char* second, int needed) {
    std::vector<std::pair<std::string, std::string>> pairs;
    std::vector<StudySection> sections = root.tables(key);
    if (sections.size() > kPairs) {
        root.report("study.too-many", root.placeOf(key), fmt::format("There are more than {} pairs.", kPairs),
                    "Keep fewer.", {std::to_string(kPairs)});
        return {};
    }
    for (StudySection& section : sections) {
        pairs.emplace_back(section.text(first, Need::Required), section.text(second, Need::Required));
        if (section.isText(first) && section.isText(second) && pairs.back().first == pairs.back().second)
            section.report("study.same-motion", section.placeOf(second),
                           fmt::format("Both motions of this pair are “{}”.", pairs.back().first),
                           "Name two motions that differ.", {pairs.back().first});
        section.refuseUnknownKeys();
    }
    const std::string trials = key == "practice_pair" ? "practice" : "catch";
    if (pairs.size() < static_cast<std::size_t>(needed) && !root.isFaulty(key))
        root.report("study.too-few-pairs", root.placeOf("trials." + trials),
                    fmt::format("{} {} trials are asked for, but there are {} tables [[{}]].", needed, trials,
                                pairs.size(), key),
                    fmt::format("Write more tables [[{}]], or lower trials.{}.", key, trials),
                    {std::to_string(needed), std::to_string(pairs.size())});
    return pairs;
}

void checkNumeraire(StudySection& root, const Protocol& protocol) {
    const auto isNumeraire = [&](const FeatureDefinition& feature) {
        return feature.name == protocol.numeraire;
    };
    if (!root.isText("numeraire") || protocol.features.empty() ||
        std::any_of(protocol.features.begin(), protocol.features.end(), isNumeraire))
        return;
    std::vector<std::string> names;
    for (const FeatureDefinition& feature : protocol.features)
        names.push_back(feature.name);
    root.report("study.numeraire", root.placeOf("numeraire"),
                fmt::format("“{}” is not a feature of this study.", protocol.numeraire),
                didYouMean(protocol.numeraire, names), {protocol.numeraire});
}

} // namespace

Place StudyPlaces::of(const std::string& path) const {
    for (std::string key = path;;) {
        if (const auto found = places_.find(key); found != places_.end())
            return found->second;
        const std::size_t dot = key.rfind('.');
        if (dot == std::string::npos)
            break;
        key.erase(dot);
    }
    const auto root = places_.find("");
    return root == places_.end() ? Place{} : root->second;
}

StudyFile parseStudyFile(std::string_view content, const std::string& file, std::vector<Error>& problems) {
    StudyFile study;
    std::optional<StudySection> root = StudySection::parse(content, file, study.places, problems);
    if (!root)
        return study;
    study.isToml = true;
    Protocol& protocol = study.protocol;
    readHead(*root, study);
    readAnswers(*root, protocol);
    readTrials(*root, protocol.trials);
    readTexts(*root, protocol);
    protocol.features = readFeatures(*root);
    readModel(*root, protocol.model);
    readPlanning(*root, protocol.planning);
    for (auto& [left, right] : readPairs(*root, "practice_pair", "left", "right", protocol.trials.practice))
        protocol.practicePairs.push_back({left, right});
    for (auto& [better, worse] :
         readPairs(*root, "catch_pair", "better", "worse", protocol.trials.catchTrials))
        protocol.catchPairs.push_back({better, worse});
    checkNumeraire(*root, protocol);
    root->refuseUnknownKeys();
    return study;
}

} // namespace whichway
