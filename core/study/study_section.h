// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/toml_tree.h"
#include "core/result.h"
#include "core/study/study_file.h"

#include <initializer_list>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// One table of study.toml while it is read: each question says what is expected of a key, answers with a
/// usable value in any case, and reports what is wrong. What was never asked for is an unknown key in the
/// end. The places and problems that `parse` was given must outlive all sections.
class StudySection {
public:
    enum class Need { Optional, Required };

    /// The root table, or nothing where the file is no TOML (reported).
    static std::optional<StudySection> parse(std::string_view content, const std::string& file,
                                             StudyPlaces& places, std::vector<Error>& problems);

    bool exists() const { return node_ != nullptr; } ///< false: the table was not there or no table
    bool has(std::string_view key) const;
    bool isText(std::string_view key) const;
    bool isList(std::string_view key) const;
    /// Whether a problem was reported at the value of the dotted path below this table.
    bool isFaulty(const std::string& path) const;
    Place place() const { return placeOf(""); }
    /// Of a dotted path below this table; of the nearest table around it where it is absent.
    Place placeOf(const std::string& path) const;
    Place keyPlaceOf(const std::string& key) const; ///< of the key itself, not of its value
    std::vector<std::string> keysInOrder() const;

    std::string text(const std::string& key, Need need);
    std::vector<std::string> textList(const std::string& key, Need need, std::vector<Place>& places);
    /// `standard` where the key is absent or no whole number from `low` to `high` (reported).
    long long integer(const std::string& key, Need need, long long standard, long long low, long long high);
    /// `standard` where the key is absent or no finite number from `low` to `high` (reported).
    double number(const std::string& key, double standard, double low, double high);
    bool flag(const std::string& key, bool standard);
    /// Index of the phrase that stands there; 0 where the key is absent or says something else (reported).
    std::size_t choice(const std::string& key, const std::vector<std::string>& phrases);
    StudySection table(const std::string& key, Need need);
    std::vector<StudySection> tables(const std::string& key);

    /// Where the key holds a text: that people can read it, not blank, not endless, without control
    /// characters but line ends and tabs. "study.text".
    void checkText(const std::string& key);
    void checkText(const std::string& text, const Place& place);

    void alsoKnows(std::initializer_list<std::string_view> keys);
    void refuseUnknownKeys();
    void report(const std::string& code, const Place& place, std::string message, std::string remedy,
                std::vector<std::string> values = {});

private:
    struct Reading; ///< what all sections of a file share
    StudySection(std::shared_ptr<Reading> reading, const TomlNode* node, std::string path);
    const TomlNode* find(const std::string& key, Need need);
    void reportKind(const std::string& key, const TomlNode& node, const char* wanted);
    std::string pathOf(const std::string& key) const;

    std::shared_ptr<Reading> reading_;
    const TomlNode* node_ = nullptr;
    std::string path_ = {};
    std::vector<std::string> known_ = {};
};

} // namespace whichway
