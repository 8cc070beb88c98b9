// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once

#include "core/result.h"

#include <cstddef>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace whichway {

/// A table of a TOML file, read strictly: each look-up reports a missing key or a value of another type with
/// its place, and `refuseOthers` reports every key that was never looked up, naming the nearest one that was.
/// Problems go to the list that `parse` was given, which must outlive all tables of the file.
class TomlTable {
public:
    /// @return nothing, after reporting the reason of `parseToml` (toml_tree.h), if the text is no TOML 1.0.
    static std::optional<TomlTable> parse(std::string_view content, const std::string& file,
                                          std::vector<Error>& problems);

    bool has(const std::string& key) const;
    bool isText(const std::string& key) const;
    bool isList(const std::string& key) const;
    /// Whether a look-up of `key` reported something.
    bool isFaulty(const std::string& key) const;
    Place place() const;                         ///< of the name in the table's header, or of an inline table
    Place placeOf(const std::string& key) const; ///< of the value, or of the table if there is no such key
    Place keyPlaceOf(const std::string& key) const; ///< of the key itself, or of the table
    /// Of the values in the list `key`; none if it is no list.
    std::vector<Place> itemPlacesOf(const std::string& key) const;

    // Without the key: the default, and "toml.missing-key" if there is none.
    std::string text(const std::string& key, std::optional<std::string> otherwise = std::nullopt);
    double number(const std::string& key, std::optional<double> otherwise = std::nullopt); ///< finite
    long long integer(const std::string& key, std::optional<long long> otherwise = std::nullopt);
    bool flag(const std::string& key, std::optional<bool> otherwise = std::nullopt);
    /// A list of texts; an absent key is an empty list. What is no text is reported and comes as "".
    std::vector<std::string> texts(const std::string& key);
    /// Reports "toml.missing-key" if there is no such key.
    void require(const std::string& key);
    /// A list of `length` numbers (any length if 0); an absent key is an empty list.
    std::vector<double> numbers(const std::string& key, std::size_t length = 0);
    /// A list of lists of `length` numbers; an absent key is an empty list.
    std::vector<std::vector<double>> rows(const std::string& key, std::size_t length);
    std::optional<TomlTable> table(const std::string& key); ///< nothing if absent
    std::vector<TomlTable> tables(const std::string& key);  ///< [[key]]; empty if absent
    std::vector<std::string> keys() const;                  ///< in the order of the file

    void report(const std::string& code, const Place& place, const std::string& message,
                const std::string& remedy = "", std::vector<std::string> values = {});
    /// Keys that are known though nobody looked them up.
    void alsoKnows(const std::string& key);
    void refuseOthers();

private:
    struct Document;
    struct View;
    explicit TomlTable(std::shared_ptr<View> view);
    std::shared_ptr<View> view_;
};

} // namespace whichway
