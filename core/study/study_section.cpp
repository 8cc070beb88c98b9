// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/study_section.h"

#include <algorithm>
#include <fmt/format.h>
#include <limits>

namespace whichway {

namespace {

/// Longest text that people are to read.
constexpr std::size_t kTextBytes = 4000;

} // namespace

StudySection::StudySection(std::optional<TomlTable> table, StudyPlaces& places, std::vector<Error>& problems,
                           std::string path)
    : table_(std::move(table)), places_(&places), problems_(&problems), path_(std::move(path)) {
    if (table_)
        places_->set(path_, table_->place());
}

std::optional<StudySection> StudySection::parse(std::string_view content, const std::string& file,
                                                StudyPlaces& places, std::vector<Error>& problems) {
    std::optional<TomlTable> root = TomlTable::parse(content, file, problems);
    places.set("", {file, 1, 1});
    if (!root)
        return std::nullopt;
    return StudySection(std::move(root), places, problems, "");
}

std::string StudySection::pathOf(const std::string& key) const {
    return path_.empty() || key.empty() ? path_ + key : path_ + "." + key;
}

bool StudySection::isFaulty(const std::string& key) const {
    return exists() && (table_->isFaulty(key) || outOfRange_.contains(key));
}

Place StudySection::placeOf(const std::string& path) const {
    return places_->of(pathOf(path));
}

Place StudySection::keyPlaceOf(const std::string& key) const {
    return exists() ? table_->keyPlaceOf(key) : place();
}

std::vector<std::string> StudySection::keysInOrder() const {
    return exists() ? table_->keys() : std::vector<std::string>();
}

void StudySection::report(const std::string& code, const Place& place, std::string message,
                          std::string remedy, std::vector<std::string> values) {
    problems_->push_back({code, place, std::move(message), std::move(remedy), std::move(values)});
}

bool StudySection::look(const std::string& key, Need need) {
    if (!exists())
        return false;
    if (need == Need::Required)
        table_->require(key);
    else
        table_->alsoKnows(key);
    if (table_->has(key))
        places_->set(pathOf(key), table_->placeOf(key));
    return table_->has(key);
}

std::string StudySection::text(const std::string& key, Need need) {
    return look(key, need) ? table_->text(key) : "";
}

std::vector<std::string> StudySection::textList(const std::string& key, Need need,
                                                std::vector<Place>& places) {
    if (!look(key, need))
        return {};
    places = table_->itemPlacesOf(key);
    return table_->texts(key);
}

long long StudySection::integer(const std::string& key, Need need, long long standard, long long low,
                                long long high) {
    if (!look(key, need))
        return standard;
    const long long value = table_->integer(key, standard);
    if (value >= low && value <= high)
        return value;
    outOfRange_.insert(key);
    report("study.range", placeOf(key), fmt::format("“{}” is {}.", key, value),
           fmt::format("Write a whole number from {} to {}.", low, high),
           {key, std::to_string(value), std::to_string(low), std::to_string(high)});
    return standard;
}

double StudySection::number(const std::string& key, double standard, double low, double high) {
    if (!look(key, Need::Optional))
        return standard;
    const double value = table_->number(key, standard);
    if (value >= low && value <= high)
        return value;
    outOfRange_.insert(key);
    report("study.range", placeOf(key), fmt::format("“{}” is {}.", key, value),
           fmt::format("Write a number from {} to {}.", low, high),
           {key, fmt::format("{}", value), fmt::format("{}", low), fmt::format("{}", high)});
    return standard;
}

bool StudySection::flag(const std::string& key, bool standard) {
    return look(key, Need::Optional) ? table_->flag(key, standard) : standard;
}

std::size_t StudySection::choice(const std::string& key, const std::vector<std::string>& phrases) {
    if (!look(key, Need::Optional))
        return 0;
    const std::string phrase = table_->text(key, phrases.front());
    const auto found = std::find(phrases.begin(), phrases.end(), phrase);
    if (found != phrases.end())
        return static_cast<std::size_t>(found - phrases.begin());
    outOfRange_.insert(key);
    std::string list;
    for (std::size_t i = 0; i < phrases.size(); ++i)
        list += (i == 0 ? "“" : i + 1 == phrases.size() ? " or “" : ", “") + phrases[i] + "”";
    report("study.choice", placeOf(key), fmt::format("“{}” cannot be “{}”.", key, phrase),
           fmt::format("Write {}.", list), {key, phrase, list});
    return 0;
}

StudySection StudySection::table(const std::string& key, Need need) {
    std::optional<TomlTable> table;
    if (look(key, need))
        table = table_->table(key);
    return StudySection(std::move(table), *places_, *problems_, pathOf(key));
}

std::vector<StudySection> StudySection::tables(const std::string& key) {
    if (!look(key, Need::Optional))
        return {};
    std::vector<StudySection> sections;
    for (TomlTable& table : table_->tables(key)) {
        const std::string path = fmt::format("{}.{}", pathOf(key), sections.size());
        sections.push_back(StudySection(std::move(table), *places_, *problems_, path));
    }
    return sections;
}

void StudySection::checkText(const std::string& key) {
    if (isText(key))
        checkText(table_->text(key), placeOf(key));
}

void StudySection::checkText(const std::string& text, const Place& place) {
    const auto isControl = [](char c) {
        return (static_cast<unsigned char>(c) < 0x20 && c != '\n' && c != '\r' && c != '\t') || c == 0x7f;
    };
    if (text.find_first_not_of(" \t\r\n") == std::string::npos)
        report("study.text", place, "This text is empty.", "Write what people are to read.");
    else if (text.size() > kTextBytes)
        report("study.text", place, fmt::format("This text is longer than {} bytes.", kTextBytes),
               "Shorten it, or divide it into pages.", {std::to_string(kTextBytes)});
    else if (std::any_of(text.begin(), text.end(), isControl))
        report("study.text", place, "This text has a control character in it.", "Take it out.");
}

void StudySection::alsoKnows(const std::string& key) {
    if (exists())
        table_->alsoKnows(key);
}

void StudySection::refuseUnknownKeys() {
    if (exists())
        table_->refuseOthers();
}

} // namespace whichway
