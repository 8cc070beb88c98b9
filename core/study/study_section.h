// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/files/toml_table.h"
#include "core/result.h"
#include "core/study/study_file.h"

#include <optional>
#include <set>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// One table of study.toml while it is read: a TomlTable whose questions know ranges and phrases, always give
/// a usable value, and note where each value stands. The places and problems that `parse` was given must
/// outlive all sections.
class StudySection {
public:
    enum class Need { Optional, Required };

    /// The root table, or nothing where the file is no TOML (reported).
    static std::optional<StudySection> parse(std::string_view content, const std::string& file,
                                             StudyPlaces& places, std::vector<Error>& problems);

    bool exists() const { return table_.has_value(); } ///< false: the table was not there or no table
    bool has(const std::string& key) const { return exists() && table_->has(key); }
    bool isText(const std::string& key) const { return exists() && table_->isText(key); }
    bool isList(const std::string& key) const { return exists() && table_->isList(key); }
    /// Whether a question about `key` reported something.
    bool isFaulty(const std::string& key) const;
    Place place() const { return placeOf(""); }
    /// Of a dotted path below this table; of the nearest table around it where it is absent.
    Place placeOf(const std::string& path) const;
    Place keyPlaceOf(const std::string& key) const; ///< of the key itself, not of its value
    std::vector<std::string> keysInOrder() const;

    std::string text(const std::string& key, Need need);
    std::vector<std::string> textList(const std::string& key, Need need, std::vector<Place>& places);
    /// `standard` where the key is absent or no whole number from `low` to `high` (reported).
    long long integer(const std::string& key, Need need, long long standard, long long low, long long high);
    /// `standard` where the key is absent or no number from `low` to `high` (reported).
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

    void alsoKnows(const std::string& key);
    void refuseUnknownKeys();
    void report(const std::string& code, const Place& place, std::string message, std::string remedy,
                std::vector<std::string> values = {});

private:
    StudySection(std::optional<TomlTable> table, StudyPlaces& places, std::vector<Error>& problems,
                 std::string path);
    /// Notes the place of `key`, and reports it if it is needed and absent. @return whether it is there
    bool look(const std::string& key, Need need);
    std::string pathOf(const std::string& key) const;

    std::optional<TomlTable> table_;
    StudyPlaces* places_;
    std::vector<Error>* problems_;
    std::string path_;
    std::set<std::string> outOfRange_ = {};
};

} // namespace whichway
