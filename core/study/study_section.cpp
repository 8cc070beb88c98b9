// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/study/study_section.h"

#include "core/study/table_columns.h"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>
#include <set>

namespace whichway {

namespace {

/// Longest text that people are to read.
constexpr std::size_t kTextBytes = 4000;
/// So many unknown keys of one table are named.
constexpr int kKeysNamed = 50;

} // namespace

using Kind = TomlNode::Kind;

struct StudySection::Reading {
    TomlNode root = {};
    StudyPlaces& places;
    std::vector<Error>& problems;
    std::set<std::string> faulty = {}; ///< dotted paths
};

StudySection::StudySection(std::shared_ptr<Reading> reading, const TomlNode* node, std::string path)
    : reading_(std::move(reading)), node_(node), path_(std::move(path)) {
    if (node_ != nullptr && !path_.empty())
        reading_->places.set(path_, node_->keyPlace.line > 0 ? node_->keyPlace : node_->place);
}

std::optional<StudySection> StudySection::parse(std::string_view content, const std::string& file,
                                                StudyPlaces& places, std::vector<Error>& problems) {
    Result<TomlNode> root = parseToml(content, file);
    places.set("", {file, 1, 1});
    if (!root) {
        problems.push_back(root.error());
        return std::nullopt;
    }
    auto reading = std::make_shared<Reading>(Reading{std::move(*root), places, problems});
    const TomlNode* node = &reading->root;
    return StudySection(std::move(reading), node, "");
}

std::string StudySection::pathOf(const std::string& key) const {
    return path_.empty() || key.empty() ? path_ + key : path_ + "." + key;
}

bool StudySection::has(std::string_view key) const {
    return exists() && node_->member(key) != nullptr;
}

bool StudySection::isText(std::string_view key) const {
    return has(key) && node_->member(key)->kind == Kind::Text;
}

bool StudySection::isList(std::string_view key) const {
    return has(key) && node_->member(key)->kind == Kind::Array;
}

bool StudySection::isFaulty(const std::string& path) const {
    return reading_->faulty.contains(pathOf(path));
}

Place StudySection::placeOf(const std::string& path) const {
    return reading_->places.of(pathOf(path));
}

Place StudySection::keyPlaceOf(const std::string& key) const {
    const TomlNode* node = exists() ? node_->member(key) : nullptr;
    return node == nullptr ? place() : node->keyPlace;
}

std::vector<std::string> StudySection::keysInOrder() const {
    std::vector<std::string> keys;
    if (exists())
        for (const auto& [key, value] : node_->members)
            keys.push_back(key);
    return keys;
}

void StudySection::report(const std::string& code, const Place& place, std::string message,
                          std::string remedy, std::vector<std::string> values) {
    reading_->problems.push_back({code, place, std::move(message), std::move(remedy), std::move(values)});
}

void StudySection::reportKind(const std::string& key, const TomlNode& node, const char* wanted) {
    reading_->faulty.insert(pathOf(key));
    report("toml.type", node.place,
           fmt::format("“{}” is {}, and should be {}.", key, kindInWords(node.kind), wanted),
           fmt::format("Write {} here.", wanted), {key, kindInWords(node.kind), wanted});
}

const TomlNode* StudySection::find(const std::string& key, Need need) {
    known_.push_back(key);
    if (!exists())
        return nullptr;
    const TomlNode* node = node_->member(key);
    if (node != nullptr) {
        reading_->places.set(pathOf(key), node->kind == Kind::Table ? node->keyPlace : node->place);
    } else if (need == Need::Required) {
        reading_->faulty.insert(pathOf(key));
        report("toml.missing-key", placeOf(key),
               path_.empty() ? fmt::format("“{}” is missing.", key)
                             : fmt::format("“{}” is missing from [{}].", key, path_),
               "Add it.", {key, path_});
    }
    return node;
}

std::string StudySection::text(const std::string& key, Need need) {
    const TomlNode* node = find(key, need);
    if (node == nullptr)
        return {};
    if (node->kind != Kind::Text) {
        reportKind(key, *node, "a text in quotes");
        return {};
    }
    return node->text;
}

std::vector<std::string> StudySection::textList(const std::string& key, Need need,
                                                std::vector<Place>& places) {
    const TomlNode* node = find(key, need);
    if (node == nullptr)
        return {};
    if (node->kind != Kind::Array) {
        reportKind(key, *node, "an array of texts");
        return {};
    }
    std::vector<std::string> texts;
    for (const TomlNode& item : node->items) {
        if (item.kind != Kind::Text)
            reportKind(key, item, "an array of texts");
        texts.push_back(item.kind == Kind::Text ? item.text : "?");
        places.push_back(item.place);
    }
    return texts;
}

long long StudySection::integer(const std::string& key, Need need, long long standard, long long low,
                                long long high) {
    const TomlNode* node = find(key, need);
    if (node == nullptr)
        return standard;
    if (node->kind != Kind::Integer) {
        reportKind(key, *node, "a whole number");
        return standard;
    }
    if (node->integer < low || node->integer > high) {
        reading_->faulty.insert(pathOf(key));
        report("study.range", node->place, fmt::format("“{}” is {}.", key, node->integer),
               fmt::format("Write a whole number from {} to {}.", low, high),
               {key, std::to_string(node->integer), std::to_string(low), std::to_string(high)});
        return standard;
    }
    return node->integer;
}

double StudySection::number(const std::string& key, double standard, double low, double high) {
    const TomlNode* node = find(key, Need::Optional);
    if (node == nullptr)
        return standard;
    if (node->kind != Kind::Number && node->kind != Kind::Integer) {
        reportKind(key, *node, "a number");
        return standard;
    }
    if (!(node->number >= low && node->number <= high) || !std::isfinite(node->number)) {
        reading_->faulty.insert(pathOf(key));
        report("study.range", node->place, fmt::format("“{}” is {}.", key, node->number),
               std::isinf(high) ? fmt::format("Write a finite number, at least {}.", low)
                                : fmt::format("Write a number from {} to {}.", low, high),
               {key, fmt::format("{}", node->number), fmt::format("{}", low), fmt::format("{}", high)});
        return standard;
    }
    return node->number;
}

bool StudySection::flag(const std::string& key, bool standard) {
    const TomlNode* node = find(key, Need::Optional);
    if (node == nullptr)
        return standard;
    if (node->kind != Kind::Flag) {
        reportKind(key, *node, "true or false");
        return standard;
    }
    return node->flag;
}

std::size_t StudySection::choice(const std::string& key, const std::vector<std::string>& phrases) {
    const TomlNode* node = find(key, Need::Optional);
    if (node == nullptr)
        return 0;
    if (node->kind != Kind::Text) {
        reportKind(key, *node, "a text in quotes");
        return 0;
    }
    const auto found = std::find(phrases.begin(), phrases.end(), node->text);
    if (found != phrases.end())
        return static_cast<std::size_t>(found - phrases.begin());
    reading_->faulty.insert(pathOf(key));
    std::string list;
    for (std::size_t i = 0; i < phrases.size(); ++i)
        list += (i == 0 ? "“" : i + 1 == phrases.size() ? " or “" : ", “") + phrases[i] + "”";
    report("study.choice", node->place, fmt::format("“{}” cannot be “{}”.", key, node->text),
           fmt::format("Write {}.", list), {key, node->text, list});
    return 0;
}

StudySection StudySection::table(const std::string& key, Need need) {
    const TomlNode* node = find(key, need);
    if (node != nullptr && node->kind != Kind::Table) {
        reportKind(key, *node, "a table");
        node = nullptr;
    }
    return StudySection(reading_, node, pathOf(key));
}

std::vector<StudySection> StudySection::tables(const std::string& key) {
    const TomlNode* node = find(key, Need::Optional);
    if (node == nullptr)
        return {};
    if (node->kind != Kind::Array) {
        reportKind(key, *node, "an array of tables");
        return {};
    }
    std::vector<StudySection> sections;
    for (std::size_t i = 0; i < node->items.size(); ++i) {
        const TomlNode& item = node->items[i];
        if (item.kind == Kind::Table)
            sections.push_back(StudySection(reading_, &item, fmt::format("{}.{}", pathOf(key), i)));
        else
            reportKind(key, item, "an array of tables");
    }
    return sections;
}

void StudySection::checkText(const std::string& key) {
    if (isText(key))
        checkText(node_->member(key)->text, placeOf(key));
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

void StudySection::alsoKnows(std::initializer_list<std::string_view> keys) {
    known_.insert(known_.end(), keys.begin(), keys.end());
}

void StudySection::refuseUnknownKeys() {
    if (!exists())
        return;
    int named = 0;
    for (const auto& [key, value] : node_->members)
        if (std::find(known_.begin(), known_.end(), key) == known_.end() && named++ < kKeysNamed)
            report("toml.unknown-key", value.keyPlace,
                   path_.empty() ? fmt::format("“{}” is not a key of a study.", key)
                                 : fmt::format("“{}” is not a key of [{}].", key, path_),
                   didYouMean(key, known_), {key, path_});
}

} // namespace whichway
